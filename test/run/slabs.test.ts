import { expect, it } from "vitest";
import { recordingInMemory } from "../../src/recording/memory.js";
import { silentProgress } from "../../src/run/progress.js";
import { longestStop, walkSlabs } from "../../src/run/slabs.js";

const recording = recordingInMemory({
  values: Int32Array.from({ length: 3_000_000 }, (_, i) => i),
  layout: { kind: "line", cells: 300, wrap: false },
});

it("a walk visits every step once, in order, each with its lead", async () => {
  const walk = { skip: 7, lead: 5 };
  const seen: number[] = [];
  await walkSlabs(recording, walk, "walking", silentProgress, ({ slab, lead }) => {
    expect(lead).toBe(seen.length === 0 ? 0 : 5);
    expect(slab.steps).toBeLessThanOrEqual(longestStop(recording, walk));
    for (let step = lead; step < slab.steps; step++) {
      expect(slab.values[step * 300]).toBe((slab.start + step) * 300);
      seen.push(slab.start + step);
    }
  });
  expect(seen).toEqual(Array.from({ length: 9_993 }, (_, i) => i + 7));
});

it("a cancelled walk stops between slabs and says so", async () => {
  let visits = 0;
  const progress = { ...silentProgress, cancelled: () => visits > 0 };
  const walk = walkSlabs(recording, { skip: 0, lead: 0 }, "walking", progress, () => {
    visits++;
  });
  await expect(walk).rejects.toThrow("the run was cancelled. Nothing was written");
  expect(visits).toBe(1);
});
