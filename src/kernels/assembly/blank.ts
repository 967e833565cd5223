// @ts-ignore: decorator
@inline
function blank<T>(
  states: usize,
  rows: i32,
  places: i32,
  lags: usize,
  history: i32,
  none: u32,
  ids: usize,
): void {
  const w = <usize>places;
  for (let row = 0; row < rows; row++) {
    const here = <usize>row * w;
    for (let p: usize = 0; p < w; p++) {
      if (<i32>load<T>(states + (here + p) * sizeof<T>()) >= 0) continue;
      store<u32>(ids + ((here + p) << 2), none);
      for (let j = 0; j < history; j++) {
        const lag = load<i32>(lags + (<usize>j << 2));
        if (row + lag >= rows) break;
        store<u32>(ids + ((here + <usize>lag * w + p) << 2), none);
      }
    }
  }
}

export function blank8(states: usize, rows: i32, places: i32, lags: usize, history: i32, none: u32, ids: usize): void {
  blank<i8>(states, rows, places, lags, history, none, ids);
}

export function blank16(states: usize, rows: i32, places: i32, lags: usize, history: i32, none: u32, ids: usize): void {
  blank<i16>(states, rows, places, lags, history, none, ids);
}

export function blank32(states: usize, rows: i32, places: i32, lags: usize, history: i32, none: u32, ids: usize): void {
  blank<i32>(states, rows, places, lags, history, none, ids);
}
