/** How many surrogates a test takes. */
export interface TestWish {
  /** Surrogates at most; at least 1. */
  readonly surrogates: number;
  /**
   * The test stops once so many surrogates have reached the observed value: it is then plainly within
   * its null. It never stops early when left out.
   * @see Besag & Clifford 1991, Biometrika 78:301–304
   */
  readonly stopAfter?: number;
}

/** What a test found. */
export interface TestResult {
  /** 0 < p ≤ 1; NaN where there was nothing to test. */
  readonly p: number;
  /** Surrogates that counted; fewer than asked where the test stopped. */
  readonly surrogates: number;
  /** How many of them reached the observed value; ties count. */
  readonly reached: number;
  readonly stopped: boolean;
  /** Mean and standard deviation of the measure over those surrogates. */
  readonly nullMean: number;
  readonly nullDeviation: number;
}

/** Values closer than this count as equal, in bits: the same table summed in another order. */
const TIE = 1e-12;
/** And closer than this share of the observed value. */
const TIE_SHARE = 100 * Number.EPSILON;

/** Whether a surrogate's value reaches the observed one; near ties do, and so does NaN. */
export function reaches(value: number, observed: number): boolean {
  return !(value < observed - Math.max(TIE, TIE_SHARE * Math.abs(observed)));
}

/**
 * A one-sided test in the making: surrogates come in any batches and any order, and count in the order
 * of their numbers, so that the result does not depend on who computed what when. With all surrogates
 * p = (reached + 1) / (drawn + 1); where the test stopped, p = reached / drawn.
 *
 * @see Phipson & Smyth 2010, Stat. Appl. Genet. Mol. Biol. 9:39, p is never 0
 */
export class SequentialTest {
  readonly #observed: number;
  readonly #most: number;
  readonly #stopAfter: number;
  readonly #waiting = new Map<number, ArrayLike<number>>();
  #drawn = 0;
  #reached = 0;
  #mean = 0;
  #squares = 0;

  constructor(observed: number, { surrogates, stopAfter }: TestWish) {
    this.#observed = observed;
    this.#most = Number.isNaN(observed) ? 0 : surrogates;
    this.#stopAfter = stopAfter ?? Number.POSITIVE_INFINITY;
  }

  /** Whether more surrogates would change nothing. */
  get done(): boolean {
    return this.#reached >= this.#stopAfter || this.#drawn >= this.#most;
  }

  /** Surrogates counted so far, from number 0 on. */
  get drawn(): number {
    return this.#drawn;
  }

  /** Takes the measure of the surrogates `first`, `first` + 1, …; those beyond the end are ignored. */
  take(first: number, values: ArrayLike<number>): void {
    if (this.done) return;
    this.#waiting.set(first, values);
    for (;;) {
      const next = this.#waiting.get(this.#drawn);
      if (next === undefined || this.done) return;
      this.#waiting.delete(this.#drawn);
      for (let i = 0; i < next.length && !this.done; i++) this.#count(next[i]);
    }
  }

  #count(value: number): void {
    this.#drawn++;
    if (reaches(value, this.#observed)) this.#reached++;
    const apart = value - this.#mean;
    this.#mean += apart / this.#drawn;
    this.#squares += apart * (value - this.#mean);
  }

  /** What the surrogates counted so far say. */
  result(): TestResult {
    const drawn = this.#drawn;
    const reached = this.#reached;
    const stopped = reached >= this.#stopAfter && drawn < this.#most;
    const all = Number.isNaN(this.#observed) ? Number.NaN : (reached + 1) / (drawn + 1);
    return {
      p: stopped ? reached / drawn : all,
      surrogates: drawn,
      reached,
      stopped,
      nullMean: drawn === 0 ? Number.NaN : this.#mean,
      nullDeviation: drawn > 1 ? Math.sqrt(this.#squares / (drawn - 1)) : Number.NaN,
    };
  }
}

/** The test of a measure whose surrogates are computed here, one after the other. */
export function sequentialTest(
  observed: number,
  surrogate: (index: number) => number,
  wish: TestWish,
): TestResult {
  const test = new SequentialTest(observed, wish);
  while (!test.done) test.take(test.drawn, [surrogate(test.drawn)]);
  return test.result();
}
