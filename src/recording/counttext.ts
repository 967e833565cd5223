/** A whole number with its thousands parted by commas: `10,000`. */
export function countText(count: number): string {
  return String(count).replace(/\B(?=(\d{3})+$)/g, ",");
}
