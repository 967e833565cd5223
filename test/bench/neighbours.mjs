// Nearest-neighbour storage in one thread: against scipy's k-d tree and scikit-learn, and how it grows.
import { writeFileSync } from "node:fs";
import { join } from "node:path";
import { neighbourLocals } from "../../dist/src/storage/neighbours.js";
import { evenPast } from "../../dist/src/storage/past.js";
import { collectWindows } from "../../dist/src/storage/windows.js";
import { companion, folder, here, pythonWith, spread } from "./peers.mjs";

const SAMPLES = 10_000;
const WARMING = 3;
const REPEATS = 9;
const NEIGHBOURS = 4;
const LEAST_OF_SCIPY = 2;
const LEAST_OF_SKLEARN = 2.5;
/** scipy does the same arithmetic on the same values. */
const SAME_AS_SCIPY = 1e-9;
/** scikit-learn first scales each column by its own deviation and adds noise. */
const NEAR_SKLEARN = 0.01;

const settings = { neighbours: NEIGHBOURS, algorithm: 1, exclude: 0 };

/** Prints the tables; false where the estimates differ between programs. */
export async function neighbours() {
  console.log(
    `Nearest neighbours: AR(1), ${SAMPLES} samples, ${NEIGHBOURS} neighbours, algorithm 1`,
  );
  const python = pythonWith("scipy, sklearn", "python3-scipy python3-sklearn");
  const peer = python && companion(python, [here("neighbours_peer.py")]);
  let sound = true;
  if (peer !== undefined) {
    console.log(`  milliseconds, least and median of ${REPEATS}; ratios of medians`);
    console.log("  history          ours           scipy  /ours        sklearn  /ours");
    for (const history of [1, 2, 4, 8]) {
      sound = (await against(peer, history)) && sound;
    }
    console.log(`  wanted: scipy/ours ${LEAST_OF_SCIPY}, sklearn/ours ${LEAST_OF_SKLEARN} or more`);
    peer.end();
  }
  growth();
  return sound;
}

/** One row: the programs take turns, so that what disturbs the machine disturbs all of them. */
async function against(peer, history) {
  const series = autoregression(SAMPLES + history, 42);
  const file = join(folder, `series-${history}.bin`);
  writeFileSync(file, series);
  const windows = windowsOf(series, history);
  const programs = { ours: [], scipy: [], ...(history === 1 ? { sklearn: [] } : {}) };
  const bits = {};
  for (let repeat = -WARMING; repeat < REPEATS; repeat++) {
    for (const [program, times] of Object.entries(programs)) {
      const answer =
        program === "ours"
          ? timed(windows)
          : await peer.ask(`${program} ${NEIGHBOURS} ${history} ${file}`);
      bits[program] = answer.bits;
      if (repeat >= 0) times.push(answer.milliseconds);
    }
  }
  const ours = spread(programs.ours);
  const cell = ({ least, median }) => `${least.toFixed(1)} ${median.toFixed(1)}`.padStart(14);
  const beside = (times) =>
    times === undefined
      ? ""
      : `  ${cell(spread(times))} ${(spread(times).median / ours.median).toFixed(2).padStart(6)}`;
  const row = `${cell(ours)}${beside(programs.scipy)}${beside(programs.sklearn)}`;
  console.log(`  ${String(history).padStart(7)}${row}`);
  return agrees(bits, "scipy", SAME_AS_SCIPY) && agrees(bits, "sklearn", NEAR_SKLEARN);
}

function agrees(bits, program, within) {
  if (bits[program] === undefined || Math.abs(bits.ours - bits[program]) <= within) return true;
  console.log(`  The estimates differ: ${bits.ours} here, ${bits[program]} by ${program}`);
  return false;
}

/** How the time grows from 10³ to 10⁵ samples, against N log N. */
function growth() {
  console.log("  growth: milliseconds for 10³, 10⁴, 10⁵ samples, and over N log N as from 10⁴");
  for (const history of [1, 2, 4]) {
    const measured = [1_000, 10_000, 100_000].map((count) => {
      const windows = windowsOf(autoregression(count + history, 7), history);
      const times = [];
      for (let repeat = -WARMING; repeat < 5; repeat++) {
        const { milliseconds } = timed(windows);
        if (repeat >= 0) times.push(milliseconds);
      }
      const { median } = spread(times);
      return { median, each: median / (count * Math.log(count)) };
    });
    const times = measured.map(({ median }) => median.toFixed(1).padStart(8)).join("");
    const shares = measured.map(({ each }) => (each / measured[1].each).toFixed(2).padStart(7));
    console.log(`  history ${history}:${times}  ${shares.join("")}`);
  }
  console.log();
}

function timed(windows) {
  const start = performance.now();
  const { local } = neighbourLocals(windows, settings);
  const milliseconds = performance.now() - start;
  return { milliseconds, bits: local.reduce((sum, value) => sum + value, 0) / local.length };
}

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
