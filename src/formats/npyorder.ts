import { elementOf, type Values, zeros } from "../recording/recording.js";

/** Whether the values of a time step lie scattered; with one axis in use both orders are the same. */
export function isSpread(array: {
  readonly fortranOrder: boolean;
  readonly shape: readonly number[];
}): boolean {
  return array.fortranOrder && array.shape.filter((length) => length > 1).length > 1;
}

/**
 * Values that lie in Fortran order (the first axis fastest), copied into C order. ndarray-ops walks
 * the two orders block by block; a tiled loop of our own was no faster (10⁷ cells of float64: 70 to
 * 90 ms either way; of uint8: 25 to 60 ms against 40 to 70). The library is loaded here, since few
 * arrays need it and it costs start-up time.
 */
export async function valuesInC(values: Values, shape: readonly number[]): Promise<Values> {
  const [{ default: ndarray }, { default: ops }] = await Promise.all([
    import("ndarray"),
    import("ndarray-ops"),
  ]);
  const turned = zeros(elementOf(values), values.length);
  const lengths = [...shape];
  ops.assign(ndarray(turned, lengths), ndarray(values, lengths, fortranStrides(shape)));
  return turned;
}

/** The position in C order of the value that lies at `index` in Fortran order. */
export function indexInC(index: number, shape: readonly number[]): number {
  const strides = fortranStrides(shape);
  return shape.reduce(
    (cell, length, axis) => cell * length + (Math.floor(index / strides[axis]) % length),
    0,
  );
}

function fortranStrides(shape: readonly number[]): number[] {
  let stride = 1;
  return shape.map((length) => {
    const own = stride;
    stride *= length;
    return own;
  });
}
