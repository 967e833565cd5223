import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { roomForRegions, roomForRuns } from "../../src/kernels/rooms.js";
import { FACT_COUNT } from "../../src/kernels/runregions.js";
import { openWorkspace, type Room, usableKernels } from "../../src/kernels/workspace.js";

interface Drawn {
  readonly shape: { readonly rows: number; readonly columns: number; readonly wrap: boolean };
  readonly steps: number;
  readonly precision: "float32" | "float64";
  readonly single: boolean;
  readonly neighbours: readonly number[];
  readonly values: readonly number[];
}

const entry = fc
  .record({
    steps: fc.integer({ min: 0, max: 2 }),
    rows: fc.integer({ min: -2, max: 2 }),
    least: fc.integer({ min: -3, max: 3 }),
    more: fc.integer({ min: 0, max: 3 }),
  })
  .map(({ steps, rows, least, more }) => [steps, rows, least, least + more]);

const drawn: fc.Arbitrary<Drawn> = fc
  .record({
    shape: fc.record({
      rows: fc.integer({ min: 1, max: 4 }),
      columns: fc.integer({ min: 7, max: 40 }),
      wrap: fc.boolean(),
    }),
    steps: fc.integer({ min: 1, max: 6 }),
    precision: fc.constantFrom("float32" as const, "float64" as const),
    single: fc.boolean(),
    neighbours: fc
      .array(fc.oneof(entry, fc.constant([0, 0, 1, 1])), { minLength: 1, maxLength: 5 })
      .map((entries) => entries.flat()),
  })
  .chain((wish) => {
    const length = wish.steps * wish.shape.rows * wish.shape.columns;
    const value = fc.oneof(
      fc.constantFrom(0, Number.NaN, 0.5, -0.5, 1.1, -1.1),
      fc.double({ min: -3, max: 3, noNaN: true }),
    );
    return fc
      .array(value, { minLength: length, maxLength: length })
      .map((values) => ({ ...wish, values }));
  });

const LEVELS = { above: 0.5, below: -0.5, strongAbove: 1.1, strongBelow: -1.1 };

function arraysFor(room: Room, { shape, steps, precision, neighbours, values }: Drawn) {
  const runs = values.length;
  return {
    values: room[precision](values.length),
    classes: room.int8(values.length),
    runs: roomForRuns(room, steps * shape.rows, runs),
    regions: roomForRegions(room, runs),
    neighbours: room.int32(neighbours.length),
    // Little room, so that joining has to stop and go on.
    contacts: room.uint32(4 + 2 * neighbours.length * 2 * shape.columns),
  };
}

/** Runs every loop, in one of the two ways, and gives all that they fill. */
function runAll(of: Drawn, kind: "compiled" | "plain") {
  const { arrays, kernels } = openWorkspace((room) => arraysFor(room, of), kind);
  const { values, classes, runs, regions, neighbours, contacts } = arrays;
  const rows = of.steps * of.shape.rows;
  values.set(of.values);
  neighbours.set(of.neighbours);
  kernels.classifyCells(values, values.length, LEVELS, classes);
  kernels.findRuns(classes, 0, rows, of.shape, of.single, runs);
  const touching: number[] = [];
  for (let row = 0; row < rows; ) {
    row = kernels.joinRuns(runs, row, rows, of.shape, neighbours, contacts);
    touching.push(row, ...contacts.subarray(2, 2 + 2 * contacts[0]));
  }
  const lead = Math.floor(of.steps / 3) * of.shape.rows;
  const range = { lead, end: rows, firstStep: 5, firstCell: 3000 };
  const rest = values.subarray(lead * of.shape.columns);
  const count = kernels.gatherRegions(rest, runs, range, of.shape, regions);
  const found = runs.rowStart[rows];
  const { rowStart, ...facts } = runs;
  return {
    classes,
    rowStart,
    facts: Object.values(facts).map((each) => each.slice(0, found)),
    touching,
    count,
    regionOf: regions.regionOf.slice(0, found),
    // The first word is for others to fill in.
    records: Array.from(regions.records.subarray(0, count * FACT_COUNT)).filter(
      (_, i) => i % FACT_COUNT > 0,
    ),
  };
}

describe("the compiled loops over runs and their plain twins", () => {
  it("are both at hand here", () => {
    expect(usableKernels()).toBe("compiled");
  });

  it("do the same, bit for bit", () => {
    fc.assert(
      fc.property(drawn, (of) => {
        expect(runAll(of, "compiled")).toEqual(runAll(of, "plain"));
      }),
      { numRuns: 200 },
    );
  });
});
