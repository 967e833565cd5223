import { describe, expect, it } from "vitest";
import { openFile } from "../../src/run/files.js";
import { mapInMemory } from "../../src/run/memory.js";
import { openRecording } from "../../src/run/open.js";
import { countPatterns, patternOf, permutationEntropy } from "../../src/storage/ordinal.js";
import { CHECKS, casesOf, lcg, tolerance } from "./reference.js";
import { oneSeries } from "./series.js";

describe("order patterns", () => {
  interface Worked {
    readonly H_D2: number;
    readonly H_D3: number;
  }

  for (const each of casesOf<{ series: number[] }, Worked>("A_closed_forms", "ordinal_entropy")) {
    it(`${each.id}: the worked example of Bandt & Pompe 2002`, () => {
      const series = Float64Array.from(each.params.series);
      const near = (got: number, want: number): void =>
        expect(Math.abs(got - want)).toBeLessThanOrEqual(tolerance(each));
      near(permutationEntropy(series, 2), each.expect.H_D2);
      near(permutationEntropy(series, 3), each.expect.H_D3);
    });
  }

  it("give every order of m different values a number of its own", () => {
    const orders = (values: readonly number[]): number[][] =>
      values.length === 0
        ? [[]]
        : values.flatMap((value) =>
            orders(values.filter((other) => other !== value)).map((rest) => [value, ...rest]),
          );
    const numbers = orders([1, 2, 3, 4, 5]).map(patternOf);
    expect(new Set(numbers).size).toBe(120);
    expect(Math.max(...numbers)).toBe(119);
  });

  it("rank the earlier of two equal values lower", () => {
    // Newest first: 5, 5 came as 5 and then 5, which is a rise.
    expect(patternOf([5, 5])).toBe(patternOf([6, 5]));
  });

  interface Gaussian {
    readonly pMonotoneUp: number;
    readonly pOther: number;
    readonly H_D3: number;
  }

  for (const each of casesOf<{ phi: number }, Gaussian>("A_closed_forms", "ordinal_gaussian")) {
    it(`${each.id}: an AR(1) comes near the probabilities of Bandt & Shiha 2007`, () => {
      const n = 200_000;
      const uniform = Float64Array.from(lcg(7, 2 * n), (word) => (word + 0.5) / 2 ** 32);
      const series = new Float64Array(n);
      for (let i = 1; i < n; i++) {
        const radius = Math.sqrt(-2 * Math.log(uniform[2 * i]));
        const normal = radius * Math.cos(2 * Math.PI * uniform[2 * i + 1]);
        series[i] = each.params.phi * series[i - 1] + normal;
      }
      const { counts, windows } = countPatterns(series, 3, 1);
      const up = counts[patternOf([3, 2, 1])] / windows;
      // Four standard errors of a share near 0.2 over 200,000 overlapping windows.
      expect(Math.abs(up - each.expect.pMonotoneUp)).toBeLessThan(0.006);
      expect(Math.abs(permutationEntropy(series, 3) - each.expect.H_D3)).toBeLessThan(0.005);
    });
  }

  interface Theory {
    readonly nPatterns: number;
    readonly probsSorted: readonly number[];
  }

  for (const each of casesOf<object, Theory>("A_closed_forms", "ordinal_theory")) {
    it(`${each.id}: the logistic map never falls twice in a row`, () => {
      const series = new Float64Array(100_000);
      series[0] = 0.1234;
      for (let i = 1; i < series.length; i++) series[i] = 4 * series[i - 1] * (1 - series[i - 1]);
      const { counts, windows } = countPatterns(series, 3, 1);
      expect(counts[patternOf([1, 2, 3])]).toBe(0);
      const shares = [...counts].map((count) => count / windows).sort((a, b) => b - a);
      each.expect.probsSorted.forEach((share, i) => {
        expect(Math.abs(shares[i] - share)).toBeLessThan(0.006);
      });
      expect(shares.filter((share) => share > 0)).toHaveLength(each.expect.nPatterns);
    });
  }

  interface TableParams {
    readonly csv: string;
    readonly columns: readonly string[];
    readonly D: number;
    readonly tau: number;
  }

  interface TableExpect {
    readonly permutationEntropy: number;
    readonly nPatterns: number;
    readonly patternCountsSorted: readonly number[];
  }

  for (const each of casesOf<TableParams, TableExpect>("D_open_data", "ordinal_csv")) {
    it(`${each.id}: permutation entropy and counts`, async () => {
      const source = await openFile(`${CHECKS}reference/${each.params.csv}`);
      const places = each.params.columns.join(",");
      const { recording } = await openRecording(source, { places });
      const { values } = await recording.read(0, recording.timeSteps);
      const series = Float64Array.from(values);
      const { D, tau } = each.params;
      const { counts, windows } = countPatterns(series, D, tau);
      expect(windows).toBe(each.expect.nPatterns);
      const sorted = [...counts].filter((count) => count > 0).sort((a, b) => b - a);
      expect(sorted).toEqual(each.expect.patternCountsSorted);
      const entropy = permutationEntropy(series, D, tau);
      expect(Math.abs(entropy - each.expect.permutationEntropy)).toBeLessThanOrEqual(
        tolerance(each),
      );
      await source.close();
    });
  }
});

describe("ordinal storage", () => {
  it("of a rising ramp is 0: the next value is always the greatest", async () => {
    const ramp = Array.from({ length: 100 }, (_, i) => i);
    const { summary } = await mapInMemory(oneSeries(ramp), { estimator: "ordinal", history: 3 });
    expect(summary.storage_bits).toBe(0);
    expect(summary.entropy_bits).toBe(0);
  });

  it("worked by hand: a zigzag of period 2 tells by its last step whether it rises", async () => {
    // 0 1 0 1 …: patterns of two values are rise or fall; next ranks: after a rise 1 of 0…2 … a tie
    // with the older value, which ranks below it; after a fall the next ties with the older one.
    const zigzag = Array.from({ length: 42 }, (_, i) => i % 2);
    const { summary } = await mapInMemory(oneSeries(zigzag), { estimator: "ordinal", history: 2 });
    // After a rise (0, 1) comes 0: rank 1 (the 0 is not greater). After a fall (1, 0) comes 1: rank 2.
    expect(summary.storage_bits).toBe(1);
    expect(summary.entropy_rate_bits).toBe(0);
  });

  it("of independent values is no more than bias", async () => {
    // Lag-one comparisons of past and next share no value, so there is no storage by construction.
    const noise = Array.from(lcg(5, 20_000));
    const { summary } = await mapInMemory(oneSeries(noise), { estimator: "ordinal", history: 3 });
    // For independent values P(rank | pattern) = 1/4 whatever the pattern.
    expect(Math.abs(summary.storage_bits_corrected)).toBeLessThan(0.001);
  });

  for (const history of [1, 11]) {
    it(`refuses a history of ${history}`, async () => {
      const noise = Array.from(lcg(5, 100));
      const map = mapInMemory(oneSeries(noise), { estimator: "ordinal", history });
      await expect(map).rejects.toThrow(/--history: .*Use a history from 2 to 10/);
    });
  }
});
