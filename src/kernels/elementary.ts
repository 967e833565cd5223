/** 2/ln 2 · 1/(2n + 1) for n = 10 … 0: log2 of (1 + s)/(1 − s) as a series in s. */
const LOGARITHM = [
  0.137_399_527_703_710_8, 0.151_862_635_883_048_77, 0.169_728_828_339_878_04,
  0.192_359_338_785_195_12, 0.221_953_083_213_686_67, 0.262_308_189_252_538_8,
  0.320_598_897_975_325_2, 0.412_198_583_111_132_4, 0.577_078_016_355_585_3,
  0.961_796_693_925_975_6, 2.885_390_081_777_926_8,
];
/** 1/n! for n = 0 … 12. */
const EXPONENTIAL = [
  1, 1, 0.5, 0.166_666_666_666_666_66, 0.041_666_666_666_666_664, 0.008_333_333_333_333_333,
  0.001_388_888_888_888_889, 0.000_198_412_698_412_698_4, 0.000_024_801_587_301_587_3,
  0.000_002_755_731_922_398_589_3, 2.755_731_922_398_589e-7, 2.505_210_838_544_172e-8,
  2.087_675_698_786_81e-9,
];
/** ln 2 in two parts, the first with its last digits 0, so that its multiples are exact. */
const LN2 = 0.693_147_180_369_123_8;
const LN2_REST = 1.908_214_929_270_587_7e-10;
const LEAST_EXPONENT = -700;
/** 2^−k, each exactly half of the one before. */
const HALVES = new Float64Array(1024);
HALVES[0] = 1;
for (let k = 1; k < HALVES.length; k++) HALVES[k] = HALVES[k - 1] / 2;

/**
 * log2 of a whole number 1 … 2³²−1, by additions and multiplications alone, so that it is the same on
 * every machine; the plain twin. Exact for powers of two; measured against 40 digits, wrong by 1 in
 * the last place at most.
 */
export function log2(n: number): number {
  let exponent = 31 - Math.clz32(n);
  let m = n * HALVES[exponent];
  if (m > Math.SQRT2) {
    m *= 0.5;
    exponent += 1;
  }
  const s = (m - 1) / (m + 1);
  const z = s * s;
  let series = LOGARITHM[0];
  for (let i = 1; i < LOGARITHM.length; i++) series = series * z + LOGARITHM[i];
  return exponent + s * series;
}

/** e^x for x ≤ 0, in the same way; 0 below −700. Relative error 3e-16 at most as measured; the twin. */
export function exp(x: number): number {
  if (x < LEAST_EXPONENT) return 0;
  const k = Math.floor(x * Math.LOG2E + 0.5);
  const r = x - k * LN2 - k * LN2_REST;
  const r2 = r * r;
  const r4 = r2 * r2;
  const c = EXPONENTIAL;
  const low = c[0] + c[1] * r + (c[2] + r * c[3]) * r2;
  const middle = c[4] + r * c[5] + (c[6] + r * c[7]) * r2;
  const high = c[8] + r * c[9] + (c[10] + r * c[11]) * r2 + c[12] * r4;
  return (low + (middle + high * r4) * r4) * HALVES[-k];
}
