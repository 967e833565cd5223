import type { ShownField } from "../map/shownmap.js";
import type { Reach } from "../page/session.js";

/** How the numbers of a field are shaded. */
export type Scale =
  /** From −end over 0 to +end: rust, paper, teal. */
  | { readonly kind: "signed"; readonly end: number }
  /** From the paper to the ink. */
  | { readonly kind: "rising"; readonly from: number; readonly to: number };

/**
 * The scale of a field. What may be negative is shaded on both sides of 0, at a usual strength or at
 * the largest there is; the recording's own values from their least to their greatest; all else from 0.
 */
export function scaleOf(field: ShownField, reach: Reach): Scale {
  const { least, greatest } = field.spread;
  if (field.name === "values") return { kind: "rising", from: least, to: greatest };
  const end = endOf(field, reach);
  return field.name === "local_storage" || least < 0
    ? { kind: "signed", end }
    : { kind: "rising", from: 0, to: end };
}

/** The distance from 0 of the strongest number of a field. */
export function largestOf({ spread }: ShownField): number {
  const largest = Math.max(Math.abs(spread.least), Math.abs(spread.greatest));
  return Number.isNaN(largest) ? 0 : largest;
}

/** Whether the colours of a field can end at a usual strength, short of its largest. */
export function hasUsualEnd(field: ShownField): boolean {
  return (
    field.name !== "values" && counted(field) === undefined && largestOf(field) > field.spread.usual
  );
}

function endOf(field: ShownField, reach: Reach): number {
  const largest = largestOf(field);
  const count = counted(field);
  if (count !== undefined) return count;
  return reach === "usual" || largest <= field.spread.usual ? field.spread.usual : largest;
}

/** The end of a field of small whole numbers, which is their largest. */
function counted(field: ShownField): number | undefined {
  return /^u?int/.test(field.element) ? Math.max(1, largestOf(field)) : undefined;
}
