import * as v from "valibot";
import { latchmapError } from "../recording/errors.js";
import type { Pool } from "../recording/pools.js";
import type { Coding } from "../states/coding.js";
import { parseRule, ruleText } from "../states/rule.js";
import type { GaussianModel } from "../storage/gaussian.js";
import type { StoredBlocks } from "../storage/modelblocks.js";
import { type Past, pastOfLags } from "../storage/past.js";

/** The version of the file's layout; a reader refuses a newer one. */
export const MODEL_VERSION = 1;

/** A fitted model that can be kept and applied to new data of the same kind. */
export type SavedModel = {
  readonly past: Past;
  /** The names of the groups, and of the places in each; a model of all places names none. */
  readonly pool: Pick<Pool, "kind" | "names">;
  readonly members: readonly (readonly string[])[];
} & (
  | { readonly estimator: "plugin"; readonly coding: Coding; readonly blocks: StoredBlocks }
  | { readonly estimator: "gaussian"; readonly groups: readonly (GaussianModel | null)[] }
);

/** A model as the text of a file: JSON, whole numbers and shortest decimals that read back exactly. */
export function modelText(model: SavedModel): string {
  const { past, pool, members } = model;
  const shared = {
    latchmap_model: MODEL_VERSION,
    estimator: model.estimator,
    lags: [...past.lags],
    pool: { kind: pool.kind, names: pool.names, members },
  };
  if (model.estimator === "plugin") {
    return JSON.stringify({ ...shared, states: storedCoding(model.coding), blocks: model.blocks });
  }
  const groups = model.groups.map((group) =>
    group === null
      ? null
      : {
          ...group,
          mean: [...group.mean],
          joint: [...group.joint],
          alone: [...group.alone],
        },
  );
  return JSON.stringify({ ...shared, groups });
}

function storedCoding(coding: Coding): unknown {
  return coding.kind === "exact"
    ? { kind: "exact", symbols: [...coding.symbols] }
    : {
        kind: "binned",
        rule: ruleText(coding.rule),
        edges: coding.edges.map((edges) => [...edges]),
      };
}

const count = v.pipe(v.number(), v.safeInteger(), v.minValue(0));
const finite = v.pipe(v.number(), v.finite());
const shared = {
  latchmap_model: v.number(),
  lags: v.pipe(v.array(count), v.minLength(1)),
  pool: v.object({
    kind: v.picklist(["all", "each", "groups"]),
    names: v.pipe(v.array(v.string()), v.minLength(1)),
    members: v.array(v.array(v.string())),
  }),
};
const pluginShape = v.object({
  ...shared,
  estimator: v.literal("plugin"),
  states: v.variant("kind", [
    v.object({ kind: v.literal("exact"), symbols: v.pipe(v.array(finite), v.minLength(1)) }),
    v.object({ kind: v.literal("binned"), rule: v.string(), edges: v.array(v.array(finite)) }),
  ]),
  blocks: v.object({
    groups: v.array(count),
    pasts: v.array(count),
    nexts: v.array(count),
    counts: v.array(v.pipe(count, v.minValue(1))),
  }),
});
const gaussianShape = v.object({
  ...shared,
  estimator: v.literal("gaussian"),
  groups: v.array(
    v.nullable(
      v.object({
        history: count,
        future: count,
        samples: count,
        scale: finite,
        mean: v.array(finite),
        joint: v.array(finite),
        alone: v.array(finite),
        ridge: finite,
      }),
    ),
  ),
});
const modelShape = v.variant("estimator", [pluginShape, gaussianShape]);

/**
 * Reads a model from the text of its file.
 * @throws {LatchmapError} `damaged-file` when it is no model, truncated or edited so that its parts do
 * not fit; `unknown-format` for another version
 */
export function parseModel(text: string, file: string): SavedModel {
  const stored = parsedJson(text, file);
  const version = v.safeParse(v.object({ latchmap_model: v.number() }), stored);
  if (!version.success) throw damaged(file, "this is no model of Latchmap");
  if (version.output.latchmap_model !== MODEL_VERSION) {
    throw latchmapError(
      "unknown-format",
      `the model is of version ${version.output.latchmap_model}, and this Latchmap reads version ${MODEL_VERSION}`,
      "Fit it again with this version, or use the version that wrote it",
      { file },
    );
  }
  const parsed = v.safeParse(modelShape, stored);
  if (!parsed.success) {
    const path = v.getDotPath(parsed.issues[0]) ?? "its layout";
    throw damaged(file, `${path} of the model is missing or wrong`);
  }
  const model = parsed.output;
  const common = {
    past: pastOfLags(model.lags),
    pool: { kind: model.pool.kind, names: model.pool.names },
    members: model.pool.members,
  };
  if (model.estimator === "gaussian") {
    const groups = model.groups.map((group) => {
      if (group === null) return null;
      const size = group.history + group.future;
      const fits =
        group.history === model.lags.length &&
        group.mean.length === size &&
        group.joint.length === size ** 2 &&
        group.alone.length === group.future ** 2;
      if (!fits) throw damaged(file, "its means and covariances do not fit its lags");
      return {
        ...group,
        mean: Float64Array.from(group.mean),
        joint: Float64Array.from(group.joint),
        alone: Float64Array.from(group.alone),
      };
    });
    if (groups.length !== model.pool.names.length) {
      throw damaged(file, "it has not one model for each group");
    }
    return { ...common, estimator: "gaussian", groups };
  }
  const coding = codingOf(model.states, model.pool.names.length, file);
  requireBlocks(model.blocks, model.lags.length, coding.alphabet, model.pool.names.length, file);
  return { ...common, estimator: "plugin", coding, blocks: model.blocks };
}

function parsedJson(text: string, file: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    throw damaged(file, "the model is no whole JSON text: it was cut short or edited");
  }
}

function codingOf(
  states: v.InferOutput<typeof pluginShape>["states"],
  groups: number,
  file: string,
): Coding {
  if (states.kind === "exact") {
    const symbols = Float64Array.from(states.symbols);
    const ascending = symbols.every((symbol, i) => i === 0 || symbol > symbols[i - 1]);
    if (!ascending) throw damaged(file, "its states are not in ascending order");
    return { kind: "exact", alphabet: symbols.length, symbols };
  }
  const rule = parseRule(states.rule);
  const bins = rule.kind === "exact" ? 0 : rule.bins;
  const fits =
    states.edges.length === groups && states.edges.every((edges) => edges.length === bins - 1);
  if (!fits) throw damaged(file, "the edges of its states do not fit its groups");
  const edges = states.edges.map((each) => Float64Array.from(each));
  return { kind: "binned", alphabet: bins, rule, edges };
}

function requireBlocks(
  blocks: StoredBlocks,
  history: number,
  alphabet: number,
  groups: number,
  file: string,
): void {
  const length = blocks.counts.length;
  const within = (list: readonly number[], below: number): boolean =>
    list.every((each) => each < below);
  const fits =
    length > 0 &&
    blocks.groups.length === length &&
    blocks.nexts.length === length &&
    blocks.pasts.length === length * history &&
    within(blocks.groups, groups) &&
    within(blocks.nexts, alphabet) &&
    within(blocks.pasts, alphabet);
  if (!fits) throw damaged(file, "its blocks do not fit its history and states");
}

function damaged(file: string, what: string): Error {
  return latchmapError("damaged-file", what, "Fit the model again with --save-model", { file });
}
