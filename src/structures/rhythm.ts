import { medianOf, spreadOf } from "./robust.js";

const LONGEST = 400;
const JUDGED_STEPS = 8192;
/** Changes must be so much alike a repeat apart. */
const LEAST_LIKENESS = 0.25;
/** Of repeats nearly as good the shortest is taken. */
const NEARLY = 0.9;
const FEWEST_REPEATS = 10;
/** Changes further out than so many spreads count as if they stood here. */
const FARTHEST = 3;

/**
 * A record less its rhythm, such as a daily one: the median of each phase of the repeat after which its
 * changes are most alike. A record without a rhythm stays as it is.
 */
export function withoutRhythm(values: Float64Array): Float64Array {
  const repeat = repeatOf(values);
  if (repeat === undefined) return values;
  const centre = medianOf(values.filter((value) => !Number.isNaN(value)));
  const profile = Array.from({ length: repeat }, (_, phase) => {
    const own: number[] = [];
    for (let step = phase; step < values.length; step += repeat) {
      if (!Number.isNaN(values[step])) own.push(values[step]);
    }
    return own.length === 0 ? 0 : medianOf(own) - centre;
  });
  return values.map((value, step) => value - profile[step % repeat]);
}

function repeatOf(values: Float64Array): number | undefined {
  const judged = values.subarray(0, JUDGED_STEPS);
  const changes = judged.map((value, step) => (step === 0 ? Number.NaN : value - judged[step - 1]));
  const far = FARTHEST * spreadOf(changes.filter((change) => !Number.isNaN(change)));
  const drawnIn = changes.map((change) => Math.max(-far, Math.min(far, change)));
  const longest = Math.min(LONGEST, Math.floor(judged.length / FEWEST_REPEATS));
  const likeness = Array.from({ length: longest + 1 }, (_, lag) =>
    lag < 2 ? 0 : likenessAt(drawnIn, lag),
  );
  const most = Math.max(...likeness);
  if (!(most >= LEAST_LIKENESS)) return undefined;
  return likeness.findIndex((like) => like >= NEARLY * most);
}

function likenessAt(changes: Float64Array, lag: number): number {
  let [together, alone] = [0, 0];
  for (let step = lag; step < changes.length; step++) {
    const [now, then] = [changes[step], changes[step - lag]];
    if (Number.isNaN(now) || Number.isNaN(then)) continue;
    together += now * then;
    alone += (now * now + then * then) / 2;
  }
  return alone === 0 ? 0 : together / alone;
}
