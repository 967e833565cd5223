import { countText } from "../recording/counttext.js";
import { type LatchmapError, latchmapError } from "../recording/errors.js";
import { placeCount } from "../recording/layout.js";
import { placeName, type Recording, type Values } from "../recording/recording.js";
import type { ByteSource } from "./bytesource.js";
import { elementOfDescr, type Fault, type NpyElement } from "./npyelements.js";
import { type NpyHeader, readNpyHeader } from "./npyheader.js";
import { axesText, layoutOfShape, type NpyWish, shapeText } from "./npylayout.js";
import { indexInC, isSpread, valuesInC } from "./npyorder.js";

/**
 * Opens an NPY array of shape [time], [time, place] or [time, row, column] as a recording.
 *
 * Arrays in C order are read slab by slab; where the bytes lie as the machine wants them, values are
 * views of what the source gave, without a copy. In Fortran order a time step is spread over the whole
 * file, so it is read whole at the first read and turned round. Bool comes as uint8, float16 as
 * float32, 8-byte integers as float64 if they lie within ±2^53. NaN is a gap; infinite values are
 * read as they are.
 *
 * @throws {LatchmapError} `unknown-format`, `unsafe-file`, `damaged-file` or `empty-file` when the
 * file cannot be read, `bad-setting` when the wish does not fit the array
 */
export async function openNpy(
  source: ByteSource,
  wish: NpyWish = {},
): Promise<{ readonly recording: Recording; readonly notes: readonly string[] }> {
  const header = await readNpyHeader(source);
  const element = elementOfDescr(header.descr, source.name);
  const layout = layoutOfShape(header.shape, wish, source.name);
  requireWhole(source, header, element);
  const array: OpenArray = {
    source,
    element,
    layout,
    dataStart: header.dataStart,
    shape: header.shape,
    each: placeCount(layout),
  };
  return {
    recording: {
      layout,
      timeSteps: header.shape[0],
      time: { kind: "steps" },
      element: element.element,
      origin: { file: source.name, format: "npy", bytes: source.size },
      mayHaveGaps: element.name.startsWith("float"),
      read: isSpread(header) ? readTurned(array) : readSlabs(array),
    },
    notes: [
      `array: NPY ${header.version}, ${shapeText(header.shape)} of ${element.name}${readAs(element)}, ${header.fortranOrder ? "Fortran" : "C"} order`,
      `axes: ${axesText(header.shape)}`,
    ],
  };
}

interface OpenArray {
  readonly source: ByteSource;
  readonly element: NpyElement;
  readonly layout: Recording["layout"];
  readonly dataStart: number;
  readonly shape: readonly number[];
  /** Values in each time step. */
  readonly each: number;
}

function readSlabs(array: OpenArray): Recording["read"] {
  const { source, element, each } = array;
  const stepBytes = element.bytes * each;
  return async (start, stop) => {
    const offset = array.dataStart + start * stepBytes;
    const bytes = await source.read(offset, (stop - start) * stepBytes);
    const fault = faultIn(array, (index) => start * each + index);
    return { start, steps: stop - start, values: element.decode(bytes, fault) };
  };
}

function readTurned(array: OpenArray): Recording["read"] {
  const { source, element, each, shape, dataStart } = array;
  const fault = faultIn(array, (index) => indexInC(index, shape));
  const turn = async (): Promise<Values> => {
    const bytes = await source.read(dataStart, source.size - dataStart);
    return valuesInC(element.decode(bytes, fault), shape);
  };
  let turned: Promise<Values> | undefined;
  return async (start, stop) => {
    turned ??= turn();
    const values = (await turned).subarray(start * each, stop * each);
    return { start, steps: stop - start, values };
  };
}

/** Puts time and place to a value that cannot be read; `cellOf` gives its position in C order. */
function faultIn(array: OpenArray, cellOf: (index: number) => number): Fault {
  return (index, is, remedy) => {
    const cell = cellOf(index);
    const time = Math.floor(cell / array.each);
    return latchmapError("not-a-number", `the value at time ${time} is ${is}`, remedy, {
      file: array.source.name,
      place: placeName(array, cell % array.each),
    });
  };
}

function requireWhole(source: ByteSource, header: NpyHeader, element: NpyElement): void {
  const { shape, dataStart } = header;
  const file = source.name;
  const cells = shape.reduce((product, length) => product * length, 1);
  if (cells === 0) {
    throw latchmapError(
      "empty-file",
      `the array is ${shapeText(shape)}: it holds no values`,
      "Check how it was made",
      { file },
    );
  }
  const wanted = cells * element.bytes;
  const there = source.size - dataStart;
  if (wanted === there) return;
  throw there < wanted ? cutShort(file, shape, element, there) : tooLong(file, wanted, there);
}

function cutShort(
  file: string,
  shape: readonly number[],
  element: NpyElement,
  there: number,
): LatchmapError {
  const wanted = shape.reduce((product, length) => product * length, element.bytes);
  return latchmapError(
    "damaged-file",
    `the file is cut short: ${shapeText(shape)} values of ${element.name} take ${count(wanted)} bytes, and ${count(there)} are there`,
    "Copy or write it again",
    { file },
  );
}

function tooLong(file: string, wanted: number, there: number): LatchmapError {
  return latchmapError(
    "damaged-file",
    `the values take ${count(wanted)} bytes, and ${count(there)} are there: ${count(there - wanted)} too many`,
    "Save one array a file",
    { file },
  );
}

function readAs({ name, element }: NpyElement): string {
  return name === element ? "" : ` read as ${element}`;
}

function count(bytes: number): string {
  return countText(bytes);
}
