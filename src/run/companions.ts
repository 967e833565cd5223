import { placesOf, type Recording } from "../recording/recording.js";
import type { Companion, CompanionRows, MapSink } from "./outcome.js";
import type { MapPlan } from "./request.js";

/** Takes the rows of companion maps in time order; steps left out between them have no values. */
export interface CompanionWriter {
  write(start: number, rows: CompanionRows): Promise<void>;
  finish(): Promise<void>;
}

/** Opens companion maps in a sink; undefined where it has no place for them. */
export async function openCompanions(
  recording: Recording,
  plan: MapPlan,
  companions: readonly Companion[],
  sink: MapSink,
): Promise<CompanionWriter | undefined> {
  const target = await sink.openCompanions?.(recording, plan, companions);
  if (target === undefined) return undefined;
  const places = placesOf(recording);
  const kind = plan.precision === "float32" ? Float32Array : Float64Array;
  let written = 0;
  const fillTo = async (step: number): Promise<void> => {
    if (step <= written) return;
    const nothing = new kind((step - written) * places).fill(Number.NaN);
    await target.write(
      written,
      step - written,
      companions.map(() => nothing),
    );
    written = step;
  };
  return {
    write: async (start, rows) => {
      await fillTo(start);
      const steps = (rows[0]?.length ?? 0) / places;
      await target.write(start, steps, rows);
      written = start + steps;
    },
    finish: async () => {
      await fillTo(recording.timeSteps);
      await target.finish();
    },
  };
}
