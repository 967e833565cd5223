import type { Bodies } from "./bodies.js";
import { DisjointSets } from "./disjointsets.js";

/**
 * A strand: bodies of consecutive steps, each linked to the next and to nothing else, or what such
 * chains were simplified to. `ins` and `outs` are the strands that lead to it and on from it.
 */
export interface Strand {
  readonly start: number;
  readonly end: number;
  /** Chains it is made of; each is a body, and the others follow it by `next`. */
  readonly chains: readonly number[];
  readonly ins: readonly number[];
  readonly outs: readonly number[];
}

interface Draft {
  start: number;
  end: number;
  chains: number[];
  ins: number[];
  outs: number[];
}

/** Most strands touch no other, and share this list, to which nothing is ever added. */
const NONE: number[] = [];

/** The strands of a map of bodies, and how to walk their chains. */
export interface StrandMap {
  readonly strands: readonly Strand[];
  /** The body that each leads to within its chain; −1 at the end. */
  readonly next: Int32Array;
}

/**
 * Cuts the bodies into strands wherever bodies join or part, and takes back the cuts that are none:
 * spurs shorter than `leastSteps` that lead nowhere, and pieces that part and are together again within
 * fewer steps. Bodies that hang together over fewer steps than that are left out altogether.
 */
export function strandsOf(bodies: Bodies, leastSteps: number): StrandMap {
  const next = onlyLinks(bodies);
  const drafts = draftStrands(bodies, next, leastSteps);
  simplifyInPlace(drafts, leastSteps);
  return { strands: numberedAnew(drafts), next };
}

/** The body that each leads to, where both have no other; −1 elsewhere. */
function onlyLinks({ count, links, linkFrom, linkTo }: Bodies): Int32Array {
  const outs = new Uint8Array(count);
  const ins = new Uint8Array(count);
  for (let i = 0; i < links; i++) {
    if (outs[linkFrom[i]] < 2) outs[linkFrom[i]]++;
    if (ins[linkTo[i]] < 2) ins[linkTo[i]]++;
  }
  const next = new Int32Array(count).fill(-1);
  for (let i = 0; i < links; i++) {
    if (outs[linkFrom[i]] === 1 && ins[linkTo[i]] === 1) next[linkFrom[i]] = linkTo[i];
  }
  return next;
}

function draftStrands(bodies: Bodies, next: Int32Array, leastSteps: number): (Draft | undefined)[] {
  const { count, time, links, linkFrom, linkTo } = bodies;
  const lasting = lastingBodies(bodies, leastSteps);
  const follows = new Uint8Array(count);
  for (let body = 0; body < next.length; body++) if (next[body] >= 0) follows[next[body]] = 1;
  const strandOf = new Int32Array(count).fill(-1);
  const drafts: Draft[] = [];
  for (let body = 0; body < count; body++) {
    if (lasting[body] === 0 || follows[body] === 1) continue;
    let end = body;
    for (let at = body; at >= 0; at = next[at]) {
      strandOf[at] = drafts.length;
      end = at;
    }
    drafts.push({ start: time[body], end: time[end], chains: [body], ins: NONE, outs: NONE });
  }
  for (let i = 0; i < links; i++) {
    if (lasting[linkFrom[i]] === 0 || next[linkFrom[i]] === linkTo[i]) continue;
    const before = drafts[strandOf[linkFrom[i]]];
    const after = drafts[strandOf[linkTo[i]]];
    if (before.outs === NONE) before.outs = [strandOf[linkTo[i]]];
    else before.outs.push(strandOf[linkTo[i]]);
    if (after.ins === NONE) after.ins = [strandOf[linkFrom[i]]];
    else after.ins.push(strandOf[linkFrom[i]]);
  }
  return drafts;
}

/** 1 for each body that hangs together, by links of any kind, with others over so many steps. */
function lastingBodies(
  { count, time, links, linkFrom, linkTo }: Bodies,
  leastSteps: number,
): Uint8Array {
  const sets = new DisjointSets(count);
  for (let i = 0; i < links; i++) sets.unite(linkFrom[i], linkTo[i]);
  const lasting = new Uint8Array(count);
  for (let body = count - 1; body >= 0; body--) {
    // The leader is the least body of its set, which is one of its first moment.
    const leader = sets.find(body);
    if (time[body] - time[leader] + 1 >= leastSteps) lasting[leader] = 1;
    lasting[body] = lasting[leader];
  }
  return lasting;
}

/** Simplifies until nothing changes, the shortest strands first, then again all that were touched. */
function simplifyInPlace(drafts: (Draft | undefined)[], leastSteps: number): void {
  let waiting = new Set<number>();
  drafts.forEach((draft, number) => {
    if (draft !== undefined && draft.ins.length + draft.outs.length > 0) waiting.add(number);
  });
  while (waiting.size > 0) {
    const touched = new Set<number>();
    for (const number of shortestFirst(drafts, waiting)) {
      const draft = drafts[number];
      if (draft === undefined) continue;
      const around = [number, ...draft.ins, ...draft.outs];
      const changed =
        dropSpur(drafts, number, leastSteps) ||
        mergeBeside(drafts, number, leastSteps) ||
        mergeAfter(drafts, number);
      if (changed) for (const strand of around) touched.add(strand);
    }
    waiting = touched;
  }
}

function shortestFirst(drafts: readonly (Draft | undefined)[], among: Set<number>): number[] {
  const steps = (number: number): number => {
    const draft = drafts[number];
    return draft === undefined ? 0 : draft.end - draft.start;
  };
  return [...among].sort((a, b) => steps(a) - steps(b) || a - b);
}

/** Drops a short strand that begins or ends in nothing, where all it hangs on goes on without it. */
function dropSpur(drafts: (Draft | undefined)[], number: number, leastSteps: number): boolean {
  const draft = drafts[number];
  if (draft === undefined || draft.end - draft.start + 1 >= leastSteps) return false;
  const { ins, outs } = draft;
  if (ins.length > 0 && outs.length > 0) return false;
  const needed =
    ins.some((before) => drafts[before]?.outs.length === 1) ||
    outs.some((after) => drafts[after]?.ins.length === 1);
  if (needed || ins.length + outs.length === 0) return false;
  for (const before of ins) remove(drafts[before]?.outs, number);
  for (const after of outs) remove(drafts[after]?.ins, number);
  drafts[number] = undefined;
  return true;
}

/** Merges a short strand with one that parts from and comes back to the same two strands. */
function mergeBeside(drafts: (Draft | undefined)[], number: number, leastSteps: number): boolean {
  const draft = drafts[number];
  if (draft === undefined || draft.end - draft.start + 1 >= leastSteps) return false;
  if (draft.ins.length !== 1 || draft.outs.length !== 1) return false;
  const [before] = draft.ins;
  const [after] = draft.outs;
  const beside = drafts[before]?.outs.find((other) => {
    const candidate = drafts[other];
    return (
      other !== number &&
      candidate?.ins.length === 1 &&
      candidate.outs.length === 1 &&
      candidate.outs[0] === after
    );
  });
  const kept = beside === undefined ? undefined : drafts[beside];
  if (kept === undefined) return false;
  kept.chains.push(...draft.chains);
  remove(drafts[before]?.outs, number);
  remove(drafts[after]?.ins, number);
  drafts[number] = undefined;
  return true;
}

/** Joins a strand with the one after it where neither has another. */
function mergeAfter(drafts: (Draft | undefined)[], number: number): boolean {
  const draft = drafts[number];
  if (draft === undefined || draft.outs.length !== 1) return false;
  const [after] = draft.outs;
  const other = drafts[after];
  if (other === undefined || other.ins.length !== 1) return false;
  draft.end = other.end;
  draft.chains.push(...other.chains);
  draft.outs = other.outs;
  for (const later of other.outs) replace(drafts[later]?.ins, after, number);
  drafts[after] = undefined;
  return true;
}

function remove(list: number[] | undefined, number: number): void {
  const at = list?.indexOf(number) ?? -1;
  if (at >= 0) list?.splice(at, 1);
}

function replace(list: number[] | undefined, old: number, number: number): void {
  const at = list?.indexOf(old) ?? -1;
  if (list !== undefined && at >= 0) list[at] = number;
}

/** Strands keep what they lead to, but are numbered without those that are gone. */
function numberedAnew(drafts: readonly (Draft | undefined)[]): Strand[] {
  const number = new Int32Array(drafts.length);
  const strands: Draft[] = [];
  drafts.forEach((draft, old) => {
    if (draft === undefined) return;
    number[old] = strands.length;
    strands.push(draft);
  });
  for (const strand of strands) {
    if (strand.ins.length > 0) strand.ins = strand.ins.map((old) => number[old]);
    if (strand.outs.length > 0) strand.outs = strand.outs.map((old) => number[old]);
  }
  return strands;
}
