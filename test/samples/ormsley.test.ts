import { describe, expect, it } from "vitest";
import {
  ormsleyCsv,
  ormsleyGaugesCsv,
  ormsleyLevels,
  ormsleyLinksCsv,
  ormsleyTrueLevels,
} from "../../samples/ormsley.js";
import { type GaugeKind, gauges, ORMSLEY_STEPS, plantedFaults } from "../../samples/ormsleyplan.js";

const column = (levels: Float64Array, name: string): Float64Array => {
  const at = gauges.findIndex((gauge) => gauge.name === name);
  return levels.filter((_, i) => i % gauges.length === at);
};

const logged = ormsleyLevels();
const truth = ormsleyTrueLevels();
const namesOf = (kind: GaugeKind): string[] =>
  gauges.filter((gauge) => gauge.kind === kind).map((gauge) => gauge.name);

/** Pearson's correlation of b, `lag` steps later, with a. */
function correlation(a: Float64Array, b: Float64Array, lag: number): number {
  const xs = a.subarray(0, a.length - lag);
  const ys = b.subarray(lag);
  const mean = (of: Float64Array): number => of.reduce((sum, x) => sum + x, 0) / of.length;
  const [mx, my] = [mean(xs), mean(ys)];
  const sum = (term: (dx: number, dy: number) => number): number =>
    xs.reduce((total, x, i) => total + term(x - mx, ys[i] - my), 0);
  return sum((dx, dy) => dx * dy) / Math.sqrt(sum((dx) => dx * dx) * sum((_, dy) => dy * dy));
}

describe("the files of the Ormsley valley", () => {
  it("have 3,000 hours of 16 gauges, an hour apart, in centimetres or empty", () => {
    const lines = ormsleyCsv().trimEnd().split("\n");
    expect(lines).toHaveLength(ORMSLEY_STEPS + 1);
    expect(lines[0]).toBe(["time", ...gauges.map((gauge) => gauge.name)].join(","));
    lines.slice(1).forEach((line, step) => {
      const [time, ...cells] = line.split(",");
      expect(Date.parse(`${time}Z`)).toBe(Date.UTC(2031, 2, 1, step));
      expect(cells).toHaveLength(16);
      for (const cell of cells) expect(cell).toMatch(/^(\d\.\d\d)?$/);
    });
  });

  it("leave a cell empty exactly where there is no reading", () => {
    const cells = ormsleyCsv()
      .trimEnd()
      .split("\n")
      .slice(1)
      .flatMap((line) => line.split(",").slice(1));
    const empty = cells.flatMap((cell, i) => (cell === "" ? [i] : []));
    expect(empty).toEqual(Array.from(logged.keys()).filter((i) => Number.isNaN(logged[i])));
    expect(empty.length).toBeGreaterThan(48);
  });

  it("link gauges that there are, downhill", () => {
    const [head, ...rows] = ormsleyLinksCsv().trimEnd().split("\n");
    const heights = new Map(gauges.map((gauge) => [gauge.name, gauge.y]));
    expect(head).toBe("from,to,hours,weight");
    for (const row of rows) {
      const [from = "", to = ""] = row.split(",");
      expect(heights.get(from)).toBeGreaterThan(heights.get(to) ?? Number.POSITIVE_INFINITY);
    }
    expect(rows.length).toBeGreaterThan(8);
  });

  it("place every gauge of the record once", () => {
    const rows = ormsleyGaugesCsv().trimEnd().split("\n").slice(1);
    expect(rows.map((row) => row.split(",")[0])).toEqual(gauges.map((gauge) => gauge.name));
  });
});

describe("what the gauges do", () => {
  it("springs keep their level from hour to hour", () => {
    for (const name of namesOf("spring")) {
      const levels = column(truth, name);
      expect(correlation(levels, levels, 1)).toBeGreaterThan(0.95);
    }
  });

  it("spray gauges have no memory: within the 4-sigma bound of white noise (Bartlett 1946)", () => {
    for (const name of namesOf("spray")) {
      const levels = column(truth, name);
      for (const lag of [1, 2, 24]) {
        expect(Math.abs(correlation(levels, levels, lag))).toBeLessThan(
          4 / Math.sqrt(ORMSLEY_STEPS),
        );
      }
    }
  });

  it("sluices keep the rhythm of the day", () => {
    for (const name of namesOf("sluice")) {
      const levels = column(truth, name);
      expect(correlation(levels, levels, 24)).toBeGreaterThan(0.9);
      expect(correlation(levels, levels, 12)).toBeLessThan(-0.9);
    }
  });

  it("reaches follow what feeds them after the hours that the links say", () => {
    const steps = (name: string): Float64Array => {
      const levels = column(truth, name);
      return levels.map((level, i) => (i === 0 ? 0 : level - levels[i - 1]));
    };
    for (const { name, fedBy } of gauges) {
      for (const { from, hours } of fedBy) {
        const by = Array.from({ length: 13 }, (_, lag) =>
          correlation(steps(from), steps(name), lag),
        );
        expect(by.indexOf(Math.max(...by)), `${from} to ${name}`).toBe(hours);
      }
    }
  });
});

describe("the planted faults", () => {
  it("touch the steps that the plan lists, and no others but lost single readings", () => {
    for (const { name } of gauges) {
      const [was, is] = [column(truth, name), column(logged, name)];
      const fault = plantedFaults.find((each) => each.gauge === name);
      const outside = Array.from(is.keys()).filter(
        (step) => fault === undefined || step < fault.start || step >= fault.end,
      );
      for (const step of outside) {
        if (!Number.isNaN(is[step])) expect(is[step], `${name}, step ${step}`).toBe(was[step]);
      }
      const lost = outside.filter((step) => Number.isNaN(is[step]));
      expect(lost.length).toBeLessThan(0.01 * ORMSLEY_STEPS);
    }
  });

  for (const fault of plantedFaults) {
    const { gauge, kind, start, end } = fault;
    const [was, is] = [truth, logged].map((levels) => column(levels, gauge).subarray(start, end));
    const steps = Array.from(is.keys()).filter((step) => !Number.isNaN(is[step]));

    it(`${gauge} is ${kind} as the plan says`, () => {
      switch (fault.kind) {
        case "silent":
          expect(steps).toEqual([]);
          return;
        case "stuck":
          expect(new Set(steps.map((step) => is[step]))).toEqual(new Set([was[0]]));
          expect(new Set(was).size).toBeGreaterThan(10);
          return;
        case "jumped":
          for (const step of steps) expect(is[step] - was[step]).toBeCloseTo(fault.metres, 6);
          return;
        case "drifting":
          // Half a centimetre of rounding either way.
          for (const step of steps) {
            const planned = (fault.metres * step) / (end - start);
            expect(Math.abs(is[step] - was[step] - planned)).toBeLessThan(0.00501);
          }
      }
    });

    it(`${gauge}, ${kind}, has readings enough to be found by`, () => {
      expect(end - start).toBeGreaterThanOrEqual(48);
      if (kind !== "silent") expect(steps.length).toBeGreaterThan(0.95 * (end - start));
    });
  }
});
