/** One word mixed into another: the block and final steps of MurmurHash3 (public domain). */
export function mixed(into: number, word: number): number {
  let k = Math.imul(word, 0xcc9e_2d51);
  k = (k << 15) | (k >>> 17);
  let h = into ^ Math.imul(k, 0x1b87_3593);
  h = (h << 13) | (h >>> 19);
  h = (Math.imul(h, 5) + 0xe654_6b64) | 0;
  h = Math.imul(h ^ (h >>> 16), 0x85eb_ca6b);
  h = Math.imul(h ^ (h >>> 13), 0xc2b2_ae35);
  return h ^ (h >>> 16);
}
