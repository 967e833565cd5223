/**
 * Bytes that can be read from any position: a file on disk, a dropped file, a buffer.
 * The rooms below `run` read through this and never touch a file themselves.
 */
export interface ByteSource {
  /** The name to show in messages: the file's own name, without a path. */
  readonly name: string;
  readonly size: number;
  /** Exactly the bytes from `offset` up to `offset + length`; rejects when there are fewer. */
  read(offset: number, length: number): Promise<Uint8Array<ArrayBuffer>>;
}

/** Bytes already in memory as a source. */
export function bytesInMemory(name: string, bytes: Uint8Array<ArrayBuffer>): ByteSource {
  return {
    name,
    size: bytes.length,
    read: async (offset, length) => {
      if (offset + length > bytes.length) {
        throw new RangeError(
          `${name} has ${bytes.length} bytes; ${offset + length} were asked for`,
        );
      }
      return bytes.subarray(offset, offset + length);
    },
  };
}
