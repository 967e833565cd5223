import { DisjointSets } from "./disjointsets.js";
import type { Strand } from "./strands.js";

/** Where strands join or part, with the short strands between them. */
export interface Knot {
  /** First and last step of it. */
  readonly start: number;
  readonly end: number;
  /** Long strands that run into it and that come out of it. */
  readonly ins: readonly number[];
  readonly outs: readonly number[];
  /** Strands that touch it, long or short: where it lies. */
  readonly at: readonly number[];
}

/** What the strands of a map come to: long strands, and the knots between them. */
export interface KnotMap {
  readonly knots: readonly Knot[];
  /** The knot that each strand comes out of and runs into; −1 for none. */
  readonly from: Int32Array;
  readonly into: Int32Array;
}

/** Gathers the ends of strands that lead into each other, and the strands shorter than `leastSteps`. */
export function knotsOf(strands: readonly Strand[], leastSteps: number): KnotMap {
  const sets = new DisjointSets(2 * strands.length);
  const isLong = ({ start, end }: Strand): boolean => end - start + 1 >= leastSteps;
  strands.forEach((strand, number) => {
    for (const after of strand.outs) sets.unite(2 * number + 1, 2 * after);
    if (!isLong(strand)) sets.unite(2 * number, 2 * number + 1);
  });
  const numberOf = new Map<number, number>();
  const knots: { start: number; end: number; ins: number[]; outs: number[]; at: number[] }[] = [];
  const knotAt = (end: number): number => {
    const leader = sets.find(end);
    const known = numberOf.get(leader);
    if (known !== undefined) return known;
    numberOf.set(leader, knots.length);
    knots.push({ start: Number.POSITIVE_INFINITY, end: -1, ins: [], outs: [], at: [] });
    return knots.length - 1;
  };
  const from = new Int32Array(strands.length).fill(-1);
  const into = new Int32Array(strands.length).fill(-1);
  const touch = (number: number, step: number, strand: number): void => {
    const knot = knots[number];
    knot.start = Math.min(knot.start, step);
    knot.end = Math.max(knot.end, step);
    knot.at.push(strand);
  };
  strands.forEach((strand, number) => {
    const long = isLong(strand);
    if (!long || strand.ins.length > 0) {
      from[number] = knotAt(2 * number);
      touch(from[number], strand.start, number);
      if (long) knots[from[number]].outs.push(number);
    }
    if (!long || strand.outs.length > 0) {
      into[number] = knotAt(2 * number + 1);
      touch(into[number], strand.end, number);
      if (long) knots[into[number]].ins.push(number);
    }
  });
  return { knots, from, into };
}
