import { describe, expect, it } from "vitest";
import { findBackground } from "../../src/structures/background.js";
import { followDepartures, ringStates } from "../structures/followed.js";
import { type Kept, keptTo, RULE_54, RULE_110 } from "../structures/gliders.js";

const SEEDS = [1, 2, 3, 4, 5, 6, 7, 8, 9, 10];

describe("ten random first rows of 900 cells, 1,000 steps after the transient", () => {
  it("rule 110: gliders at published velocities, two kinds in each run and five in all (Cook 2004)", () => {
    const runs: Kept[] = [];
    for (const seed of SEEDS) {
      const table = ringStates(110, 900, 600, seed);
      expect(findBackground(table)).toMatchObject({ columnRepeat: 14, timeRepeat: 7 });
      runs.push(keptTo(RULE_110, followDepartures(table)));
    }
    for (const { ofLong } of runs) expect(ofLong.size).toBeGreaterThanOrEqual(2);
    expect(new Set(runs.flatMap(({ ofLong }) => [...ofLong])).size).toBeGreaterThanOrEqual(5);
    expect(shareNear(runs)).toBeGreaterThanOrEqual(0.9);
  });

  it("rule 54: particles that stand or move at 1 cell a step (Boccara, Nasser & Roger 1991)", () => {
    const runs: Kept[] = [];
    for (const seed of SEEDS) {
      const table = ringStates(54, 900, 1000, seed);
      expect(findBackground(table)).toMatchObject({ timeRepeat: 4 });
      runs.push(keptTo(RULE_54, followDepartures(table)));
    }
    for (const { ofRepeating } of runs) expect(ofRepeating.size).toBeGreaterThanOrEqual(2);
    expect(shareNear(runs)).toBeGreaterThanOrEqual(0.9);
  });
});

function shareNear(runs: readonly Kept[]): number {
  const near = runs.reduce((sum, run) => sum + run.near, 0);
  return near / runs.reduce((sum, run) => sum + run.long, 0);
}
