/** JSON for files and for `--json`: numbers that are not finite become null. */
export function jsonText(value: unknown): string {
  return `${JSON.stringify(value, null, 2)}\n`;
}
