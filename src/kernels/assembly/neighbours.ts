/** Whether two windows are too close in time to be neighbours; a window is to itself. */
// @ts-ignore: decorator
@inline
function isExcluded(a: u32, b: u32, time: usize, series: usize, exclude: i32): bool {
  if (a == b) return true;
  if (load<u32>(series + (<usize>a << 2)) != load<u32>(series + (<usize>b << 2))) return false;
  const apart = <i32>load<u32>(time + (<usize>a << 2)) - <i32>load<u32>(time + (<usize>b << 2));
  return (apart < 0 ? -apart : apart) < exclude;
}

/** Distance in the maximum norm from a point to a box; 0 within it. */
// @ts-ignore: decorator
@inline
function toBox(point: usize, box: usize, size: usize): f64 {
  let most: f64 = 0;
  for (let d: usize = 0; d < size; d += 8) {
    const x = load<f64>(point + d);
    const below = load<f64>(box + d) - x;
    const above = x - load<f64>(box + size + d);
    most = max<f64>(most, max<f64>(below, above));
  }
  return most;
}

/** Distance in the maximum norm from a point to the farthest corner of a box. */
// @ts-ignore: decorator
@inline
function acrossBox(point: usize, box: usize, size: usize): f64 {
  let most: f64 = 0;
  for (let d: usize = 0; d < size; d += 8) {
    const x = load<f64>(point + d);
    const low = x - load<f64>(box + d);
    const high = load<f64>(box + size + d) - x;
    most = max<f64>(most, max<f64>(low, high));
  }
  return most;
}

// @ts-ignore: decorator
@inline
function apart(a: usize, b: usize, size: usize): f64 {
  let most: f64 = 0;
  for (let d: usize = 0; d < size; d += 8) {
    most = max<f64>(most, abs<f64>(load<f64>(a + d) - load<f64>(b + d)));
  }
  return most;
}

/** Puts the points of a node among the nearest so far; ties go to the earlier original number. */
function takeNode(
  node: u32,
  query: usize,
  own: u32,
  points: usize,
  size: usize,
  order: usize,
  start: usize,
  end: usize,
  time: usize,
  series: usize,
  exclude: i32,
  wanted: i32,
  distances: usize,
  found: usize,
): void {
  const to = load<u32>(end + (<usize>node << 2));
  const last = <usize>(wanted - 1);
  for (let p = load<u32>(start + (<usize>node << 2)); p < to; p++) {
    const distance = apart(points + <usize>p * size, query, size);
    const worst = load<f64>(distances + (last << 3));
    if (distance > worst) continue;
    const id = load<u32>(order + (<usize>p << 2));
    if (distance == worst && id > load<u32>(found + (last << 2))) continue;
    if (isExcluded(id, own, time, series, exclude)) continue;
    let at = last;
    while (at > 0) {
      const before = load<f64>(distances + ((at - 1) << 3));
      const idBefore = load<u32>(found + ((at - 1) << 2));
      if (before < distance || (before == distance && idBefore < id)) break;
      store<f64>(distances + (at << 3), before);
      store<u32>(found + (at << 2), idBefore);
      at--;
    }
    store<f64>(distances + (at << 3), distance);
    store<u32>(found + (at << 2), id);
  }
}

/** The nearest neighbours of every point: distances and original numbers, nearest first. */
export function nearest(
  points: usize,
  dimensions: i32,
  order: usize,
  start: usize,
  end: usize,
  skip: usize,
  parent: usize,
  boxes: usize,
  nodes: i32,
  time: usize,
  series: usize,
  exclude: i32,
  wanted: i32,
  distances: usize,
  found: usize,
): void {
  const size = <usize>dimensions << 3;
  for (let leaf: u32 = 0; leaf < <u32>nodes; leaf++) {
    if (load<u32>(skip + (<usize>leaf << 2)) != leaf + 1) continue;
    const to = load<u32>(end + (<usize>leaf << 2));
    for (let p = load<u32>(start + (<usize>leaf << 2)); p < to; p++) {
      const query = points + <usize>p * size;
      const own = load<u32>(order + (<usize>p << 2));
      const mine = distances + <usize>own * (<usize>wanted << 3);
      const mineFound = found + <usize>own * (<usize>wanted << 2);
      for (let i: usize = 0; i < <usize>wanted; i++) {
        store<f64>(mine + (i << 3), Infinity);
        store<u32>(mineFound + (i << 2), 0xffffffff);
      }
      takeNode(leaf, query, own, points, size, order, start, end, time, series, exclude, wanted, mine, mineFound);
      const worst = mine + (<usize>(wanted - 1) << 3);
      // From the leaf up to the root: each time the other half of the node above.
      let child = leaf;
      while (child != 0) {
        const above = load<u32>(parent + (<usize>child << 2));
        const firstHalf = above + 1;
        const sibling = child == firstHalf ? load<u32>(skip + (<usize>firstHalf << 2)) : firstHalf;
        const stop = load<u32>(skip + (<usize>sibling << 2));
        let node = sibling;
        while (node < stop) {
          const after = load<u32>(skip + (<usize>node << 2));
          if (toBox(query, boxes + <usize>node * (size << 1), size) > load<f64>(worst)) {
            node = after;
          } else {
            if (after == node + 1) {
              takeNode(node, query, own, points, size, order, start, end, time, series, exclude, wanted, mine, mineFound);
            }
            node++;
          }
        }
        child = above;
      }
    }
  }
}

/** How many points lie within each point's own radius: nearer than it, or no farther. */
export function countWithin(
  points: usize,
  dimensions: i32,
  order: usize,
  start: usize,
  end: usize,
  skip: usize,
  boxes: usize,
  nodes: i32,
  count: i32,
  radii: usize,
  orEqual: bool,
  counts: usize,
): void {
  const size = <usize>dimensions << 3;
  for (let p: u32 = 0; p < <u32>count; p++) {
    const query = points + <usize>p * size;
    const own = load<u32>(order + (<usize>p << 2));
    const radius = load<f64>(radii + (<usize>own << 3));
    let within: u32 = 0;
    let node: u32 = 0;
    while (node < <u32>nodes) {
      const after = load<u32>(skip + (<usize>node << 2));
      const box = boxes + <usize>node * (size << 1);
      const near = toBox(query, box, size);
      if (orEqual ? near > radius : near >= radius) {
        node = after;
        continue;
      }
      const from = load<u32>(start + (<usize>node << 2));
      const to = load<u32>(end + (<usize>node << 2));
      const far = acrossBox(query, box, size);
      if (orEqual ? far <= radius : far < radius) {
        within += to - from;
        node = after;
        continue;
      }
      if (after == node + 1) {
        for (let q = from; q < to; q++) {
          const distance = apart(points + <usize>q * size, query, size);
          within += <u32>(orEqual ? distance <= radius : distance < radius);
        }
      }
      node++;
    }
    store<u32>(counts + (<usize>own << 2), within);
  }
}
