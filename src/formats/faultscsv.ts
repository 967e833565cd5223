import { placeName, type Recording } from "../recording/recording.js";
import { timeLabel } from "../recording/time.js";
import type { Fault } from "../structures/faultwish.js";
import { csvText } from "./table.js";

/** A fault with what the map says of its spell. */
export interface MappedFault extends Fault {
  /**
   * Mean local storage of the place over the spell, in bits, and over the rest of its record; NaN where
   * there is none.
   */
  readonly storage: number;
  readonly storageElse: number;
}

/**
 * The faults as CSV, the most surprising first. `end` is the step after the last; `size` is the value
 * that is held, or by how much values are off in the end.
 */
export function faultsCsv(
  faults: readonly MappedFault[],
  of: Pick<Recording, "layout" | "names" | "time">,
): string {
  const labelled = of.time.kind !== "steps";
  const labels = labelled ? ["start_time", "last_time"] : [];
  return csvText(
    [
      ...["place", "kind", "start", "end", ...labels, "steps", "surprise_bits", "size"],
      ...["storage_bits", "storage_bits_else"],
    ],
    faults.map((fault) => [
      ...[placeName(of, fault.place), fault.kind, fault.start, fault.end],
      ...(labelled ? [timeLabel(of.time, fault.start), timeLabel(of.time, fault.end - 1)] : []),
      fault.end - fault.start,
      rounded(fault.surprise),
      rounded(fault.size),
      rounded(fault.storage),
      rounded(fault.storageElse),
    ]),
  );
}

function rounded(value: number): number {
  return Number(value.toPrecision(6));
}
