import { describe, expect, it } from "vitest";
import {
  bibtexEntry,
  referenceText,
  SOURCES,
  type SourceKey,
  sourceOf,
} from "../../src/report/sources.js";
import { usedSources } from "../../src/report/usedsources.js";

const keysOf = (settings: Record<string, unknown>, asked: Record<string, unknown> = {}): string[] =>
  usedSources(settings, asked).map(({ source }) => source.key);

describe("a source", () => {
  it("reads as a reference in a list", () => {
    expect(referenceText(sourceOf("kraskov2004"))).toBe(
      "Kraskov, A., Stögbauer, H., and Grassberger, P. (2004). Estimating mutual information. Physical Review E 69: 066138.",
    );
    expect(referenceText(sourceOf("theiler1986"))).toMatch(/^Theiler, J\. \(1986\)\./);
    expect(referenceText(sourceOf("cover2006"))).toMatch(/second edition, Wiley\.$/);
  });

  it("is an entry of BibTeX with double hyphens in its pages", () => {
    expect(bibtexEntry(sourceOf("politis1994"))).toBe(
      [
        "@article{politis1994,",
        "  author = {Politis, D. N. and Romano, J. P.},",
        "  year = {1994},",
        "  title = {{The stationary bootstrap}},",
        "  journal = {Journal of the American Statistical Association},",
        "  volume = {89},",
        "  pages = {1303--1313}",
        "}",
      ].join("\n"),
    );
    expect(bibtexEntry(sourceOf("cover2006"))).toMatch(/^@book\{/);
    expect(bibtexEntry(sourceOf("miller1955"))).toMatch(/^@incollection\{/);
  });

  it("bears its year in its key", () => {
    for (const [key, source] of Object.entries(SOURCES)) {
      expect(key.endsWith(String(source.year)), key).toBe(true);
    }
  });
});

describe("the sources that a run used", () => {
  it("begin with the measure, and follow the estimator and the correction", () => {
    expect(keysOf({ measure: "storage", estimator: "plugin", correction: "miller-madow" })).toEqual(
      ["lizier2012", "shannon1948", "miller1955"],
    );
    expect(keysOf({ measure: "storage", estimator: "ordinal", correction: "none" })).toEqual([
      "lizier2012",
      "bandt2002",
    ]);
  });

  it("bring in transfer entropy where a neighbourhood was set beside the own past", () => {
    const settings = { measure: "storage", estimator: "plugin", correction: "none" };
    const neighbourhood = { offsets: ["-1"], lags: [1] };
    expect(keysOf(settings)).not.toContain("schreiber2000");
    expect(keysOf({ ...settings, neighbourhood })).toContain("schreiber2000");
    expect(keysOf({ ...settings, estimator: "gaussian", neighbourhood })).toContain("barnett2009");
  });

  it("bring in the exclusion of neighbours close in time only where it was used", () => {
    const settings = { measure: "storage", estimator: "neighbours", correction: "none" };
    expect(keysOf({ ...settings, exclude: 0 })).not.toContain("theiler1986");
    expect(keysOf({ ...settings, exclude: 5 })).toContain("theiler1986");
  });

  it("bring in the reach only where the history was left to it", () => {
    const settings = { measure: "storage", estimator: "plugin", correction: "none" };
    expect(keysOf(settings, { history: 2 })).not.toContain("fraser1986");
    expect(keysOf(settings, { history: "auto" })).toContain("fraser1986");
  });

  it("bring in those of a comparison of nodes, and those of its links where there were some", () => {
    const settings = { measure: "storage", estimator: "gaussian", correction: "none" };
    const compared = keysOf({ ...settings, nodes: { links: false } });
    expect(compared).toContain("politis1994");
    expect(compared).not.toContain("moran1950");
    expect(keysOf({ ...settings, nodes: { links: true } })).toContain("moran1950");
  });

  it("name each source once, with all that was taken from it", () => {
    const keys: SourceKey[] = ["lizier2012", "crutchfield2003", "cover2006"];
    expect(keysOf({ measure: "predictive", estimator: "gaussian", correction: "none" })).toEqual(
      keys,
    );
  });
});
