import { latchmapError } from "../recording/errors.js";
import type { Correction, Estimator, EstimatorName, MapRequest } from "./request.js";

/** The settings that belong to some estimators only, with the option that names each. */
const OWN_OPTIONS: readonly (readonly [
  setting: keyof MapRequest,
  option: string,
  estimators: readonly EstimatorName[],
])[] = [
  ["states", "--states", ["plugin"]],
  ["ridge", "--ridge", ["gaussian"]],
  ["neighbours", "--neighbours", ["neighbours"]],
  ["algorithm", "--algorithm", ["neighbours"]],
  ["rescale", "--rescale", ["neighbours"]],
  ["jitter", "--jitter", ["neighbours"]],
  ["exclude", "--exclude", ["neighbours", "kernel"]],
  ["width", "--width", ["kernel"]],
];

/**
 * Completes the estimator that a request names; plugin when it names none.
 * @throws {LatchmapError} `bad-call` for a setting out of its range
 */
export function settleEstimator(request: MapRequest): Estimator {
  switch (request.estimator ?? "plugin") {
    case "plugin":
      return { kind: "plugin" };
    case "ordinal":
      return { kind: "ordinal" };
    case "gaussian":
      return { kind: "gaussian", ridge: atLeast(request.ridge ?? 0, 0, "--ridge") };
    case "neighbours":
      return {
        kind: "neighbours",
        neighbours: atLeast(request.neighbours ?? 4, 1, "--neighbours"),
        algorithm: request.algorithm ?? 1,
        exclude: atLeast(request.exclude ?? 0, 0, "--exclude"),
        rescale: request.rescale ?? false,
        jitter: atLeast(request.jitter ?? 0, 0, "--jitter"),
        seed: request.seed ?? 0,
      };
    case "kernel":
      return {
        kind: "kernel",
        width: request.width ?? 0.5,
        exclude: atLeast(request.exclude ?? 0, 0, "--exclude"),
      };
  }
}

/**
 * Refuses settings that the estimator would ignore: nothing is silently left out.
 * @throws {LatchmapError} `bad-call`, with the estimators that the setting belongs to
 */
export function refuseUnused(request: MapRequest, estimator: Estimator): void {
  for (const [setting, option, estimators] of OWN_OPTIONS) {
    if (request[setting] === undefined || estimators.includes(estimator.kind)) continue;
    throw latchmapError(
      "bad-call",
      `the ${estimator.kind} estimator takes no ${option}`,
      `Leave it out, or use --estimator ${estimators.join(" or ")}`,
      { option },
    );
  }
}

/**
 * The correction of an average: Miller–Madow for counts, none for other estimators unless asked.
 * @throws {LatchmapError} `bad-call` for a correction that the estimator does not have
 */
export function settleCorrection(request: MapRequest, estimator: Estimator): Correction {
  const counted = estimator.kind === "plugin" || estimator.kind === "ordinal";
  const correction = request.correction ?? (counted ? "miller-madow" : "none");
  const wrong = counted
    ? estimator.kind === "ordinal" && correction === "shrinkage"
    : correction === "miller-madow" || correction === "shrinkage";
  if (!wrong) return correction;
  throw latchmapError(
    "bad-call",
    `the ${estimator.kind} estimator has no ${correction} correction`,
    "Use --correction permutation, which suits every estimator, or none",
    { option: "--correction" },
  );
}

/**
 * How many values are predicted together: 1 for storage, 2 unasked for predictive information.
 * @throws {LatchmapError} `bad-call` where measure, future and estimator do not go together
 */
export function settleFuture(request: MapRequest, estimator: Estimator, chosen: string[]): number {
  if (request.measure !== "predictive") {
    if (request.future === undefined) return 1;
    throw latchmapError(
      "bad-call",
      "storage predicts one value",
      "Leave --future out, or ask for --measure predictive",
      { option: "--future" },
    );
  }
  if (estimator.kind === "ordinal" || estimator.kind === "kernel") {
    throw latchmapError(
      "bad-call",
      `the ${estimator.kind} estimator has no predictive information`,
      "Use --estimator plugin, gaussian or neighbours",
      { option: "--measure predictive" },
    );
  }
  if (request.future === undefined) chosen.push("future 2: the next two values together");
  const future = request.future ?? 2;
  if (Number.isSafeInteger(future) && future >= 1) return future;
  throw latchmapError("bad-call", `${future} is not a number of values`, "Give 1 or more", {
    option: "--future",
  });
}

function atLeast(value: number, least: number, option: string): number {
  if (Number.isFinite(value) && value >= least) return value;
  throw latchmapError("bad-call", `${value} is too small`, `Give at least ${least}`, { option });
}
