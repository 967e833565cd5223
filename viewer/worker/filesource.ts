import type { ByteSource } from "../../src/formats/bytesource.js";

/** A dropped or chosen file as a source of bytes; nothing is read before it is asked for. */
export function fileSource(file: File): ByteSource {
  return {
    name: file.name,
    size: file.size,
    read: async (offset, length) => {
      const bytes = new Uint8Array(await file.slice(offset, offset + length).arrayBuffer());
      if (bytes.length === length) return bytes;
      throw new RangeError(`${file.name} ended at byte ${offset + bytes.length}`);
    },
  };
}
