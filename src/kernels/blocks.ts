/**
 * The plain twins of the hot loops: what people read. The compiled kernels do the same to the bit;
 * `workspace.ts` picks which of the two runs.
 *
 * A block is a past together with its next value. Its code is Σ x[n − lag_j]·alphabet^j with the next
 * value as digit 0 and the newest lag as digit 1; its id is the code plus the base of its place's group.
 */

/** Symbols 0 … alphabet−1, −1 a gap, shape [row, place]. */
export type StateArray = Int8Array | Int16Array | Int32Array;

/** The shape of blocks with evenly spaced lags. */
export interface EvenBlocks {
  readonly places: number;
  readonly alphabet: number;
  readonly history: number;
  readonly delay: number;
}

/** The shape of blocks with any lags, ascending. */
export interface LaggedBlocks {
  readonly places: number;
  readonly alphabet: number;
  readonly lags: Int32Array;
}

/** A tally being filled; sums are fixed-point steps. Place sums add up, row sums are set. */
export interface TallyArrays {
  /** Three words a place: storage, surprise, and samples + 2³² · negative samples. */
  readonly placeSums: BigInt64Array;
  readonly rowStorage: BigInt64Array;
  readonly rowSamples: Uint32Array;
}

/**
 * Ids of the rows `from` … `to`−1, each from the row one delay earlier, which must be there already.
 * `ids` begins with row `first`, so that a short buffer can follow a long slab. A gap counts as symbol 0, to be blanked afterwards; ids of rows before the first whole window are
 * those of shorter blocks. Where `counts` is given, every id is counted at once, of rows from the
 * first delay on; that saves a second look at the ids.
 */
export function rollIds(
  states: StateArray,
  from: number,
  to: number,
  shape: EvenBlocks,
  bases: Uint32Array,
  ids: Uint32Array,
  first = 0,
  counts?: Uint32Array,
): void {
  const { places, alphabet, history, delay } = shape;
  const window = (history + 1) * delay;
  const blocks = alphabet ** (history + 1);
  for (let row = from; row < to; row++) {
    for (let place = 0; place < places; place++) {
      const at = row * places + place;
      const out = at - first * places;
      let code = Math.max(0, states[at]);
      if (row >= delay) code += (ids[out - delay * places] - bases[place]) * alphabet;
      if (row >= window) code -= Math.max(0, states[at - window * places]) * blocks;
      ids[out] = bases[place] + code;
      if (counts !== undefined && row >= delay) counts[ids[out]]++;
    }
  }
}

/** Ids of the rows `from` … `to`−1 with any lags; rows before the largest lag are left as they are. */
export function gatherIds(
  states: StateArray,
  from: number,
  to: number,
  shape: LaggedBlocks,
  bases: Uint32Array,
  ids: Uint32Array,
): void {
  const { places, alphabet, lags } = shape;
  for (let row = Math.max(from, lags[lags.length - 1]); row < to; row++) {
    for (let place = 0; place < places; place++) {
      const at = row * places + place;
      let code = 0;
      for (let j = lags.length - 1; j >= 0; j--) {
        code = code * alphabet + Math.max(0, states[at - lags[j] * places]);
      }
      ids[at] = bases[place] + code * alphabet + Math.max(0, states[at]);
    }
  }
}

/** Sets the id of every block that touches a gap to `none`. */
export function blankIds(
  states: StateArray,
  rows: number,
  places: number,
  lags: Int32Array,
  none: number,
  ids: Uint32Array,
): void {
  for (let row = 0; row < rows; row++) {
    for (let place = 0; place < places; place++) {
      if (states[row * places + place] >= 0) continue;
      ids[row * places + place] = none;
      for (const lag of lags) {
        if (row + lag < rows) ids[(row + lag) * places + place] = none;
      }
    }
  }
}

/** Counts how often each id occurs, on top of what `counts` holds. */
export function countIds(ids: Uint32Array, counts: Uint32Array): void {
  for (let i = 0; i < ids.length; i++) counts[ids[i]]++;
}

/** The table's entry for every id. */
export function lookUpIds<Table extends Float32Array | Float64Array>(
  ids: Uint32Array,
  table: Table,
  out: Table,
): void {
  for (let i = 0; i < ids.length; i++) out[i] = table[ids[i]];
}

/**
 * Adds up what a table says of every id, by place and by row; ids equal to `none` do not count.
 *
 * @param pairs two words an id: storage, whose sign says whether the past misled, and surprise
 */
export function tallyIds(
  ids: Uint32Array,
  rows: number,
  places: number,
  pairs: BigInt64Array,
  none: number,
  tally: TallyArrays,
): void {
  for (let row = 0; row < rows; row++) {
    let sum = 0n;
    let samples = 0;
    for (let place = 0; place < places; place++) {
      const id = ids[row * places + place];
      if (id === none) continue;
      const bits = pairs[2 * id];
      sum += bits;
      samples++;
      tally.placeSums[3 * place] += bits;
      tally.placeSums[3 * place + 1] += pairs[2 * id + 1];
      tally.placeSums[3 * place + 2] += bits < 0n ? NEGATIVE_SAMPLE : SAMPLE;
    }
    tally.rowStorage[row] = sum;
    tally.rowSamples[row] = samples;
  }
}

const SAMPLE = 1n;
const NEGATIVE_SAMPLE = (1n << 32n) + 1n;
