export function tally(
  ids: usize,
  rows: i32,
  places: i32,
  storage: usize,
  surprise: usize,
  negative: usize,
  none: u32,
  placeStorage: usize,
  placeSurprise: usize,
  placeSamples: usize,
  placeNegatives: usize,
  rowStorage: usize,
  rowSamples: usize,
): void {
  const w = <usize>places;
  let at = ids;
  for (let row: usize = 0; row < <usize>rows; row++) {
    let sum: i64 = 0;
    let samples: u32 = 0;
    for (let p: usize = 0; p < w; p++, at += 4) {
      const id = load<u32>(at);
      if (id == none) continue;
      const bits = load<i64>(storage + (<usize>id << 3));
      sum += bits;
      samples++;
      const wide = p << 3;
      const narrow = p << 2;
      store<i64>(placeStorage + wide, load<i64>(placeStorage + wide) + bits);
      store<i64>(placeSurprise + wide, load<i64>(placeSurprise + wide) + load<i64>(surprise + (<usize>id << 3)));
      store<u32>(placeSamples + narrow, load<u32>(placeSamples + narrow) + 1);
      store<u32>(placeNegatives + narrow, load<u32>(placeNegatives + narrow) + <u32>load<u8>(negative + id));
    }
    store<i64>(rowStorage + (row << 3), sum);
    store<u32>(rowSamples + (row << 2), samples);
  }
}
