const TO_UNIT = 2 ** -53;

/**
 * The numbers of a stream, 0 ≤ u < 1, from the upper 53 bits of xoroshiro128+; the plain twin. The words
 * of the state stand lower half first: s0, s1.
 *
 * @see Blackman & Vigna 2021, ACM Transactions on Mathematical Software 47:36
 */
export function uniformsOf(states: Uint32Array, at: number): () => number {
  let [low0, high0, low1, high1] = states.subarray(at, at + 4);
  return () => {
    const low = low0 + low1;
    const high = (high0 + high1 + (low > 0xffff_ffff ? 1 : 0)) >>> 0;
    const value = (high * 2 ** 21 + ((low >>> 0) >>> 11)) * TO_UNIT;
    const low2 = low1 ^ low0;
    const high2 = high1 ^ high0;
    const turned = (low0 << 24) | (high0 >>> 8);
    high0 = (((high0 << 24) | (low0 >>> 8)) ^ high2 ^ ((high2 << 16) | (low2 >>> 16))) >>> 0;
    low0 = (turned ^ low2 ^ (low2 << 16)) >>> 0;
    // Turning by 37 is turning by 32, which swaps the halves, and then by 5.
    low1 = ((high2 << 5) | (low2 >>> 27)) >>> 0;
    high1 = ((low2 << 5) | (high2 >>> 27)) >>> 0;
    return value;
  };
}
