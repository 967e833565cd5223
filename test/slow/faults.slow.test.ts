import { describe, expect, it } from "vitest";
import { ormsleyLevels } from "../../samples/ormsley.js";
import {
  gauges,
  ORMSLEY_STEPS,
  type PlantedFault,
  plantedFaults,
} from "../../samples/ormsleyplan.js";
import { findFaults } from "../../src/structures/faults.js";
import { faultsByLot, misjudged } from "../structures/planted.js";

const PLACES = gauges.length;
const RECORDS = 60;
const KINDS = 5;
const SAMPLES = RECORDS * ORMSLEY_STEPS * PLACES;

function overSeeds(planted: (seed: number) => readonly PlantedFault[]): {
  readonly missed: string[];
  readonly invented: string[];
} {
  const all = { missed: [] as string[], invented: [] as string[] };
  for (let seed = 1; seed <= RECORDS; seed++) {
    const faults = planted(seed);
    const { missed, invented } = misjudged(findFaults(ormsleyLevels(seed, faults), PLACES), faults);
    for (const fault of missed) all.missed.push(`${seed}: ${fault.kind} at ${fault.gauge}`);
    for (const { kind, place, start } of invented) {
      all.invented.push(`${seed}: ${kind} at ${gauges[place].name}, step ${start}`);
    }
  }
  return all;
}

describe(`in ${RECORDS} records of the invented valley`, () => {
  it("all faults of its plan are found, with at most one false spell in 100,000 samples", () => {
    const { missed, invented } = overSeeds(() => plantedFaults);
    expect(missed).toEqual([]);
    expect(invented.length, invented.join("; ")).toBeLessThanOrEqual(SAMPLES / 100_000);
  });

  it("so are 99 in 100 faults of every kind at gauges and times drawn by lot", () => {
    const { missed, invented } = overSeeds(faultsByLot);
    expect(missed.length, missed.join("; ")).toBeLessThanOrEqual(0.01 * RECORDS * KINDS);
    expect(invented.length, invented.join("; ")).toBeLessThanOrEqual(SAMPLES / 100_000);
  });
});
