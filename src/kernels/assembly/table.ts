export function count(ids: usize, length: i32, counts: usize): void {
  const end = ids + (<usize>length << 2);
  for (let at = ids; at < end; at += 4) {
    const entry = counts + (<usize>load<u32>(at) << 2);
    store<u32>(entry, load<u32>(entry) + 1);
  }
}

export function lookUp32(ids: usize, length: i32, table: usize, out: usize): void {
  for (let i: usize = 0; i < <usize>length; i++) {
    store<f32>(out + (i << 2), load<f32>(table + (<usize>load<u32>(ids + (i << 2)) << 2)));
  }
}

export function lookUp64(ids: usize, length: i32, table: usize, out: usize): void {
  for (let i: usize = 0; i < <usize>length; i++) {
    store<f64>(out + (i << 3), load<f64>(table + (<usize>load<u32>(ids + (i << 2)) << 3)));
  }
}
