import { samples } from "../../samples/catalogue.js";
import { type ByteSource, bytesInMemory } from "../../src/formats/bytesource.js";
import { latchmapError } from "../../src/recording/errors.js";

/** The bytes of a sample's first file, made on the spot. */
export function sampleSource(name: string): ByteSource {
  const file = samples.find((sample) => sample.name === name)?.files()[0];
  if (file !== undefined) return bytesInMemory(file.name, file.bytes);
  throw latchmapError("bad-call", `there is no sample "${name}"`, "Reload the page");
}
