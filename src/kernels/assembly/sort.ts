/** Bits of a digit; six digits hold a float64. */
const DIGIT: u64 = 11;
const VALUES: usize = 1 << 11;
const DIGITS: usize = 6;

/** The bits of a float64 as a whole number that orders as it does. */
// @ts-ignore: decorator
@inline
function ordered(bits: u64): u64 {
  return bits ^ (<u64>(<i64>bits >> 63) | 0x8000000000000000);
}

// @ts-ignore: decorator
@inline
function digitOf(bits: u64, digit: usize): usize {
  return <usize>((ordered(bits) >> (<u64>digit * DIGIT)) & 2047);
}

/**
 * Sorts numbers by one digit after the other, the least significant first. `spare` takes as many
 * numbers, `tallies` six times 2,048 counts. A digit that is the same in all is passed over.
 */
export function sort(values: usize, count: usize, spare: usize, tallies: usize): void {
  memory.fill(tallies, 0, (DIGITS * VALUES) << 2);
  const end = values + (count << 3);
  for (let at = values; at < end; at += 8) {
    const bits = load<u64>(at);
    for (let digit: usize = 0; digit < DIGITS; digit++) {
      const tally = tallies + ((digit * VALUES + digitOf(bits, digit)) << 2);
      store<u32>(tally, load<u32>(tally) + 1);
    }
  }
  let from = values;
  let to = spare;
  for (let digit: usize = 0; digit < DIGITS; digit++) {
    const table = tallies + ((digit * VALUES) << 2);
    if (load<u32>(table + (digitOf(load<u64>(from), digit) << 2)) == <u32>count) continue;
    let before: u32 = 0;
    for (let tally = table; tally < table + (VALUES << 2); tally += 4) {
      const own = load<u32>(tally);
      store<u32>(tally, before);
      before += own;
    }
    const stop = from + (count << 3);
    for (let at = from; at < stop; at += 8) {
      const bits = load<u64>(at);
      const tally = table + (digitOf(bits, digit) << 2);
      const place = load<u32>(tally);
      store<u32>(tally, place + 1);
      store<u64>(to + (<usize>place << 3), bits);
    }
    const held = from;
    from = to;
    to = held;
  }
  if (from != values) memory.copy(values, from, count << 3);
}
