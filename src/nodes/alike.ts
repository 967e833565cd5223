/**
 * Groups of nodes that cannot be told apart: runs along their order by storage in which no two nodes
 * differ, each as long as it can be. Runs may overlap, since being alike does not carry over: the first
 * may be like the second and the second like the third, though the first and third differ.
 *
 * @param order  nodes by storage
 * @param differ whether two nodes are told apart
 */
export function runsAlike(
  order: readonly number[],
  differ: (a: number, b: number) => boolean,
): number[][] {
  const runs: number[][] = [];
  let start = 0;
  for (let end = 0; end < order.length; end++) {
    let next = start;
    for (let i = start; i < end; i++) if (differ(order[i], order[end])) next = i + 1;
    if (next === start) continue;
    runs.push(order.slice(start, end));
    start = next;
  }
  return order.length === 0 ? [] : [...runs, order.slice(start)];
}
