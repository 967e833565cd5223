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
  await store.set(ROOT, listing(group, metadata));
}

/**
 * The metadata of a group, bytes of its `zarr.json`, with one more member in its list; as it is where
 * it has no list.
 */
export function withMember(group: Uint8Array, member: string, metadata: Uint8Array): Uint8Array {
  const known = parsed(group);
  const list = known.consolidated_metadata;
  if (typeof list !== "object" || list === null || !("metadata" in list)) return group;
  const all = Object.entries({ ...Object(list.metadata), [member]: parsed(metadata) });
  const ascending = all.sort(([a], [b]) => (a < b ? -1 : 1));
  return listing(known, Object.fromEntries(ascending));
}

type Json = Readonly<Record<string, unknown>>;

function listing(group: Json, metadata: Json): Uint8Array<ArrayBuffer> {
  const list = { kind: "inline", must_understand: false, metadata };
  const whole = { ...group, consolidated_metadata: list };
  return new TextEncoder().encode(`${JSON.stringify(whole, null, 2)}\n`);
}

function parsed(bytes: Uint8Array): Json {
  return JSON.parse(new TextDecoder().decode(bytes));
}

async function readJson(store: AsyncReadable, path: `/${string}`): Promise<Json> {
  const bytes = await store.get(path);
  if (bytes === undefined) throw new RangeError(`there is no ${path} to consolidate`);
  return parsed(bytes);
}
