// Logarithms and powers by additions and multiplications alone, so that they are the same on every
// machine; see ../elementary.ts.

/** log2 of a whole number from 1 on. */
export function log2(n: f64): f64 {
  const bits = reinterpret<u64>(n);
  let exponent = <f64>(<i32>(bits >>> 52) - 1023);
  let m = reinterpret<f64>((bits & 0x000fffffffffffff) | 0x3ff0000000000000);
  if (m > 1.4142135623730951) {
    m *= 0.5;
    exponent += 1;
  }
  const s = (m - 1) / (m + 1);
  const z = s * s;
  let series = 0.1373995277037108;
  series = series * z + 0.15186263588304877;
  series = series * z + 0.16972882833987804;
  series = series * z + 0.19235933878519512;
  series = series * z + 0.22195308321368667;
  series = series * z + 0.2623081892525388;
  series = series * z + 0.3205988979753252;
  series = series * z + 0.4121985831111324;
  series = series * z + 0.5770780163555853;
  series = series * z + 0.9617966939259756;
  series = series * z + 2.8853900817779268;
  return exponent + s * series;
}

/** e^x for x ≤ 0; 0 below −700. */
export function exp(x: f64): f64 {
  if (x < -700) return 0;
  const k = floor<f64>(x * 1.4426950408889634 + 0.5);
  const r = x - k * 0.6931471803691238 - k * 1.9082149292705877e-10;
  const r2 = r * r;
  const r4 = r2 * r2;
  const low = 1 + r + (0.5 + r * 0.16666666666666666) * r2;
  const middle =
    0.041666666666666664 +
    r * 0.008333333333333333 +
    (0.001388888888888889 + r * 0.0001984126984126984) * r2;
  const high =
    0.0000248015873015873 +
    r * 0.0000027557319223985893 +
    (2.755731922398589e-7 + r * 2.505210838544172e-8) * r2 +
    2.08767569878681e-9 * r4;
  const scale = reinterpret<f64>(<u64>(<i64>k + 1023) << 52);
  return (low + (middle + high * r4) * r4) * scale;
}
