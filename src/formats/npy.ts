import ndarray from "ndarray";
import ops from "ndarray-ops";
import { latchmapError } from "../recording/errors.js";
import type { Layout, LayoutKind } from "../recording/layout.js";
import { recordingInMemory } from "../recording/memory.js";
import { elementOf, type Recording, type Values, zeros } from "../recording/recording.js";
import type { ByteSource } from "./bytesource.js";
import { type NpyHeader, readNpyHeader } from "./npyheader.js";
import { decoderOf, type NumberDecoder } from "./npynumbers.js";

/** How a user wishes an array to lie; what is left out follows from its dimensions. */
export interface ArrayWish {
  readonly layout?: LayoutKind;
  readonly wrap?: boolean;
}

/**
 * Opens an NPY array: [time] is one place, [time, place] a line (or a network when asked),
 * [time, row, column] a grid. Arrays in C order are read from the source slab by slab; those in
 * Fortran order are loaded and turned.
 *
 * @throws {LatchmapError} when the file is damaged, unsafe, or does not fit the wish
 */
export async function openNpy(
  source: ByteSource,
  wish: ArrayWish,
): Promise<{ readonly recording: Recording; readonly notes: readonly string[] }> {
  const header = await readNpyHeader(source);
  const decoder = decoderOf(header);
  const layout = layoutOf(header, wish, source.name);
  requireWholeData(source, header, decoder);
  const [timeSteps = 0] = header.shape;
  const cells = header.shape.reduce((product, length) => product * length, 1);
  const notes = [
    `an NPY array of ${decoder.words}, [${header.shape.join(", ")}]${header.fortranOrder && header.shape.length > 1 ? ", in Fortran order" : ""}`,
  ];
  const origin = { file: source.name, format: "NPY", bytes: source.size };
  if (header.fortranOrder && header.shape.length > 1) {
    const bytes = await source.read(header.dataStart, cells * decoder.width);
    const values = decoder.decode(bytes, fileAt(source, header, decoder, 0));
    return {
      recording: recordingInMemory({ values: inRowOrder(values, header.shape), layout, origin }),
      notes,
    };
  }
  const places = timeSteps === 0 ? 0 : cells / timeSteps;
  const recording: Recording = {
    layout,
    timeSteps,
    time: { kind: "steps" },
    element: decoder.element,
    origin,
    mayHaveGaps: decoder.element.startsWith("float") && !decoder.whole,
    read: async (start, stop) => {
      const first = start * places;
      const bytes = await source.read(
        header.dataStart + first * decoder.width,
        (stop - start) * places * decoder.width,
      );
      const values = decoder.decode(bytes, fileAt(source, header, decoder, first));
      return { start, steps: stop - start, values };
    },
  };
  return { recording, notes };
}

function layoutOf(header: NpyHeader, wish: ArrayWish, file: string): Layout {
  const { shape } = header;
  const wrap = wish.wrap ?? false;
  if (shape.length < 1 || shape.length > 3 || shape.includes(0)) {
    throw latchmapError(
      "unknown-format",
      `the array has ${shape.length === 0 ? "no dimensions" : `shape [${shape.join(", ")}]`}`,
      "Save it as [time], [time, place] or [time, row, column], with at least one of each",
      { file },
    );
  }
  const kind = wish.layout ?? (shape.length === 3 ? "grid" : "line");
  if ((kind === "grid") !== (shape.length === 3)) {
    throw latchmapError(
      "bad-setting",
      `the array has ${shape.length} dimension${shape.length === 1 ? "" : "s"}, which is no ${kind}`,
      kind === "grid"
        ? "Save it as [time, row, column], or choose --layout line or network"
        : "Leave --layout out, or choose --layout grid",
      { file, option: `--layout ${kind}` },
    );
  }
  const [, second = 1, third = 1] = shape;
  switch (kind) {
    case "grid":
      return { kind, rows: second, columns: third, wrap };
    case "network":
      return { kind, nodes: second };
    case "line":
      return { kind, cells: second, wrap };
  }
}

function requireWholeData(source: ByteSource, header: NpyHeader, decoder: NumberDecoder): void {
  const wanted = header.shape.reduce((product, length) => product * length, decoder.width);
  const held = source.size - header.dataStart;
  if (held === wanted) return;
  const should = `the array should have ${wanted.toLocaleString("en")} bytes of values`;
  throw latchmapError(
    "damaged-file",
    held < wanted
      ? `${should} and has ${held.toLocaleString("en")}: it was cut short`
      : `${should} and is followed by ${(held - wanted).toLocaleString("en")} more`,
    held < wanted ? "Copy or write the file again" : "Save one array a file, with numpy.save",
    { file: source.name },
  );
}

/** Says where in the array element `first + i` lies, for messages. */
function fileAt(
  source: ByteSource,
  header: NpyHeader,
  decoder: NumberDecoder,
  first: number,
): (i: number) => string {
  return (i) =>
    `${source.name}, element ${(first + i).toLocaleString("en")} of ${header.shape.join(" × ")} ${decoder.words}`;
}

/** Values in Fortran order, turned to row-major. */
function inRowOrder(values: Values, shape: readonly number[]): Values {
  const strides: number[] = [];
  let stride = 1;
  for (const length of shape) {
    strides.push(stride);
    stride *= length;
  }
  const turned = zeros(elementOf(values), values.length);
  ops.assign(ndarray(turned, [...shape]), ndarray(values, [...shape], strides));
  return turned;
}
