import { uniformFloat64 } from "pure-rand/distribution/uniformFloat64";
import { xoroshiro128plus } from "pure-rand/generator/xoroshiro128plus";
import {
  type CommonWindows,
  commonWindows,
  type StateTable,
} from "../../src/reach/commonwindows.js";
import { evenLags } from "../../src/reach/longest.js";
import { poolAll } from "../../src/recording/pools.js";
import type { ValueTable } from "../../src/storage/windows.js";

/** Uniform numbers 0 ≤ u < 1 from a seed, by the generator itself and not by the streams under test. */
export function uniforms(seed: number): () => number {
  const generator = xoroshiro128plus(seed);
  for (let i = 0; i < 20; i++) generator.next();
  return () => uniformFloat64(generator);
}

/** Standard normal numbers (Box & Muller 1958). */
export function normals(seed: number): () => number {
  const uniform = uniforms(seed);
  return () => Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform());
}

/** One place's states as a table. */
export function oneSeries(states: ArrayLike<number>, alphabet: number): StateTable {
  return { states: Int32Array.from(states), timeSteps: states.length, places: 1, alphabet };
}

/** One place's values as a table. */
export function oneValueSeries(values: ArrayLike<number>): ValueTable {
  return { values: Float64Array.from(values), timeSteps: values.length, places: 1 };
}

/** The windows of one series that are whole for the lags 1 … longest. */
export function windowsOf(table: StateTable, longest: number): CommonWindows {
  const choice = { lags: evenLags(longest, 1), skip: 0, pool: poolAll(table.places) };
  return commonWindows(table, choice);
}

/** Draws a symbol from a list of probabilities that add up to 1. */
export function drawn(probabilities: readonly number[], uniform: () => number): number {
  let rest = uniform();
  for (let symbol = 0; symbol < probabilities.length - 1; symbol++) {
    rest -= probabilities[symbol];
    if (rest < 0) return symbol;
  }
  return probabilities.length - 1;
}

/** Independent symbols, all equally likely. */
export function whiteSymbols(alphabet: number, steps: number, seed: number): Int32Array {
  const uniform = uniforms(seed);
  return Int32Array.from({ length: steps }, () => Math.floor(uniform() * alphabet));
}

/**
 * A Markov chain with probabilities drawn at random, uniform on all distributions, until its oldest lag
 * matters: changing it moves the distribution of the next symbol by 0.2 on average (total variation).
 */
export function markovSymbols(
  order: number,
  alphabet: number,
  steps: number,
  seed: number,
): Int32Array {
  const uniform = uniforms(1000 * order + 100_000 * alphabet + seed);
  let rows = randomRows(order, alphabet, uniform);
  while (oldestMoves(rows, order, alphabet) < 0.2) rows = randomRows(order, alphabet, uniform);
  const states = new Int32Array(steps);
  let context = 0;
  for (let step = -1000; step < steps; step++) {
    const symbol = drawn(rows[context], uniform);
    context = (context * alphabet + symbol) % rows.length;
    if (step >= 0) states[step] = symbol;
  }
  return states;
}

function randomRows(order: number, alphabet: number, uniform: () => number): number[][] {
  return Array.from({ length: alphabet ** order }, () => {
    const weights = Array.from({ length: alphabet }, () => -Math.log(1 - uniform()));
    const total = weights.reduce((sum, weight) => sum + weight, 0);
    return weights.map((weight) => weight / total);
  });
}

/** Contexts have the oldest symbol as their first digit. */
function oldestMoves(rows: readonly number[][], order: number, alphabet: number): number {
  const rest = alphabet ** (order - 1);
  let sum = 0;
  let pairs = 0;
  for (let newer = 0; newer < rest; newer++) {
    for (let a = 0; a < alphabet; a++) {
      for (let b = 0; b < a; b++) {
        const [one, other] = [rows[a * rest + newer], rows[b * rest + newer]];
        sum += one.reduce((apart, p, i) => apart + Math.abs(p - other[i]) / 2, 0);
        pairs++;
      }
    }
  }
  return sum / pairs;
}

/** Σ aⱼ x[n−j] + noise from standard normal noise, after a thousand steps to settle. */
export function autoregression(
  coefficients: Readonly<Record<number, number>>,
  steps: number,
  seed: number,
): Float64Array {
  const normal = normals(seed);
  const lead = 1000;
  const x = new Float64Array(lead + steps);
  const terms = Object.entries(coefficients).map(([lag, value]) => [Number(lag), value] as const);
  for (let n = 0; n < x.length; n++) {
    let sum = normal();
    for (const [lag, value] of terms) if (n >= lag) sum += value * x[n - lag];
    x[n] = sum;
  }
  return x.subarray(lead);
}
