import { describe, expect, it } from "vitest";
import { type Symbols, splitClasses, symbolsOf, wholeClass } from "../../src/storage/classes.js";
import { countedParts, type JointRows } from "../../src/storage/countedparts.js";
import { gaussianNullMean, gaussianParts } from "../../src/storage/gaussianparts.js";
import type { InformationParts } from "../../src/storage/informationparts.js";
import type { JointWindows } from "../../src/storage/jointwindows.js";

/** The entropy of a coin that falls one way with the chance p, in bits. */
const coin = (p: number): number =>
  p === 0 || p === 1 ? 0 : -p * Math.log2(p) - (1 - p) * Math.log2(1 - p);

/** A pair of binary variables a and b: the chance that each is 1 next, given both now. */
interface Pair {
  readonly a: (a: number, b: number) => number;
  readonly b: (a: number, b: number) => number;
}

const BITS = [0, 1];
const STATES = BITS.flatMap((a) => BITS.map((b) => [a, b] as const));

/** The transition probability of a pair from one of its four states to another. */
function chance(pair: Pair, [a, b]: readonly [number, number], to: readonly [number, number]) {
  const one = (p: number, state: number): number => (state === 1 ? p : 1 - p);
  return one(pair.a(a, b), to[0]) * one(pair.b(a, b), to[1]);
}

/**
 * Every window of variable a with history k and one step of b's past, weighed with its chance in the
 * stationary state: what endless data would count.
 */
function endlessRows(pair: Pair, history: number): JointRows {
  let stationary = STATES.map(() => 0.25);
  for (let i = 0; i < 4000; i++) {
    stationary = STATES.map((to) =>
      STATES.reduce((sum, from, s) => sum + stationary[s] * chance(pair, from, to), 0),
    );
  }
  let paths = STATES.map((state, s) => ({ path: [state], weight: stationary[s] }));
  for (let step = 0; step < history; step++) {
    paths = paths.flatMap(({ path, weight }) =>
      STATES.map((to) => ({
        path: [...path, to],
        weight: weight * chance(pair, path[path.length - 1] ?? to, to),
      })),
    );
  }
  const met = paths.filter(({ weight }) => weight > 0);
  const column = (of: (path: readonly (readonly [number, number])[]) => number): Symbols => ({
    of: Uint32Array.from(met, ({ path }) => of(path)),
    alphabet: 2,
  });
  const own = Array.from({ length: history }, (_, step) => column((path) => path[step][0]));
  return {
    next: column((path) => path[history][0]),
    own: symbolsOf(
      own.reduce((classes, each) => splitClasses(classes, each), wholeClass(met.length)),
    ),
    sources: [column((path) => path[history - 1][1])],
    weights: Float64Array.from(met, ({ weight }) => weight),
  };
}

const partsOf = (pair: Pair, history: number): InformationParts =>
  countedParts(endlessRows(pair, history), { correction: "none" }).parts;

function expectParts(
  parts: InformationParts,
  wanted: { readonly storage: number; readonly kept: number; readonly transfer: number },
): void {
  expect(parts.storage.bits).toBeCloseTo(wanted.storage, 12);
  expect(parts.kept.bits).toBeCloseTo(wanted.kept, 12);
  expect(parts.joint.bits).toBeCloseTo(wanted.transfer, 12);
  expect(parts.transfers[0].bits).toBeCloseTo(wanted.transfer, 12);
  expect(parts.total).toBeCloseTo(wanted.storage + wanted.transfer, 12);
}

/** The chance of 1 where a state arrives turned over with the chance e. */
const noisy = (state: number, e: number): number => (state === 1 ? 1 - e : e);

describe("pairs whose parts follow from their transition probabilities", () => {
  // Each by hand, from the transition probabilities; h is the entropy of a coin.
  it("the own state turned over by a fair neighbour (XOR): nothing alone, all together", () => {
    const pair: Pair = { a: (a, b) => a ^ b, b: () => 0.5 };
    expectParts(partsOf(pair, 1), { storage: 0, kept: 1, transfer: 1 });
  });

  it("a copy of a fair neighbour: no storage, 1 bit of transfer (Schreiber 2000)", () => {
    const pair: Pair = { a: (_, b) => b, b: () => 0.5 };
    expectParts(partsOf(pair, 2), { storage: 0, kept: 0, transfer: 1 });
  });

  it("a copy of a neighbour that remembers: storage of a that b's past tells whole", () => {
    // b keeps its state with 0.9; a takes it over with 0.8. a is a hidden Markov chain's image; with
    // k = 1: a(n−1) and a(n) agree if none, or two, of three independent turns (0.2, 0.1, 0.2) happen.
    const pair: Pair = { a: (_, b) => noisy(b, 0.2), b: (_, b) => noisy(b, 0.1) };
    const turned = (p: number, q: number): number => p * (1 - q) + q * (1 - p);
    const apart = turned(turned(0.2, 0.1), 0.2);
    expectParts(partsOf(pair, 1), {
      storage: 1 - coin(apart),
      kept: 0,
      transfer: coin(apart) - coin(0.2),
    });
  });

  it("own memory beside a neighbour that does nothing: all of it is kept", () => {
    const pair: Pair = { a: (a) => noisy(a, 0.1), b: (_, b) => noisy(b, 0.3) };
    for (const history of [1, 2, 3]) {
      expectParts(partsOf(pair, history), {
        storage: 1 - coin(0.1),
        kept: 1 - coin(0.1),
        transfer: 0,
      });
    }
  });
});

describe("swap and invert with independent noise on every update", () => {
  // From the transition probabilities. Swap: a(n) is b(n−1) turned over with the chance e; all four
  // states are equally likely, and the own state two steps ago arrives turned over with 2e(1 − e).
  // Invert: a(n) is the other of a(n−1), turned over with the chance e; b does the same for itself.
  for (const e of [0.01, 0.05, 0.2]) {
    const swap: Pair = { a: (_, b) => noisy(b, e), b: (a) => noisy(a, e) };
    const invert: Pair = { a: (a) => noisy(1 - a, e), b: (_, b) => noisy(1 - b, e) };
    const round = 2 * e * (1 - e);

    it(`swap, noise ${e}: storage goes round through the other, none of it is kept`, () => {
      expectParts(partsOf(swap, 1), { storage: 0, kept: 0, transfer: 1 - coin(e) });
      expectParts(partsOf(swap, 2), {
        storage: 1 - coin(round),
        kept: 0,
        transfer: coin(round) - coin(e),
      });
    });

    it(`invert, noise ${e}: storage is kept whole, and the other adds nothing`, () => {
      for (const history of [1, 2]) {
        expectParts(partsOf(invert, history), {
          storage: 1 - coin(e),
          kept: 1 - coin(e),
          transfer: 0,
        });
      }
    });
  }
});

/** Windows whose covariance is exactly L·Lᵀ, and whose means are 0: orthogonal signs, mixed by L. */
function windowsOfCovariance(
  lower: readonly (readonly number[])[],
  own: number,
  perSource: number,
): JointWindows {
  const size = lower.length;
  const count = 2 ** size;
  const signs = (w: number): number[] =>
    Array.from({ length: size }, (_, i) => ((w >> i) & 1 ? 1 : -1));
  const rows = Array.from({ length: count }, (_, w) =>
    lower.map((row) => row.reduce((sum, weight, i) => sum + weight * (signs(w)[i] ?? 0), 0)),
  );
  const history = size - 1;
  return {
    ...{ count, history, future: 1, own, perSource, sources: (history - own) / perSource },
    past: Float64Array.from(rows.flatMap((row) => row.slice(0, history))),
    next: Float64Array.from(rows, (row) => row[history]),
    time: new Uint32Array(count),
    place: new Uint32Array(count),
    series: new Uint32Array(count),
  };
}

describe("Gaussian parts of x(n) = a·x(n−1) + c·y(n−1) + e, with y and e standard and white", () => {
  // By hand: the variance of x is V = (1 + c²)/(1 − a²), that left by the own past 1 + c², by y V − c²,
  // by both 1. Barnett, Barrett & Seth 2009, Phys. Rev. Lett. 103:238701, transfer as half the log ratio.
  for (const [a, c] of [
    [0.5, 0.8],
    [0.9, 0.1],
    [0, 2],
  ] as const) {
    it(`a = ${a}, c = ${c}`, () => {
      const variance = (1 + c * c) / (1 - a * a);
      const deviation = Math.sqrt(variance);
      const windows = windowsOfCovariance(
        [
          [deviation, 0, 0],
          [0, 1, 0],
          [a * deviation, c, 1],
        ],
        1,
        1,
      );
      const { parts } = gaussianParts(windows, { correction: "none", ridge: 0 });
      const half = (ratio: number): number => Math.log2(ratio) / 2;
      expectParts(parts, {
        storage: half(variance / (1 + c * c)),
        kept: half(variance - c * c),
        transfer: half(1 + c * c),
      });
    });
  }

  it("two sources that share one driver: each tells what both tell together", () => {
    // By hand: y and z = y + w with w standard; x = y + e. y leaves 1; z leaves 1 + ½; both leave 1.
    const windows = windowsOfCovariance(
      [
        [1, 0, 0, 0],
        [0, 1, 0, 0],
        [0, 1, 1, 0],
        [0, 1, 0, 1],
      ],
      1,
      1,
    );
    const { parts } = gaussianParts(windows, { correction: "none", ridge: 0 });
    expect(parts.storage.bits).toBeCloseTo(0, 12);
    expect(parts.transfers[0].bits).toBeCloseTo(Math.log2(2) / 2, 12);
    expect(parts.transfers[1].bits).toBeCloseTo(Math.log2(2 / 1.5) / 2, 12);
    expect(parts.joint.bits).toBeCloseTo(Math.log2(2) / 2, 12);
  });

  it("the mean of the null with one regressor is half the difference of two digammas", () => {
    // By hand for N = 5, one regressor, nothing known: (ψ(2) − ψ(1.5))/2 in nats; ψ(2) = 1 − γ,
    // ψ(3/2) = 2 − γ − 2 ln 2 (Abramowitz & Stegun 6.3.2, 6.3.4).
    expect(gaussianNullMean(5, 0, 1)).toBeCloseTo((2 * Math.LN2 - 1) / 2 / Math.LN2, 12);
  });
});
