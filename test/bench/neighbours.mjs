// Nearest-neighbour storage in one thread: against scipy's k-d tree and scikit-learn, and how it grows.
import { writeFileSync } from "node:fs";
import { join } from "node:path";
import { neighbourLocals } from "../../dist/src/storage/neighbours.js";
import { evenPast } from "../../dist/src/storage/past.js";
import { collectWindows } from "../../dist/src/storage/windows.js";
import { companion, folder, here, pythonWith, spread } from "./peers.mjs";

const SAMPLES = 10_000;
const REPEATS = 7;
const NEIGHBOURS = 4;
const LEAST_OF_SCIPY = 2;
const LEAST_OF_SKLEARN = 2.5;

export async function neighbours() {
  console.log(
    `Nearest neighbours: AR(1), ${SAMPLES} samples, ${NEIGHBOURS} neighbours, algorithm 1`,
  );
  const python = pythonWith("scipy, sklearn", "python3-scipy python3-sklearn");
  const peer = python && companion(python, [here("neighbours_peer.py")]);
  let sound = true;
  if (peer !== undefined) {
    console.log("  history        ours       scipy  scipy/ours     sklearn  sklearn/ours");
    for (const history of [1, 2, 4, 8]) {
      sound = (await against(peer, history)) && sound;
    }
    console.log(
      `  wanted: scipy/ours at least ${LEAST_OF_SCIPY}, sklearn/ours at least ${LEAST_OF_SKLEARN}`,
    );
    peer.end();
  }
  growth();
  return sound;
}

async function against(peer, history) {
  const series = autoregression(SAMPLES + history, 42);
  const file = join(folder, `series-${history}.bin`);
  writeFileSync(file, series);
  const windows = windowsOf(series, history);
  const times = { ours: [], scipy: [], sklearn: [] };
  let bits = {};
  for (let repeat = 0; repeat <= REPEATS; repeat++) {
    const start = performance.now();
    const { local } = neighbourLocals(windows, settings);
    const ours = performance.now() - start;
    const scipy = await peer.ask(`scipy ${NEIGHBOURS} ${history} ${file}`);
    const sklearn = history === 1 ? await peer.ask(`sklearn ${NEIGHBOURS} 1 ${file}`) : undefined;
    bits = { ours: mean(local), scipy: scipy.bits, sklearn: sklearn?.bits };
    if (repeat === 0) continue; // warms up
    times.ours.push(ours);
    times.scipy.push(scipy.milliseconds);
    if (sklearn !== undefined) times.sklearn.push(sklearn.milliseconds);
  }
  const median = (list) => spread(list).median;
  const cell = (list) => `${median(list).toFixed(1)} ms`.padStart(11);
  const ratio = (list) => (median(list) / median(times.ours)).toFixed(2).padStart(11);
  const beside =
    times.sklearn.length > 0 ? ` ${cell(times.sklearn)} ${ratio(times.sklearn).padStart(13)}` : "";
  console.log(
    `  ${String(history).padStart(7)} ${cell(times.ours)} ${cell(times.scipy)} ${ratio(times.scipy)}${beside}`,
  );
  if (Math.abs(bits.ours - bits.scipy) < 1e-9) return true;
  console.log(`  The estimates differ: ${bits.ours} and ${bits.scipy}`);
  return false;
}

/** How the time grows from 10³ to 10⁵ samples, against N log N. */
function growth() {
  console.log("  growth from 10³ to 10⁵ samples, times over N log N relative to 10⁴:");
  for (const history of [1, 2, 4]) {
    const perStep = [1_000, 10_000, 100_000].map((count) => {
      const windows = windowsOf(autoregression(count + history, 7), history);
      const times = [];
      for (let repeat = 0; repeat < 4; repeat++) {
        const start = performance.now();
        neighbourLocals(windows, settings);
        times.push(performance.now() - start);
      }
      return spread(times).median / (count * Math.log(count));
    });
    const shown = perStep.map((each) => (each / perStep[1]).toFixed(2).padStart(6));
    console.log(`  history ${history}: ${shown.join(" ")}`);
  }
  console.log();
}

const settings = { neighbours: NEIGHBOURS, algorithm: 1, exclude: 0 };

const mean = (values) => values.reduce((sum, value) => sum + value, 0) / values.length;

function windowsOf(series, history) {
  return collectWindows(
    { values: series, timeSteps: series.length, places: 1 },
    { past: evenPast(history), future: 1, skip: 0, members: [0] },
  );
}

/** x[n] = 0.6 x[n−1] + noise, the noise a sum of uniform draws, seeded. */
function autoregression(length, seed) {
  let state = seed >>> 0;
  const draw = () => {
    state = (Math.imul(1664525, state) + 1013904223) >>> 0;
    return state / 2 ** 32 - 0.5;
  };
  const series = new Float64Array(length);
  for (let n = 1; n < length; n++) {
    let noise = 0;
    for (let i = 0; i < 12; i++) noise += draw();
    series[n] = 0.6 * series[n - 1] + noise;
  }
  return series;
}
