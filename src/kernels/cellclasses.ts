/** Levels a cell is held against, in the unit of the map; an infinite one lets nothing beyond it. */
export interface CellLevels {
  /** A cell at or above `above` (at or below `below`) belongs to a structure that has a strong cell. */
  readonly above: number;
  readonly below: number;
  /** A cell at or above `strongAbove` (at or below `strongBelow`) is strong itself. */
  readonly strongAbove: number;
  readonly strongBelow: number;
}

/**
 * The class of every cell: 2 strong and above, 1 above, −1 below, −2 strong and below, 0 neither or
 * NaN. The levels are rounded to the precision of the values first, so that a cell which is printed as
 * equal to a level is beyond it.
 */
export function classifyCells(
  values: Float32Array | Float64Array,
  count: number,
  levels: CellLevels,
  classes: Int8Array,
): void {
  const round = values instanceof Float32Array ? Math.fround : (level: number): number => level;
  const [above, below] = [round(levels.above), round(levels.below)];
  const [strongAbove, strongBelow] = [round(levels.strongAbove), round(levels.strongBelow)];
  for (let i = 0; i < count; i++) {
    const value = values[i];
    if (value >= above) classes[i] = value >= strongAbove ? 2 : 1;
    else if (value <= below) classes[i] = value <= strongBelow ? -2 : -1;
    else classes[i] = 0;
  }
}
