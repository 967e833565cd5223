import type { AsyncReadable, AsyncWritable } from "@zarrita/storage";

const ROOT = "/zarr.json";

/**
 * Writes the metadata of a group's members into the group's own, as Zarr v3 tools do, so that a reader
 * learns all that a group holds from one file.
 *
 * @param members paths of the arrays and groups within, as in `pyramid/local_storage/0`
 */
export async function consolidate(
  store: AsyncReadable & AsyncWritable,
  members: readonly string[],
): Promise<void> {
  const group = await readJson(store, ROOT);
  const metadata: Record<string, unknown> = {};
  for (const member of [...members].sort()) {
    metadata[member] = await readJson(store, `/${member}/zarr.json`);
  }
  const whole = {
    ...group,
    consolidated_metadata: { kind: "inline", must_understand: false, metadata },
  };
  await store.set(ROOT, new TextEncoder().encode(`${JSON.stringify(whole, null, 2)}\n`));
}

async function readJson(
  store: AsyncReadable,
  path: `/${string}`,
): Promise<Readonly<Record<string, unknown>>> {
  const bytes = await store.get(path);
  if (bytes === undefined) throw new RangeError(`there is no ${path} to consolidate`);
  return JSON.parse(new TextDecoder().decode(bytes));
}
