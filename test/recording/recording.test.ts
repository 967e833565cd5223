import { describe, expect, it } from "vitest";
import { describeLayout, spatialShape } from "../../src/recording/layout.js";
import { recordingInMemory } from "../../src/recording/memory.js";
import { PlaceSurveyor } from "../../src/recording/placesurvey.js";
import { placeName } from "../../src/recording/recording.js";
import { markGaps, selectPlaces, selectTimes } from "../../src/recording/selection.js";
import { firstIrregularStep, timeLabel } from "../../src/recording/time.js";

const table = recordingInMemory({
  values: Int16Array.from({ length: 12 }, (_, i) => i),
  layout: { kind: "network", nodes: 3 },
  names: ["a", "b", "c"],
  time: { kind: "numbers", name: "year", values: Float64Array.of(1990, 1991, 1992, 1993) },
});

const valuesOf = async (recording: typeof table): Promise<number[]> => {
  const slab = await recording.read(0, recording.timeSteps);
  return [...slab.values];
};

describe("a recording in memory", () => {
  it("gives any stretch of time steps, all places", async () => {
    const slab = await table.read(1, 3);
    expect({ ...slab, values: [...slab.values] }).toEqual({
      start: 1,
      steps: 2,
      values: [3, 4, 5, 6, 7, 8],
    });
  });

  it("refuses values that do not fill whole steps", () => {
    const parts = { values: new Float64Array(7), layout: { kind: "network", nodes: 3 } } as const;
    expect(() => recordingInMemory(parts)).toThrow(/7 values do not fill whole time steps of 3/);
  });

  it("refuses names that are not as many as the places", () => {
    const layout = { kind: "network", nodes: 3 } as const;
    expect(() => recordingInMemory({ values: new Float64Array(6), layout, names: ["a"] })).toThrow(
      /1 names for 3 places/,
    );
  });
});

describe("a selection", () => {
  it("of places keeps their names and the order asked for", async () => {
    const picked = selectPlaces(table, [2, 0]);
    expect(await valuesOf(picked)).toEqual([2, 0, 5, 3, 8, 6, 11, 9]);
    expect(picked.names).toEqual(["c", "a"]);
  });

  it("of times keeps their labels", async () => {
    const late = selectTimes(table, 2, 4);
    expect(await valuesOf(late)).toEqual([6, 7, 8, 9, 10, 11]);
    expect(timeLabel(late.time, 0)).toBe("1992");
  });

  it("of places is refused on a grid", () => {
    const grid = recordingInMemory({
      values: new Uint8Array(8),
      layout: { kind: "grid", rows: 2, columns: 2, wrap: false },
    });
    expect(() => selectPlaces(grid, [0])).toThrow(/places of a grid cannot be picked/);
  });

  it("a marked value becomes a gap", async () => {
    const marked = markGaps(table, 4);
    expect((await valuesOf(marked)).slice(3, 6)).toEqual([3, Number.NaN, 5]);
    expect(marked.mayHaveGaps).toBe(true);
  });
});

describe("names and layouts", () => {
  it("a cell of a grid is named row,column", () => {
    const layout = { kind: "grid", rows: 4, columns: 10, wrap: true } as const;
    expect(placeName({ layout }, 23)).toBe("2,3");
    expect(spatialShape(layout)).toEqual([4, 10]);
    expect(describeLayout(layout)).toBe("a grid of 4 × 10 cells, its ends joined");
  });
});

describe("time", () => {
  it("dates without a time of day print as the date", () => {
    const dates = Float64Array.of(Date.UTC(1961, 0, 1), Date.UTC(1961, 0, 1, 6));
    const axis = { kind: "dates", name: "date", values: dates } as const;
    expect([timeLabel(axis, 0), timeLabel(axis, 1)]).toEqual([
      "1961-01-01",
      "1961-01-01T06:00:00Z",
    ]);
  });

  it("the first uneven step is found", () => {
    const axis = (values: number[]) =>
      ({ kind: "numbers", name: "t", values: Float64Array.from(values) }) as const;
    expect(firstIrregularStep(axis([0, 1, 2, 3, 5, 6]))).toBe(4);
    expect(firstIrregularStep(axis([0, 0.1, 0.2, 0.30000000000000004]))).toBe(-1);
  });
});

describe("the survey of places", () => {
  it("finds gaps, repeats, constants and the means of stretches of time", () => {
    const surveyor = new PlaceSurveyor(2, 6);
    const gap = Number.NaN;
    surveyor.add(0, Float64Array.of(1, 7, 1, 7, gap, 7));
    surveyor.add(3, Float64Array.of(gap, 7, 4, 7, 6, 7));
    const survey = surveyor.finish();
    expect([...survey.present]).toEqual([4, 6]);
    expect([...survey.longestGap]).toEqual([2, 0]);
    expect([...survey.repeats]).toEqual([1, 5]);
    // Six steps fall into six of sixteen stretches: step s into stretch floor(16 s / 6).
    const first = [0, 2, 5, 8, 10, 13].map((stretch) => survey.stretchMeans[2 * stretch]);
    expect(first).toEqual([1, 1, Number.NaN, Number.NaN, 4, 6]);
    expect(survey.least[1]).toBe(survey.greatest[1]);
  });
});
