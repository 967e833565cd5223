// The stream that is being drawn from, as the two words of xoroshiro128+ (Blackman & Vigna 2018).
let first: u64 = 0;
let second: u64 = 0;

/** Takes up the stream whose state is stored there. */
export function takeStream(state: usize): void {
  first = load<u64>(state);
  second = load<u64>(state, 8);
}

/** The next number of the stream, 0 ≤ u < 1, from the upper 53 bits. */
// @ts-ignore: decorator
@inline
export function uniform(): f64 {
  const sum = first + second;
  second ^= first;
  first = rotl<u64>(first, 24) ^ second ^ (second << 16);
  second = rotl<u64>(second, 37);
  return <f64>(sum >>> 11) * 1.1102230246251565e-16;
}
