/**
 * The least number of letters to put in, take out or change that makes one text the other.
 * @see Wagner & Fischer 1974, Journal of the ACM 21:168–173
 */
export function editDistance(a: string, b: string): number {
  let above = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i++) {
    const row = [i];
    for (let j = 1; j <= b.length; j++) {
      const changed = above[j - 1] + (a[i - 1] === b[j - 1] ? 0 : 1);
      row.push(Math.min(changed, above[j] + 1, row[j - 1] + 1));
    }
    above = row;
  }
  return above[b.length];
}
