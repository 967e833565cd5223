import { increment, incrementFour } from "./table";

/** A state as a digit of a block code; a gap (−1) as 0, to be blanked afterwards. */
// @ts-ignore: decorator
@inline
function digit<T>(states: usize, i: usize): u32 {
  return <u32>max<i32>(<i32>load<T>(states + i * sizeof<T>()), 0);
}

/** Four digits from cell i on. */
// @ts-ignore: decorator
@inline
function digits<T>(states: usize, i: usize): v128 {
  const zero = i32x4.splat(0);
  const at = states + i * sizeof<T>();
  if (sizeof<T>() == 4) return i32x4.max_s(v128.load(at), zero);
  if (sizeof<T>() == 2) return i32x4.max_s(v128.load_ext<i16>(at), zero);
  return i32x4.max_s(i32x4.extend_low_i16x8_s(i16x8.extend_low_i8x16_s(v128.load32_zero(at))), zero);
}

// @ts-ignore: decorator
@inline
function roll<T>(
  states: usize,
  fromRow: i32,
  toRow: i32,
  places: i32,
  alphabet: u32,
  blocks: u32,
  window: i32,
  delay: i32,
  bases: usize,
  ids: usize,
  firstRow: i32,
  counts: usize,
): void {
  const b = i32x4.splat(alphabet);
  const whole = i32x4.splat(blocks);
  const kept = i32x4.splat(blocks - 1);
  const shifts = (alphabet & (alphabet - 1)) == 0;
  const bits = ctz<u32>(alphabet);
  const quads = <usize>(places & ~3);
  const w = <usize>places;
  for (let row = fromRow; row < toRow; row++) {
    const here = <usize>row * w;
    const out = ids + ((<usize>(row - firstRow) * w) << 2);
    if (row < delay) {
      for (let p: usize = 0; p < w; p++) {
        store<u32>(out + (p << 2), load<u32>(bases + (p << 2)) + digit<T>(states, here + p));
      }
      continue;
    }
    const before = out - ((<usize>delay * w) << 2);
    const oldest = <usize>(row - window) * w;
    const drops = row >= window;
    let p: usize = 0;
    if (shifts) {
      for (; p < quads; p += 4) {
        const base = v128.load(bases + (p << 2));
        const old = i32x4.shl(i32x4.sub(v128.load(before + (p << 2)), base), bits);
        const code = v128.and(v128.or(old, digits<T>(states, here + p)), kept);
        const four = i32x4.add(code, base);
        v128.store(out + (p << 2), four);
        if (counts) incrementFour(counts, four);
      }
    } else {
      for (; p < quads; p += 4) {
        const base = v128.load(bases + (p << 2));
        let code = i32x4.mul(i32x4.sub(v128.load(before + (p << 2)), base), b);
        code = i32x4.add(code, digits<T>(states, here + p));
        if (drops) code = i32x4.sub(code, i32x4.mul(digits<T>(states, oldest + p), whole));
        const four = i32x4.add(code, base);
        v128.store(out + (p << 2), four);
        if (counts) incrementFour(counts, four);
      }
    }
    for (; p < w; p++) {
      const base = load<u32>(bases + (p << 2));
      let code = (load<u32>(before + (p << 2)) - base) * alphabet + digit<T>(states, here + p);
      if (drops) code -= digit<T>(states, oldest + p) * blocks;
      store<u32>(out + (p << 2), code + base);
      if (counts) increment(counts, code + base);
    }
  }
}

export function roll8(states: usize, fromRow: i32, toRow: i32, places: i32, alphabet: u32, blocks: u32, window: i32, delay: i32, bases: usize, ids: usize, firstRow: i32, counts: usize): void {
  roll<i8>(states, fromRow, toRow, places, alphabet, blocks, window, delay, bases, ids, firstRow, counts);
}

export function roll16(states: usize, fromRow: i32, toRow: i32, places: i32, alphabet: u32, blocks: u32, window: i32, delay: i32, bases: usize, ids: usize, firstRow: i32, counts: usize): void {
  roll<i16>(states, fromRow, toRow, places, alphabet, blocks, window, delay, bases, ids, firstRow, counts);
}

export function roll32(states: usize, fromRow: i32, toRow: i32, places: i32, alphabet: u32, blocks: u32, window: i32, delay: i32, bases: usize, ids: usize, firstRow: i32, counts: usize): void {
  roll<i32>(states, fromRow, toRow, places, alphabet, blocks, window, delay, bases, ids, firstRow, counts);
}
