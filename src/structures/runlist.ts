/**
 * Stretches of marked cells over some time steps, ordered by time, row and cell. `from` and `to` (that
 * cell itself left out) count the cells from the first of these steps; no stretch leaves its row, not
 * even where the lattice wraps.
 */
export interface RunList {
  readonly start: number;
  readonly steps: number;
  readonly from: Uint32Array;
  readonly to: Uint32Array;
}

/**
 * The stretches of cells that are marked.
 * @param mask 1 where a cell is marked, else 0; shape [steps, row, column]
 */
export function runsOfMask(
  mask: Uint8Array,
  start: number,
  steps: number,
  columns: number,
): RunList {
  const from = new Uint32Array((mask.length >> 1) + 1 + mask.length / columns);
  const to = new Uint32Array(from.length);
  let count = 0;
  let at = mask.indexOf(1);
  while (at >= 0) {
    const edge = at - (at % columns) + columns;
    from[count] = at;
    while (at < edge && mask[at] === 1) at++;
    to[count++] = at;
    if (at < mask.length && mask[at] === 0) at = mask.indexOf(1, at);
    else if (at === mask.length) at = -1;
  }
  return { start, steps, from: from.slice(0, count), to: to.slice(0, count) };
}
