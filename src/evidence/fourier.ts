import FFT from "fft.js";

/** The discrete Fourier transform of real series of one even length. */
export interface RealTransform {
  /** The frequencies 0 … length/2 of a series, real and imaginary parts in turn. */
  forward(series: Float64Array, spectrum: Float64Array): void;
  /** The series with such a spectrum; of the parts at both ends the imaginary ones are taken for 0. */
  inverse(spectrum: Float64Array, series: Float64Array): void;
}

/**
 * Prepares the transform of an even length ≥ 4: two neighbours of the series make one complex number,
 * and the spectrum of half the length is taken apart again.
 *
 * @see Press et al., Numerical Recipes, "FFT of single real function"
 */
export function realTransform(length: number): RealTransform {
  const half = length / 2;
  const transform = complexTransform(half);
  const cosine = Float64Array.from({ length: half + 1 }, (_, k) => Math.cos((Math.PI * k) / half));
  const sine = Float64Array.from({ length: half + 1 }, (_, k) => Math.sin((Math.PI * k) / half));
  const packed = new Float64Array(length);
  const other = new Float64Array(length);
  return {
    forward: (series, spectrum) => {
      transform(series, packed);
      for (let k = 0; k <= half; k++) {
        const a = 2 * (k % half);
        const b = 2 * ((half - k) % half);
        const evenReal = (packed[a] + packed[b]) / 2;
        const evenImaginary = (packed[a + 1] - packed[b + 1]) / 2;
        const oddReal = (packed[a + 1] + packed[b + 1]) / 2;
        const oddImaginary = (packed[b] - packed[a]) / 2;
        spectrum[2 * k] = evenReal + cosine[k] * oddReal + sine[k] * oddImaginary;
        spectrum[2 * k + 1] = evenImaginary + cosine[k] * oddImaginary - sine[k] * oddReal;
      }
    },
    inverse: (spectrum, series) => {
      for (let k = 0; k < half; k++) {
        const a = 2 * k;
        const b = 2 * (half - k);
        const imaginary = (at: number): number =>
          at === 0 || at === length ? 0 : spectrum[at + 1];
        const evenReal = (spectrum[a] + spectrum[b]) / 2;
        const evenImaginary = (imaginary(a) - imaginary(b)) / 2;
        const real = (spectrum[a] - spectrum[b]) / 2;
        const rest = (imaginary(a) + imaginary(b)) / 2;
        const oddReal = cosine[k] * real - sine[k] * rest;
        const oddImaginary = cosine[k] * rest + sine[k] * real;
        // Conjugated, so that the forward transform goes backwards.
        packed[a] = evenReal - oddImaginary;
        packed[a + 1] = -(evenImaginary + oddReal);
      }
      transform(packed, other);
      for (let i = 0; i < length; i += 2) {
        series[i] = other[i] / half;
        series[i + 1] = -other[i + 1] / half;
      }
    },
  };
}

/** A transform of complex numbers, real and imaginary parts in turn. */
type ComplexTransform = (from: Float64Array, to: Float64Array) => void;

/** The forward transform of so many complex numbers: at once for powers of two, by chirps for others. */
function complexTransform(count: number): ComplexTransform {
  const isPower = count > 1 && (count & (count - 1)) === 0;
  if (!isPower) return chirpTransform(count);
  const fft = new FFT(count);
  return (from, to) => fft.transform(to, from);
}

/**
 * A transform of any length as a convolution with a chirp, done by transforms of a power of two.
 * @see Bluestein 1970, IEEE Transactions on Audio and Electroacoustics 18:451–455
 */
function chirpTransform(count: number): ComplexTransform {
  const size = 2 ** Math.ceil(Math.log2(2 * count));
  const fft = new FFT(size);
  const cosine = new Float64Array(count);
  const sine = new Float64Array(count);
  const chirp = new Float64Array(2 * size);
  for (let k = 0; k < count; k++) {
    // k² is taken modulo the period first: large angles would lose their digits.
    const angle = (Math.PI * ((k * k) % (2 * count))) / count;
    cosine[k] = Math.cos(angle);
    sine[k] = Math.sin(angle);
    for (const at of [k, (size - k) % size]) {
      chirp[2 * at] = cosine[k];
      chirp[2 * at + 1] = sine[k];
    }
  }
  const response = new Float64Array(2 * size);
  fft.transform(response, chirp);
  const padded = new Float64Array(2 * size);
  const product = new Float64Array(2 * size);
  return (from, to) => {
    for (let k = 0; k < count; k++) {
      padded[2 * k] = from[2 * k] * cosine[k] + from[2 * k + 1] * sine[k];
      padded[2 * k + 1] = from[2 * k + 1] * cosine[k] - from[2 * k] * sine[k];
    }
    padded.fill(0, 2 * count);
    fft.transform(product, padded);
    for (let i = 0; i < 2 * size; i += 2) {
      const real = product[i] * response[i] - product[i + 1] * response[i + 1];
      const imaginary = product[i] * response[i + 1] + product[i + 1] * response[i];
      product[i] = real;
      product[i + 1] = imaginary;
    }
    fft.inverseTransform(padded, product);
    for (let k = 0; k < count; k++) {
      to[2 * k] = padded[2 * k] * cosine[k] + padded[2 * k + 1] * sine[k];
      to[2 * k + 1] = padded[2 * k + 1] * cosine[k] - padded[2 * k] * sine[k];
    }
  };
}
