import { MODEL_VERSION, modelText, parseModel, type SavedModel } from "../formats/modelfile.js";
import { latchmapError } from "../recording/errors.js";
import { type Pool, poolAll, poolEach, poolGroups } from "../recording/pools.js";
import { placeName, placesOf, type Recording } from "../recording/recording.js";
import type { Survey } from "../recording/survey.js";
import { blocksOfModel } from "../storage/modelblocks.js";
import type { Mapped } from "./outcome.js";
import type { MapPlan } from "./request.js";

export { MODEL_VERSION, modelText, parseModel, type SavedModel };

/**
 * The model of a run, to be kept.
 * @throws {LatchmapError} `bad-call` for measures and estimators whose model is their data
 */
export function savedModelOf(recording: Recording, plan: MapPlan, mapped: Mapped): SavedModel {
  const members = plan.pool.names.map((): string[] => []);
  if (plan.pool.kind !== "all") {
    plan.pool.groupOf.forEach((group, place) => {
      members[group].push(placeName(recording, place));
    });
  }
  const { kind, names } = plan.pool;
  const shared = { past: plan.past, pool: { kind, names }, members };
  const { coding, model, gaussians } = mapped;
  if (gaussians !== undefined) return { ...shared, estimator: "gaussian", groups: gaussians };
  if (coding !== undefined && model !== undefined) {
    return { ...shared, estimator: "plugin", coding, blocks: blocksOfModel(model) };
  }
  throw unsavable(plan);
}

/** Refuses before a run what could not be saved after it. */
export function requireSavable(plan: Pick<MapPlan, "estimator" | "measure">): void {
  const { kind } = plan.estimator;
  if (plan.measure === "storage" && (kind === "plugin" || kind === "gaussian")) return;
  throw unsavable(plan);
}

function unsavable(plan: Pick<MapPlan, "estimator" | "measure">): Error {
  const what =
    plan.measure === "storage"
      ? `the model of the ${plan.estimator.kind} estimator is its data`
      : "a model of predictive information is not kept";
  return latchmapError("bad-call", what, "Save a model of storage by plugin or gaussian", {
    option: "--save-model",
  });
}

/**
 * The pool of a saved model over the places of new data: by name, or all places together.
 * @throws {LatchmapError} `bad-setting` where a place has no group in the model
 */
export function poolOfModel(model: SavedModel, recording: Recording, file: string): Pool {
  const places = placesOf(recording);
  if (model.pool.kind === "all") return poolAll(places);
  const groupOf = new Map(
    model.members.flatMap((names, group) => names.map((name) => [name, group] as const)),
  );
  const groups = Array.from({ length: places }, (_, place) => {
    const name = placeName(recording, place);
    const group = groupOf.get(name);
    if (group !== undefined) return group;
    throw latchmapError(
      "bad-setting",
      `the model has no place "${name}"; it has ${[...groupOf.keys()].slice(0, 6).join(", ")}`,
      "Apply it to the places that it was fitted to, or choose them with --places",
      { file, option: "--model" },
    );
  });
  const pool = poolGroups(Uint32Array.from(groups), model.pool.names);
  return model.pool.kind === "each" && places === model.pool.names.length
    ? { ...poolEach(model.pool.names), groupOf: pool.groupOf }
    : pool;
}

/**
 * Refuses data whose values are not among the exact states of a model.
 * @throws {LatchmapError} `bad-setting`, with the value and the model's states
 */
export function requireKnownStates(model: SavedModel, survey: Survey, file: string): void {
  if (model.estimator !== "plugin" || model.coding.kind !== "exact") return;
  const known = new Set(model.coding.symbols);
  const stranger = survey.fraction ?? survey.symbols?.find((symbol) => !known.has(symbol));
  if (stranger === undefined && survey.symbols !== undefined) return;
  const shown = [...model.coding.symbols].slice(0, 8).join(", ");
  throw latchmapError(
    "bad-setting",
    `the value ${stranger ?? "of one cell"} is not among the states of the model (${shown}${known.size > 8 ? ", …" : ""})`,
    "Apply the model to data of the same kind, or fit one to these",
    { file, option: "--model" },
  );
}
