import { describe, expect, it } from "vitest";
import { amplitudeAdjusted } from "../../src/evidence/amplitudeadjusted.js";
import { realTransform } from "../../src/evidence/fourier.js";
import { namedStream } from "../../src/storage/streams.js";
import { autoregression, normals } from "../reach/processes.js";

/** The spectrum straight from the definition: Σ x[n]·e^(−2πikn/N) for k = 0 … N/2. */
function spectrumOf(series: Float64Array): Float64Array {
  const n = series.length;
  const spectrum = new Float64Array(n + 2);
  for (let k = 0; k <= n / 2; k++) {
    for (let i = 0; i < n; i++) {
      const angle = (-2 * Math.PI * ((k * i) % n)) / n;
      spectrum[2 * k] += series[i] * Math.cos(angle);
      spectrum[2 * k + 1] += series[i] * Math.sin(angle);
    }
  }
  return spectrum;
}

const sorted = (series: Float64Array): number[] => [...series].sort((a, b) => a - b);

/** Correlation of a series with itself `lag` steps earlier. */
function correlation(series: Float64Array, lag: number): number {
  const mean = series.reduce((sum, value) => sum + value, 0) / series.length;
  let product = 0;
  let square = 0;
  series.forEach((value, i) => {
    square += (value - mean) ** 2;
    if (i >= lag) product += (value - mean) * (series[i - lag] - mean);
  });
  return product / square;
}

describe("the transform of real series", () => {
  it.each([4, 6, 8, 10, 14, 16, 30, 62, 94, 128, 202, 1000])(
    "of %i values is that of the definition, and comes back",
    (length) => {
      const normal = normals(length);
      const series = Float64Array.from({ length }, () => normal());
      const transform = realTransform(length);
      const spectrum = new Float64Array(length + 2);
      transform.forward(series, spectrum);
      const expected = spectrumOf(series);
      spectrum.forEach((value, i) => {
        expect(Math.abs(value - expected[i])).toBeLessThan(1e-9);
      });
      const back = new Float64Array(length);
      transform.inverse(spectrum, back);
      back.forEach((value, i) => {
        expect(Math.abs(value - series[i])).toBeLessThan(1e-12);
      });
    },
  );
});

describe("amplitude-adjusted surrogates", () => {
  it("have exactly the values of the series, in another order", () => {
    for (const length of [16, 17, 101, 256, 999]) {
      const series = autoregression({ 1: 0.8 }, length, length);
      const surrogate = new Float64Array(length);
      amplitudeAdjusted(series)(namedStream(1, length), surrogate);
      expect(sorted(surrogate)).toEqual(sorted(series));
      expect(surrogate).not.toEqual(series);
    }
  });

  it("keep the autocorrelations, also of a series whose values are far from Gaussian", () => {
    // exp of a quarter of an AR(1): skewed and with memory. Shuffled values would have correlations of about 0.02.
    const series = autoregression({ 1: 0.9 }, 2001, 5).map((value) => Math.exp(value / 4));
    const draw = amplitudeAdjusted(series);
    for (let index = 0; index < 5; index++) {
      const surrogate = new Float64Array(series.length);
      draw(namedStream(2, index), surrogate);
      for (const lag of [1, 2, 5, 10]) {
        expect(Math.abs(correlation(surrogate, lag) - correlation(series, lag))).toBeLessThan(0.03);
      }
    }
  });

  it("differ from one stream to the next and are the same for the same stream", () => {
    const series = autoregression({ 1: 0.5 }, 300, 9);
    const draw = amplitudeAdjusted(series);
    const [first, again, other] = [1, 1, 2].map((name) => {
      const surrogate = new Float64Array(series.length);
      draw(namedStream(name), surrogate);
      return surrogate;
    });
    expect(again).toEqual(first);
    expect(other).not.toEqual(first);
  });

  it("leave no jump where the series ends: a ramp keeps its slow motion", () => {
    // A ramp with a dip back at its end: the whole of it jumps by 1 between end and start, a stretch does
    // not. With the jump, the spectrum would have fast parts that the surrogates would show as noise.
    const length = 1000;
    const series = Float64Array.from({ length }, (_, i) =>
      i < 970 ? Math.sin((2 * Math.PI * i) / 970) : (i - 970) / 30,
    );
    const surrogate = new Float64Array(length);
    amplitudeAdjusted(series)(namedStream(3), surrogate);
    let roughness = 0;
    for (let i = 30; i < 940; i++) roughness += (surrogate[i] - surrogate[i - 1]) ** 2;
    expect(Math.sqrt(roughness / 910)).toBeLessThan(0.05);
  });
});
