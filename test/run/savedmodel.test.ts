import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { recordingInMemory } from "../../src/recording/memory.js";
import type { Recording } from "../../src/recording/recording.js";
import { selectPlaces } from "../../src/recording/selection.js";
import { applyModel } from "../../src/run/applymodel.js";
import { jobInMemory, mapInMemory } from "../../src/run/memory.js";
import { silentProgress } from "../../src/run/progress.js";
import type { MapRequest } from "../../src/run/request.js";
import { modelText, parseModel } from "../../src/run/savedmodel.js";

const line = (values: ArrayLike<number>, cells: number): Recording =>
  recordingInMemory({
    values: Float64Array.from(values),
    layout: { kind: "line", cells, wrap: false },
  });

async function keptModel(recording: Recording, request: MapRequest) {
  const { saved } = await mapInMemory(recording, { ...request, keepModel: true });
  if (saved === undefined) throw new Error("no model was kept");
  return parseModel(modelText(saved), "model.json");
}

type Model = Awaited<ReturnType<typeof keptModel>>;

function applied(recording: Recording, model: Model, withEntropyRate = false) {
  const settings = { precision: "float64", withEntropyRate } as const;
  return jobInMemory(recording, settings, (sink) =>
    applyModel(
      recording,
      model,
      { ...settings, skip: 0, file: "model.json" },
      sink,
      silentProgress,
    ),
  );
}

const noise = (n: number, levels: number): number[] => {
  let x = 12345;
  return Array.from({ length: n }, () => {
    x = (Math.imul(1664525, x) + 1013904223) >>> 0;
    return Math.floor((x / 2 ** 32) * levels);
  });
};

describe("a model kept and applied", () => {
  it("to its own data gives the map of the fit, to the last bit", async () => {
    await fc.assert(
      fc.asyncProperty(
        fc.constantFrom<MapRequest>(
          { history: 2, states: { kind: "exact" } },
          { history: 3, delay: 2, states: { kind: "exact" }, pool: "each" },
          { lags: [1, 4], states: { kind: "quantile", bins: 3 }, pool: "each" },
          { history: 14, states: { kind: "width", bins: 6 } },
          { history: 2, estimator: "gaussian", pool: "each" },
        ),
        fc.array(fc.integer({ min: 0, max: 5 }), { minLength: 120, maxLength: 120 }),
        async (request, values) => {
          const varied = values.map((value, i) => (i < 12 ? i % 6 : value));
          const recording = line(varied, 2);
          const fitted = await mapInMemory(recording, request);
          const again = await applied(recording, await keptModel(recording, request));
          expect(again.storage).toEqual(fitted.storage);
          expect(again.summary.samples).toBe(fitted.summary.samples);
          const apart = Math.abs(again.summary.storage_bits - fitted.summary.storage_bits);
          expect(apart).toBeLessThanOrEqual(1e-11);
        },
      ),
      { numRuns: 40 },
    );
  });

  it("gives windows that it never saw no value, and says how many", async () => {
    const model = await keptModel(line([0, 1, 0, 1, 0, 1, 0, 1, 0, 1], 1), {
      history: 1,
      states: { kind: "exact" },
    });
    const map = await applied(line([0, 1, 1, 0, 1, 0], 1), model);
    // 1 → 1 was never seen; the other four windows were.
    expect([...map.storage].map(Number.isNaN)).toEqual([true, false, true, false, false, false]);
    expect(map.summary.samples).toBe(4);
    expect(map.summary.warnings.join(" ")).toMatch(/1 windows have a past or a next value/);
  });

  it("finds its places by name", async () => {
    const values = noise(80, 2);
    const named = recordingInMemory({
      values: Uint8Array.from(values),
      layout: { kind: "network", nodes: 2 },
      names: ["a", "b"],
    });
    const model = await keptModel(named, { history: 1, pool: "each" });
    const all = await mapInMemory(named, { history: 1, pool: "each" });
    const swapped = await applied(selectPlaces(named, [1, 0]), model);
    expect(swapped.places.map(({ place }) => place)).toEqual(["b", "a"]);
    expect(swapped.storage.filter((_, i) => i % 2 === 0)).toEqual(
      all.storage.filter((_, i) => i % 2 === 1),
    );
  });
});

describe("a model that does not fit is refused with what to do", () => {
  const recording = line(noise(200, 2), 1);
  const request: MapRequest = { history: 2, states: { kind: "exact" } };

  it("a value that is none of its states", async () => {
    const model = await keptModel(recording, request);
    await expect(applied(line([0, 1, 7, 0, 1], 1), model)).rejects.toThrow(
      "the value 7 is not among the states of the model (0, 1)",
    );
  });

  it("a place that it does not have", async () => {
    const model = await keptModel(line(noise(200, 2), 2), { ...request, pool: "each" });
    await expect(applied(line(noise(30, 2), 3), model)).rejects.toThrow(
      'the model has no place "2"; it has 0, 1',
    );
  });

  it("fewer steps than its history needs", async () => {
    const model = await keptModel(recording, request);
    await expect(applied(line([0, 1], 1), model)).rejects.toThrow(
      /history 2 needs at least 3 time steps/,
    );
  });

  it("neighbours and other estimators whose model is their data", async () => {
    const kept = mapInMemory(recording, { estimator: "kernel", history: 2, keepModel: true });
    await expect(kept).rejects.toThrow(/the model of the kernel estimator is its data/);
  });

  const edited = async (edit: (model: Record<string, unknown>) => void): Promise<string> => {
    const { saved } = await mapInMemory(recording, { ...request, keepModel: true });
    if (saved === undefined) throw new Error("no model was kept");
    const model: Record<string, unknown> = JSON.parse(modelText(saved));
    edit(model);
    return JSON.stringify(model);
  };

  it("a file cut short", async () => {
    const text = await edited(() => {});
    expect(() => parseModel(text.slice(0, -20), "m.json")).toThrow(
      "m.json: the model is no whole JSON text: it was cut short or edited",
    );
  });

  it("some other JSON", () => {
    expect(() => parseModel('{"a":1}', "m.json")).toThrow("m.json: this is no model of Latchmap");
  });

  it("a newer version", async () => {
    const text = await edited((model) => {
      model.latchmap_model = 2;
    });
    expect(() => parseModel(text, "m.json")).toThrow(
      "the model is of version 2, and this Latchmap reads version 1",
    );
  });

  for (const [title, edit, what] of [
    [
      "an estimator that is none",
      (model: Record<string, unknown>) => {
        model.estimator = "oracle";
      },
      /estimator of the model is missing or wrong/,
    ],
    [
      "lags that no longer fit the blocks",
      (model: Record<string, unknown>) => {
        model.lags = [1, 2, 3];
      },
      /its blocks do not fit its history and states/,
    ],
    [
      "states taken out",
      (model: Record<string, unknown>) => {
        model.states = { kind: "exact", symbols: [0] };
      },
      /its blocks do not fit its history and states/,
    ],
    [
      "a list of blocks taken out",
      (model: Record<string, unknown>) => {
        model.blocks = { groups: [], pasts: [], nexts: [] };
      },
      /blocks\.counts of the model is missing or wrong/,
    ],
  ] as const) {
    it(`hand-edited: ${title}`, async () => {
      const text = await edited(edit);
      expect(() => parseModel(text, "m.json")).toThrow(what);
    });
  }
});
