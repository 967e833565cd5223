import { strongerOf } from "../kernels/strongest.js";
import { type Layout, placeCount, spatialShape } from "../recording/layout.js";
import type { Values } from "../recording/recording.js";
import { BlockReducer } from "./strongest.js";

/** How large a map is. */
export interface MapExtent {
  readonly layout: Layout;
  readonly timeSteps: number;
}

/** The cells that a block of a level spans: `[time, place]`, on a grid `[time, row, column]`. */
export type LevelBlock = readonly number[];

/** Up to this many cells a map is read whole, and needs no pyramid. */
export const READ_WHOLE = 2 ** 24;

/** Blocks along a side of the coarsest level, at most. */
const COARSEST = 1024;
/** Cells a block of the finest level, at least: together the levels take a sixth of the map at most. */
const FINEST = 8;
/** How much wider a block is than that of the level beneath. */
const STEP = 4;

/**
 * The levels of a map's pyramid, the finest first; none for a map that is read whole. Each level is
 * coarser along both sides alike, so that the blocks of the coarsest fill a screen, whatever the shape
 * of the map. The nodes of a network are not merged, since they may be shown in any order; nor are the
 * steps of a grid, which is looked at frame by frame.
 */
export function pyramidLevels(
  { layout, timeSteps }: MapExtent,
  readWhole = READ_WHOLE,
): LevelBlock[] {
  if (timeSteps * placeCount(layout) <= readWhole) return [];
  const widest = (length: number): number =>
    2 ** Math.ceil(Math.log2(Math.max(1, length / COARSEST)));
  const coarsest = blockFor(layout, widest(timeSteps), widest(Math.max(...spatialShape(layout))));
  const levels: LevelBlock[] = [];
  for (let divide = 1; ; divide *= STEP) {
    const block = coarsest.map((length) => Math.max(1, length / divide));
    if (block.reduce((cells, length) => cells * length, 1) < FINEST) return levels;
    levels.unshift(block);
  }
}

function blockFor(layout: Layout, time: number, place: number): number[] {
  switch (layout.kind) {
    case "line":
      return [time, place];
    case "network":
      return [time, 1];
    case "grid":
      return [1, place, place];
  }
}

/** The extent of a level: blocks along time and space. */
export function levelShape({ layout, timeSteps }: MapExtent, block: LevelBlock): number[] {
  return [timeSteps, ...spatialShape(layout)].map((length, axis) =>
    Math.ceil(length / block[axis]),
  );
}

/** Takes finished rows of a level, shape [rows, block…]; they hold until the next only. */
export type LevelSink = (level: number, rows: Float32Array, count: number) => void;

/** Builds the levels of a pyramid from a map that comes in time order. */
export class PyramidBuilder {
  readonly #steps: readonly LevelStep[];
  readonly #sink: LevelSink;
  readonly #watching: BlockReducer;

  /**
   * @param levels as `pyramidLevels` gives them
   * @param rest what stands out least, a 32-bit number
   */
  constructor(extent: MapExtent, levels: readonly LevelBlock[], rest: number, sink: LevelSink) {
    const reducer = new BlockReducer();
    this.#watching = new BlockReducer(true);
    let below = [extent.timeSteps, ...spatialShape(extent.layout)];
    let finer: LevelBlock = below.map(() => 1);
    this.#sink = sink;
    this.#steps = levels.map((block, level) => {
      const step = new LevelStep(
        level === 0 ? this.#watching : reducer,
        below,
        block.map((length, axis) => length / finer[axis]),
        rest,
      );
      below = levelShape(extent, block);
      finer = block;
      return step;
    });
  }

  /** The least and the greatest number of the map so far, in 32 bits. */
  get range(): readonly [least: number, greatest: number] {
    return this.#watching.range;
  }

  /** Takes the next time steps, shape [steps, place]. */
  add(values: Values): void {
    if (this.#steps.length === 0) this.#watching.watch(values);
    else this.#pass(0, values);
  }

  /** Hands out what is left. */
  finish(): void {
    for (let level = 0; level < this.#steps.length; level++) {
      const last = this.#steps[level].rest();
      if (last !== undefined) this.#hand(level, last);
    }
  }

  #pass(level: number, values: Values): void {
    if (level < this.#steps.length) {
      this.#steps[level].add(values, (rows) => this.#hand(level, rows));
    }
  }

  #hand(level: number, rows: Float32Array): void {
    this.#sink(level, rows, rows.length / this.#steps[level].width);
    this.#pass(level + 1, rows);
  }
}

/** From one level to the next: gathers rows until they make whole blocks. */
class LevelStep {
  readonly width: number;
  readonly #reducer: BlockReducer;
  readonly #below: readonly number[];
  readonly #block: readonly number[];
  readonly #rest: number;
  /** The block that is not yet whole, and the rows of the level beneath in it. */
  readonly #open: Float32Array;
  #held = 0;

  constructor(
    reducer: BlockReducer,
    below: readonly number[],
    block: readonly number[],
    rest: number,
  ) {
    this.#reducer = reducer;
    this.#below = below;
    this.#block = block;
    this.#rest = rest;
    this.width = below
      .slice(1)
      .reduce((blocks, length, axis) => blocks * Math.ceil(length / block[axis + 1]), 1);
    this.#open = new Float32Array(this.width);
  }

  add(values: Values, hand: (rows: Float32Array) => void): void {
    const [block] = this.#block;
    const cells = this.#below.slice(1).reduce((product, length) => product * length, 1);
    const steps = values.length / cells;
    let step = 0;
    while (step < steps) {
      const whole = this.#held === 0 ? Math.floor((steps - step) / block) : 0;
      const taken = whole > 0 ? whole * block : Math.min(block - this.#held, steps - step);
      const rows = this.#reduced(values, step * cells, taken);
      step += taken;
      if (whole > 0) {
        hand(rows);
        continue;
      }
      this.#merge(rows);
      this.#held += taken;
      if (this.#held < block) continue;
      this.#held = 0;
      hand(this.#open);
    }
  }

  /** The last block, where it is not whole. */
  rest(): Float32Array | undefined {
    if (this.#held === 0) return undefined;
    this.#held = 0;
    return this.#open;
  }

  #merge(rows: Float32Array): void {
    if (this.#held === 0) {
      this.#open.set(rows);
      return;
    }
    for (let i = 0; i < rows.length; i++) {
      this.#open[i] = strongerOf(rows[i], this.#open[i], this.#rest);
    }
  }

  #reduced(values: Values, offset: number, steps: number): Float32Array {
    const [block, ...spatial] = this.#block;
    const [, first, second] = this.#below;
    const blocks = new Float32Array(Math.ceil(steps / block) * this.width);
    if (second === undefined) {
      const across = { stride: 1, cells: first, block: spatial[0] };
      const down = { stride: first, cells: steps, block };
      this.#reducer.reduce(values, { offset, across, down }, this.#rest, blocks);
      return blocks;
    }
    const across = { stride: 1, cells: second, block: spatial[1] };
    const down = { stride: second, cells: first, block: spatial[0] };
    for (let step = 0; step < steps; step++) {
      const frame = { offset: offset + step * first * second, across, down };
      const to = blocks.subarray(step * this.width, (step + 1) * this.width);
      this.#reducer.reduce(values, frame, this.#rest, to);
    }
    return blocks;
  }
}
