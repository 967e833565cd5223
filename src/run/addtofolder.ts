import { mkdir, rename, rm } from "node:fs/promises";
import { dirname, join } from "node:path";
import { systemCode } from "./files.js";
import { writeError } from "./wholefolder.js";

/**
 * Adds entries to a folder that exists, all of them or none: `fill` writes them into a temporary folder
 * within, from where they are moved at the end. Entries of the same names are replaced; those that were
 * not written this time are taken away, so that nothing is left of an earlier run.
 *
 * @param entries every entry that may be written, as paths within the folder
 * @throws {LatchmapError} `cannot-write`; whatever `fill` throws. The folder is then as it was
 */
export async function addToFolder<T>(
  folder: string,
  entries: readonly string[],
  fill: (temporary: string) => Promise<T>,
): Promise<T> {
  const temporary = join(folder, `.partial-${process.pid}`);
  const [fresh, old] = [join(temporary, "new"), join(temporary, "old")];
  const moved: (readonly [from: string, to: string])[] = [];
  const move = async (from: string, to: string): Promise<void> => {
    await mkdir(dirname(to), { recursive: true });
    const there = await rename(from, to).then(
      () => true,
      (cause: unknown) => {
        if (systemCode(cause) === "ENOENT") return false;
        throw cause;
      },
    );
    if (there) moved.push([from, to]);
  };
  try {
    await mkdir(fresh, { recursive: true });
    const outcome = await fill(fresh);
    for (const entry of entries) {
      await move(join(folder, entry), join(old, entry));
      await move(join(fresh, entry), join(folder, entry));
    }
    return outcome;
  } catch (cause) {
    for (const [from, to] of moved.reverse()) await rename(to, from).catch(() => {});
    throw writeError(folder, cause);
  } finally {
    await rm(temporary, { recursive: true, force: true });
  }
}
