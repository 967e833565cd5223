import type { Recording } from "../recording/recording.js";
import type { MapSink } from "./outcome.js";
import type { MapPlan } from "./request.js";

/** Writes the steps `from` … `to`−1, which were left out: they have values and no storage. */
export async function writeSkipped(
  recording: Recording,
  plan: MapPlan,
  from: number,
  to: number,
  sink: MapSink,
): Promise<void> {
  if (from >= to) return;
  const slab = await recording.read(from, to);
  const kind = plan.precision === "float32" ? Float32Array : Float64Array;
  const nothing = new kind(slab.values.length).fill(Number.NaN);
  await sink.write({
    start: from,
    steps: to - from,
    storage: nothing,
    ...(plan.withEntropyRate ? { entropyRate: nothing } : {}),
    values: slab.values,
  });
}
