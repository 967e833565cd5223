import { encodeChannel, largestChroma, linearFromOklab, type Oklab, oklabOf } from "./oklab.js";

/** Light: zero is paper. Dark: zero is slate, and the colours grow lighter away from it. */
export type Scheme = "light" | "dark";

/** Red, green, blue and opacity, 0 … 255. */
export type Rgba = [number, number, number, number];

/** Colours one after another, four bytes each, as in `Rgba`. */
export type ColourTable = Uint8ClampedArray<ArrayBuffer>;

interface Arm {
  readonly hue: number;
  readonly chroma: number;
}

interface Ground {
  readonly zero: Oklab;
  /** Lightness at both ends of the storage colours. */
  readonly end: number;
  /** Lightness of the greatest value. */
  readonly ink: number;
  /** The ground and the lines of the hatch that marks a gap. */
  readonly hatch: readonly [Oklab, Oklab];
}

const TEAL: Arm = { hue: 202, chroma: 0.118 };
const RUST: Arm = { hue: 42, chroma: 0.145 };
const INK_HUE = 262;

const GROUNDS: Readonly<Record<Scheme, Ground>> = {
  light: {
    zero: oklabOf(0.972, 0.008, 86),
    end: 0.37,
    ink: 0.3,
    hatch: [oklabOf(0.925, 0.006, 86), oklabOf(0.8, 0.008, 86)],
  },
  dark: {
    zero: oklabOf(0.225, 0.012, 255),
    end: 0.77,
    ink: 0.93,
    hatch: [oklabOf(0.27, 0.008, 255), oklabOf(0.4, 0.008, 255)],
  },
};

/**
 * The colours of local storage, from the most misleading past (rust) over zero (the paper) to the
 * most informative (teal): `2 · steps + 1` of them. Both arms change lightness in even steps of
 * OKLab and are equally light at equal distance from zero, so that strength reads as lightness and
 * the sign as hue. Gaps are hatched with `gapHatch`.
 *
 * @param steps colours on each side of zero, at least 1
 */
export function storageColours(scheme: Scheme, steps: number): ColourTable {
  const ground = GROUNDS[scheme];
  const table = new Uint8ClampedArray(4 * (2 * steps + 1));
  for (let step = -steps; step <= steps; step++) {
    const share = Math.abs(step) / steps;
    const colour = armColour(ground, step < 0 ? RUST : TEAL, share);
    table.set(bytesOf(colour), 4 * (step + steps));
  }
  return table;
}

/**
 * The place of a local storage in a table of `storageColours`: zero in the middle, the ends at
 * ±scale and beyond. NaN gives −1.
 *
 * @param bits  local storage, in bits
 * @param scale the bits at which the colour reaches its end, > 0
 */
export function colourIndex(bits: number, scale: number, steps: number): number {
  if (Number.isNaN(bits)) return -1;
  const share = Math.min(1, Math.max(-1, bits / scale));
  return steps + Math.round(share * steps);
}

/** The colours of a recording's own values, from the least (paper) to the greatest (ink). */
export function valueColours(scheme: Scheme, steps: number): ColourTable {
  const { zero, ink } = GROUNDS[scheme];
  const table = new Uint8ClampedArray(4 * steps);
  for (let step = 0; step < steps; step++) {
    const share = steps === 1 ? 0 : step / (steps - 1);
    const tint = oklabOf(0, 0.03 * share, INK_HUE);
    table.set(
      bytesOf({
        lightness: zero.lightness + share * (ink - zero.lightness),
        a: zero.a * (1 - share) + tint.a,
        b: zero.b * (1 - share) + tint.b,
      }),
      4 * step,
    );
  }
  return table;
}

/** The place of a value in a table of `valueColours`; the middle where least = greatest, −1 for NaN. */
export function valueIndex(value: number, least: number, greatest: number, steps: number): number {
  if (Number.isNaN(value)) return -1;
  if (!(greatest > least)) return (steps - 1) >> 1;
  const share = Math.min(1, Math.max(0, (value - least) / (greatest - least)));
  return Math.round(share * (steps - 1));
}

/**
 * The ground and the lines of the diagonal hatch of cells without a value. A texture, because any one
 * colour could be taken for a weak storage by some eyes.
 */
export function gapHatch(scheme: Scheme): [Rgba, Rgba] {
  const [ground, line] = GROUNDS[scheme].hatch;
  return [bytesOf(ground), bytesOf(line)];
}

/** The colour of zero: the paper that a map is printed on. */
export function paperColour(scheme: Scheme): Rgba {
  return bytesOf(GROUNDS[scheme].zero);
}

function armColour(ground: Ground, arm: Arm, share: number): Oklab {
  const { zero, end } = ground;
  const lightness = zero.lightness + share * (end - zero.lightness);
  const wanted = arm.chroma * Math.min(1, share / 0.55) ** 0.85;
  const tint = oklabOf(0, Math.min(wanted, 0.96 * largestChroma(lightness, arm.hue)), arm.hue);
  return {
    lightness,
    a: zero.a * (1 - share) + tint.a,
    b: zero.b * (1 - share) + tint.b,
  };
}

function bytesOf(colour: Oklab): Rgba {
  const [red, green, blue] = linearFromOklab(colour);
  return [encodeChannel(red), encodeChannel(green), encodeChannel(blue), 255];
}
