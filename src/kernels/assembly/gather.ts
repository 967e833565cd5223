// @ts-ignore: decorator
@inline
function gather<T>(
  states: usize,
  fromRow: i32,
  toRow: i32,
  places: i32,
  alphabet: u32,
  lags: usize,
  history: i32,
  bases: usize,
  ids: usize,
): void {
  const w = <usize>places;
  const span = load<i32>(lags + (<usize>(history - 1) << 2));
  for (let row = max(fromRow, span); row < toRow; row++) {
    const here = <usize>row * w;
    for (let p: usize = 0; p < w; p++) {
      let code: u32 = 0;
      for (let j = history - 1; j >= 0; j--) {
        const lag = <usize>load<i32>(lags + (<usize>j << 2));
        const state = <i32>load<T>(states + (here - lag * w + p) * sizeof<T>());
        code = code * alphabet + <u32>max<i32>(state, 0);
      }
      const next = <i32>load<T>(states + (here + p) * sizeof<T>());
      code = code * alphabet + <u32>max<i32>(next, 0);
      store<u32>(ids + ((here + p) << 2), load<u32>(bases + (p << 2)) + code);
    }
  }
}

export function gather8(states: usize, fromRow: i32, toRow: i32, places: i32, alphabet: u32, lags: usize, history: i32, bases: usize, ids: usize): void {
  gather<i8>(states, fromRow, toRow, places, alphabet, lags, history, bases, ids);
}

export function gather16(states: usize, fromRow: i32, toRow: i32, places: i32, alphabet: u32, lags: usize, history: i32, bases: usize, ids: usize): void {
  gather<i16>(states, fromRow, toRow, places, alphabet, lags, history, bases, ids);
}

export function gather32(states: usize, fromRow: i32, toRow: i32, places: i32, alphabet: u32, lags: usize, history: i32, bases: usize, ids: usize): void {
  gather<i32>(states, fromRow, toRow, places, alphabet, lags, history, bases, ids);
}
