/** A block of states that repeats in time and in space, shape [timeRepeat, rowRepeat, columnRepeat]. */
export interface Block {
  /** Steps after which the same states stand in the same places again. */
  readonly timeRepeat: number;
  /** Rows of a grid after which the states repeat; 1 on a line. */
  readonly rowRepeat: number;
  /** Columns of a grid, or cells of a line, after which the states repeat. */
  readonly columnRepeat: number;
  readonly block: Int32Array;
}

/** A block with the size of what has to fit. */
export interface Pattern extends Block {
  /** Cells of a line, or each side of a square on a grid, that must fit to count as background. */
  readonly patch: number;
}

/**
 * The different ways in which one moment of a block can lie on a lattice. Phase p wants the state
 * `wanted[p · rowRepeat · columnRepeat + r · columnRepeat + c]` wherever row and column leave the
 * remainders r and c.
 */
export interface Phases {
  readonly count: number;
  readonly rowRepeat: number;
  readonly columnRepeat: number;
  readonly wanted: Int32Array;
}

/** All phases of a block, moment by moment and shift by shift, none of them twice. */
export function phasesOf({ timeRepeat, rowRepeat, columnRepeat, block }: Block): Phases {
  const size = rowRepeat * columnRepeat;
  const kept = new Map<string, Int32Array>();
  for (let moment = 0; moment < timeRepeat; moment++) {
    for (let down = 0; down < rowRepeat; down++) {
      for (let along = 0; along < columnRepeat; along++) {
        const phase = new Int32Array(size);
        for (let i = 0; i < size; i++) {
          const row = (Math.floor(i / columnRepeat) + down) % rowRepeat;
          phase[i] = block[moment * size + row * columnRepeat + ((i + along) % columnRepeat)];
        }
        const key = phase.join();
        if (!kept.has(key)) kept.set(key, phase);
      }
    }
  }
  const wanted = new Int32Array(kept.size * size);
  [...kept.values()].forEach((phase, p) => {
    wanted.set(phase, p * size);
  });
  return { count: kept.size, rowRepeat, columnRepeat, wanted };
}
