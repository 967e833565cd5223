import { readdir, stat } from "node:fs/promises";
import { join } from "node:path";
import FileSystemStore from "@zarrita/storage/fs";
import { consolidate } from "../formats/consolidate.js";

/** Lists all that lies in a Zarr folder in the folder's own metadata; called whenever something was added. */
export async function consolidateFolder(path: string): Promise<void> {
  await consolidate(new FileSystemStore(path), await membersOf(path, ""));
}

async function membersOf(root: string, within: string): Promise<string[]> {
  const members: string[] = [];
  for (const entry of await readdir(join(root, within), { withFileTypes: true })) {
    if (!entry.isDirectory()) continue;
    const member = within === "" ? entry.name : `${within}/${entry.name}`;
    const found = await stat(join(root, member, "zarr.json")).catch(() => undefined);
    if (found === undefined) continue;
    members.push(member, ...(await membersOf(root, member)));
  }
  return members;
}
