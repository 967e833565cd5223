/** A colour in OKLab: lightness 0 … 1, and the two opponent axes. Ottosson 2020, "A perceptual color space for image processing". */
export interface Oklab {
  readonly lightness: number;
  readonly a: number;
  readonly b: number;
}

/** The colour of a lightness, chroma and hue in degrees. */
export function oklabOf(lightness: number, chroma: number, hue: number): Oklab {
  const angle = (hue * Math.PI) / 180;
  return { lightness, a: chroma * Math.cos(angle), b: chroma * Math.sin(angle) };
}

/** Linear sRGB, 0 … 1 inside the gamut, of an OKLab colour. */
export function linearFromOklab(colour: Oklab): [number, number, number] {
  const { lightness, a, b } = colour;
  const long = (lightness + 0.3963377774 * a + 0.2158037573 * b) ** 3;
  const medium = (lightness - 0.1055613458 * a - 0.0638541728 * b) ** 3;
  const short = (lightness - 0.0894841775 * a - 1.291485548 * b) ** 3;
  return [
    4.0767416621 * long - 3.3077115913 * medium + 0.2309699292 * short,
    -1.2684380046 * long + 2.6097574011 * medium - 0.3413193965 * short,
    -0.0041960863 * long - 0.7034186147 * medium + 1.707614701 * short,
  ];
}

/** The OKLab colour of linear sRGB. */
export function oklabFromLinear(red: number, green: number, blue: number): Oklab {
  const long = Math.cbrt(0.4122214708 * red + 0.5363325363 * green + 0.0514459929 * blue);
  const medium = Math.cbrt(0.2119034982 * red + 0.6806995451 * green + 0.1073969566 * blue);
  const short = Math.cbrt(0.0883024619 * red + 0.2817188376 * green + 0.6299787005 * blue);
  return {
    lightness: 0.2104542553 * long + 0.793617785 * medium - 0.0040720468 * short,
    a: 1.9779984951 * long - 2.428592205 * medium + 0.4505937099 * short,
    b: 0.0259040371 * long + 0.7827717662 * medium - 0.808675766 * short,
  };
}

/** Whether sRGB can show the colour. */
export function inGamut(colour: Oklab): boolean {
  return linearFromOklab(colour).every((part) => part >= -1e-4 && part <= 1 + 1e-4);
}

/** The largest chroma that sRGB can show at a lightness and hue, up to 0.4. */
export function largestChroma(lightness: number, hue: number): number {
  let within = 0;
  let beyond = 0.4;
  for (let halving = 0; halving < 24; halving++) {
    const middle = (within + beyond) / 2;
    if (inGamut(oklabOf(lightness, middle, hue))) within = middle;
    else beyond = middle;
  }
  return within;
}

/** A linear part of sRGB as the byte that a screen takes, 0 … 255. IEC 61966-2-1. */
export function encodeChannel(linear: number): number {
  const part = Math.min(1, Math.max(0, linear));
  const encoded = part <= 0.0031308 ? 12.92 * part : 1.055 * part ** (1 / 2.4) - 0.055;
  return Math.round(255 * encoded);
}

/** The linear part of an sRGB byte. */
export function decodeChannel(byte: number): number {
  const part = byte / 255;
  return part <= 0.04045 ? part / 12.92 : ((part + 0.055) / 1.055) ** 2.4;
}
