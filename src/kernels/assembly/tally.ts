/** Entries are pairs of 64-bit words; places have three. See tallyIds in ../blocks.ts. */
export function tally(
  ids: usize,
  rows: i32,
  places: i32,
  pairs: usize,
  none: u32,
  placeSums: usize,
  rowStorage: usize,
  rowSamples: usize,
): void {
  const end = placeSums + <usize>places * 24;
  let at = ids;
  for (let row: usize = 0; row < <usize>rows; row++) {
    let sum: i64 = 0;
    let samples: u32 = 0;
    for (let place = placeSums; place < end; place += 24, at += 4) {
      const id = load<u32>(at);
      if (id == none) continue;
      const entry = pairs + (<usize>id << 4);
      const bits = load<i64>(entry);
      sum += bits;
      samples++;
      store<i64>(place, load<i64>(place) + bits);
      store<i64>(place, load<i64>(place, 8) + load<i64>(entry, 8), 8);
      store<i64>(place, load<i64>(place, 16) + 1 + ((bits >>> 63) << 32), 16);
    }
    store<i64>(rowStorage + (row << 3), sum);
    store<u32>(rowSamples + (row << 2), samples);
  }
}
