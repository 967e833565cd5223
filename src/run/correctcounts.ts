import { permutedStorageMean } from "../evidence/permutedcounts.js";
import type { Averages } from "../storage/averages.js";
import { groupCounts } from "../storage/blocktable.js";
import type { PluginModel } from "../storage/pluginfit.js";
import { shrunkStorage } from "../storage/shrinkage.js";
import type { MapPlan } from "./request.js";

/** The averages of counted groups with the correction that the plan asks for. */
export function correctCounts(model: PluginModel, plan: MapPlan): readonly Averages[] {
  return model.groups.map((averages, group) =>
    averages.samples === 0
      ? averages
      : { ...averages, storageCorrected: correctedStorage(model, plan, averages, group) },
  );
}

function correctedStorage(
  model: PluginModel,
  plan: MapPlan,
  averages: Averages,
  group: number,
): number {
  const { alphabet, past } = model.shape;
  const { storage, samples } = averages;
  switch (plan.correction) {
    case "miller-madow":
      return averages.storageCorrected;
    case "none":
      return storage;
    case "shrinkage": {
      const counts = groupCounts(model.table, group);
      return shrunkStorage(counts, samples, alphabet ** past.history, alphabet).bits;
    }
    case "permutation": {
      const name = [plan.seed, group];
      return storage - permutedStorageMean(model.table, group, plan.surrogates, name);
    }
  }
}
