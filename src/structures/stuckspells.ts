import type { Fault, FaultWish } from "./faultwish.js";
import type { HeldRun } from "./heldruns.js";

/** So many sightings weigh as much as what other values do. */
const PRIOR_SIGHTINGS = 10;
/** A run that has lasted so many steps tells how runs go on. */
const LONG_RUN = 3;

/**
 * Spells in which a value repeats. A value is taken to stay from step to step with a probability of its
 * own, told from all other runs: of all values, of runs that have lasted, and of this value; the largest
 * of the three decides.
 */
export function stuckSpells(place: number, runs: readonly HeldRun[], wish: FaultWish): Fault[] {
  const all = staysOf(runs);
  const ofValue = new Map<number, Stays>();
  for (const run of runs) {
    const known = ofValue.get(run.value);
    ofValue.set(run.value, known === undefined ? staysOf([run]) : added(known, staysOf([run])));
  }
  return runs.flatMap((run) => {
    const { value, start, end, count } = run;
    if (end - start < wish.stuckSteps) return [];
    const mine = staysOf([run]);
    const others = added(ofValue.get(value) ?? mine, mine, -1);
    const stay = stayProbability(added(all, mine, -1), others);
    const surprise = -(count - 1) * Math.log2(stay) - Math.log2(runs.length);
    if (surprise < wish.leastBits) return [];
    return [{ kind: "stuck" as const, place, start, end, surprise, size: value }];
  });
}

interface Stays {
  readonly stays: number;
  readonly steps: number;
  /** The same of runs that have lasted. */
  readonly longStays: number;
  readonly longSteps: number;
}

function staysOf(runs: readonly HeldRun[]): Stays {
  let [stays, steps, longStays, longSteps] = [0, 0, 0, 0];
  for (const { count } of runs) {
    stays += count - 1;
    steps += count;
    longStays += Math.max(0, count - LONG_RUN);
    longSteps += Math.max(0, count - LONG_RUN + 1);
  }
  return { stays, steps, longStays, longSteps };
}

function added(one: Stays, other: Stays, sign: 1 | -1 = 1): Stays {
  return {
    stays: one.stays + sign * other.stays,
    steps: one.steps + sign * other.steps,
    longStays: one.longStays + sign * other.longStays,
    longSteps: one.longSteps + sign * other.longSteps,
  };
}

function stayProbability(others: Stays, ofValue: Stays): number {
  const share = (stays: number, steps: number): number => (stays + 1) / (steps + 2);
  const overall = share(others.stays, others.steps);
  const lasting = share(others.longStays, others.longSteps);
  const own = (ofValue.stays + PRIOR_SIGHTINGS * overall) / (ofValue.steps + PRIOR_SIGHTINGS);
  return Math.max(overall, lasting, own);
}
