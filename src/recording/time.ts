/**
 * The time axis of a recording.
 * `steps`: bare counts from 0. `numbers`: a number a step, in the recording's own unit.
 * `dates`: milliseconds since 1970-01-01 UTC a step.
 */
export type TimeAxis =
  | { readonly kind: "steps" }
  | { readonly kind: "numbers"; readonly name: string; readonly values: Float64Array }
  | { readonly kind: "dates"; readonly name: string; readonly values: Float64Array };

/** The label of a time step as a person reads it. Dates without a time of day print as the date. */
export function timeLabel(axis: TimeAxis, step: number): string {
  switch (axis.kind) {
    case "steps":
      return String(step);
    case "numbers":
      return String(axis.values[step]);
    case "dates": {
      const iso = new Date(axis.values[step] ?? Number.NaN).toISOString();
      return iso.endsWith("T00:00:00.000Z") ? iso.slice(0, 10) : iso.replace(".000Z", "Z");
    }
  }
}

/** The part of an axis from `start` up to but not including `stop`. Steps stay counts from 0. */
export function sliceTime(axis: TimeAxis, start: number, stop: number): TimeAxis {
  if (axis.kind === "steps") return axis;
  return { ...axis, values: axis.values.slice(start, stop) };
}

/**
 * The first step whose distance to the step before differs from the usual (median) distance by more
 * than a thousandth of it, or -1 where the axis is regular.
 */
export function firstIrregularStep(axis: TimeAxis): number {
  if (axis.kind === "steps" || axis.values.length < 3) return -1;
  const gaps = Float64Array.from(
    { length: axis.values.length - 1 },
    (_, i) => (axis.values[i + 1] ?? 0) - (axis.values[i] ?? 0),
  );
  const usual = gaps.slice().sort()[gaps.length >> 1] ?? 0;
  const wrong = gaps.findIndex((gap) => Math.abs(gap - usual) > Math.abs(usual) / 1000);
  return wrong < 0 ? -1 : wrong + 1;
}
