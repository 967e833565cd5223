// Permutation tests on two worker threads: counts against plain C, nearest neighbours against scipy.
import { writeFileSync } from "node:fs";
import { join } from "node:path";
import { Worker } from "node:worker_threads";
import { countTotals } from "../../dist/src/evidence/permutedcounts.js";
import { SequentialTest } from "../../dist/src/evidence/sequential.js";
import { poolEach } from "../../dist/src/recording/pools.js";
import { neighbourLocals } from "../../dist/src/storage/neighbours.js";
import { evenPast } from "../../dist/src/storage/past.js";
import { PluginFit } from "../../dist/src/storage/pluginfit.js";
import { collectWindows } from "../../dist/src/storage/windows.js";
import { companion, compiled, folder, here, pythonWith, spread } from "./peers.mjs";

const WORKERS = 2;
const NODES = 100;
const STEPS = 10_000;
const PERMUTATIONS = 1_000;
/** Permutations that C is timed for; it takes as long for each. */
const PERMUTATIONS_OF_C = 200;
const REPEATS = 5;
const LEAST_OF_C = 1.2;

const SAMPLES = 10_000;
const HISTORY = 2;
const SURROGATES = 200;
/** Runs that scipy is timed for. */
const RUNS_OF_SCIPY = 10;
const LEAST_OF_SCIPY = 6;
const LEAST_OF_SCIPY_STOPPED = 20;
const settings = { neighbours: 4, algorithm: 1, exclude: 0 };

/** Prints the tables; false where the programs differ in what they find. */
export async function evidence() {
  const workers = Array.from(
    { length: WORKERS },
    () => new Worker(new URL("evidence_worker.mjs", import.meta.url)),
  );
  const sound = [await counted(workers, 2, 8), await counted(workers, 4, 3)];
  sound.push(await neighbourTests(workers));
  await Promise.all(workers.map((worker) => worker.terminate()));
  console.log();
  return sound.every(Boolean);
}

/** One answer of a worker to one message. */
function ask(worker, message) {
  return new Promise((resolve, reject) => {
    const settle = (how) => (answer) => {
      worker.off("message", answered);
      worker.off("error", failed);
      how(answer);
    };
    const answered = settle(resolve);
    const failed = settle(reject);
    worker.on("message", answered);
    worker.on("error", failed);
    worker.postMessage(message);
  });
}

async function counted(workers, alphabet, history) {
  console.log(
    `Permutation tests of counts: ${NODES} nodes × ${STEPS} steps, ${alphabet} states, history ${history}, ${PERMUTATIONS} permutations each`,
  );
  const states = chains(alphabet);
  const file = join(folder, `chains-${alphabet}.bin`);
  writeFileSync(file, states);
  const program = compiled("permute.c");
  const words = [file, NODES, STEPS, alphabet, history].map(String);
  const peer = program && companion(program, words);
  const times = { ours: [], c: [] };
  let found;
  let foundByC;
  for (let repeat = -1; repeat < REPEATS; repeat++) {
    found = await permutedNetwork(workers, states, alphabet, history);
    foundByC = peer && (await peer.ask(String(PERMUTATIONS_OF_C)));
    if (repeat < 0) continue;
    times.ours.push((NODES * STEPS * PERMUTATIONS) / found.milliseconds / 1e3);
    if (peer) times.c.push((NODES * STEPS * PERMUTATIONS_OF_C) / foundByC.milliseconds / 1e3);
  }
  peer?.end();
  const row = (name, rates) => {
    const sorted = [...rates].sort((a, b) => b - a);
    const [most, median] = [sorted[0], spread(rates).median];
    console.log(`  ${name.padEnd(58)} ${median.toFixed(0).padStart(6)} (most ${most.toFixed(0)})`);
  };
  console.log("  million cells × permutations a second, median of 5:");
  row("Latchmap, 2 workers: draws tables with the same totals", times.ours);
  if (!peer) return true;
  row("plain C, 1 thread: shuffles, counts, takes the entropy", times.c);
  const ratio = spread(times.ours).median / spread(times.c).median;
  console.log(`  ours / C = ${ratio.toFixed(1)}, wanted at least ${LEAST_OF_C}`);
  const same = Math.abs(found.entropy - foundByC.entropy) < 1e-3;
  if (!same) console.log(`  The entropies differ: ${found.entropy} and ${foundByC.entropy}`);
  return same;
}

/** From states in memory to the storage of every permutation; the workers take the nodes in turn. */
async function permutedNetwork(workers, states, alphabet, history) {
  const start = performance.now();
  const names = Array.from({ length: NODES }, (_, node) => `node ${node}`);
  const fit = new PluginFit({ alphabet, past: evenPast(history), pool: poolEach(names) }, STEPS);
  fit.states(STEPS).set(states);
  fit.add({ steps: STEPS, lead: 0, mayHaveGaps: false });
  const { table, groups } = fit.finish();
  const totals = countTotals(table);
  let next = 0;
  const means = new Float64Array(NODES);
  await Promise.all(
    workers.map(async (worker) => {
      for (let node = next++; node < NODES; node = next++) {
        const task = { kind: "counts", totals: totals[node], name: [1, node] };
        const bits = await ask(worker, { task, first: 0, count: PERMUTATIONS });
        means[node] = bits.reduce((sum, value) => sum + value, 0) / PERMUTATIONS;
      }
    }),
  );
  const milliseconds = performance.now() - start;
  // The entropy of blocks, as C has it: those of pasts and next values less the storage left by chance.
  const entropy = groups.map(
    (group, node) => group.entropy + pastEntropy(totals[node]) - means[node],
  );
  return { milliseconds, entropy: entropy.reduce((sum, bits) => sum + bits, 0) / NODES };
}

function pastEntropy({ pasts, samples }) {
  return pasts.reduce((sum, count) => sum - (count / samples) * Math.log2(count / samples), 0);
}

async function neighbourTests(workers) {
  console.log(
    `Permutation tests of nearest-neighbour storage: ${SAMPLES} samples, history ${HISTORY}, ${SURROGATES} permutations, ${WORKERS} workers`,
  );
  const python = pythonWith("scipy, sklearn", "python3-scipy python3-sklearn");
  const peer = python && companion(python, [here("neighbours_peer.py")]);
  let sound = true;
  console.log(`  seconds; scipy: ${RUNS_OF_SCIPY} runs timed, times ${SURROGATES / RUNS_OF_SCIPY}`);
  for (const [name, coefficient, least] of [
    ["memory: all are needed", 0.6, LEAST_OF_SCIPY],
    ["no memory: stops at the tenth that reaches it", 0, LEAST_OF_SCIPY_STOPPED],
  ]) {
    const series = autoregression(SAMPLES + HISTORY, coefficient);
    const file = join(folder, `series-${coefficient}.bin`);
    writeFileSync(file, series);
    const times = { ours: [], scipy: [] };
    let found;
    let foundByScipy;
    for (let repeat = -1; repeat < 3; repeat++) {
      found = await testNeighbours(workers, series);
      foundByScipy = peer && (await peer.ask(`permuted:${RUNS_OF_SCIPY} 4 ${HISTORY} ${file}`));
      if (repeat < 0) continue;
      times.ours.push(found.milliseconds / 1e3);
      if (peer) {
        times.scipy.push((foundByScipy.milliseconds / 1e3) * (SURROGATES / RUNS_OF_SCIPY));
      }
    }
    const ours = spread(times.ours).median;
    const { p, surrogates } = found.result;
    console.log(
      `  ${name}: ours ${ours.toFixed(2)} (p = ${p.toPrecision(2)} from ${surrogates} permutations)`,
    );
    if (!peer) continue;
    const scipy = spread(times.scipy).median;
    console.log(
      `    scipy ${scipy.toFixed(2)}; scipy / ours = ${(scipy / ours).toFixed(1)}, wanted at least ${least}`,
    );
    const same = Math.abs(found.result.nullMean - foundByScipy.bits) < 0.01;
    if (!same) {
      console.log(`    The null means differ: ${found.result.nullMean} and ${foundByScipy.bits}`);
    }
    sound &&= same;
  }
  peer?.end();
  return sound;
}

/** The whole test: windows, the observed storage, and batches of permutations until it is decided. */
async function testNeighbours(workers, series) {
  const start = performance.now();
  const windows = collectWindows(
    { values: series, timeSteps: series.length, places: 1 },
    { past: evenPast(HISTORY), future: 1, skip: 0, members: [0] },
  );
  const { local } = neighbourLocals(windows, settings);
  const observed = local.reduce((sum, bits) => sum + bits, 0) / local.length;
  const test = new SequentialTest(observed, { surrogates: SURROGATES, stopAfter: 10 });
  const wish = { kind: "permutation", windows, span: HISTORY, seed: 1, group: 0 };
  const batch = 10;
  let next = 0;
  await Promise.all(
    workers.map(async (worker) => {
      let task = { kind: "neighbours", wish, settings };
      while (!test.done && next < SURROGATES) {
        const first = next;
        next += batch;
        test.take(first, await ask(worker, { task, first, count: batch }));
        task = undefined;
      }
    }),
  );
  return { milliseconds: performance.now() - start, result: test.result() };
}

/** Uniform numbers 0 ≤ u < 1, seeded. */
function uniforms(seed) {
  let state = seed >>> 0;
  return () => {
    state = (Math.imul(1664525, state) + 1013904223) >>> 0;
    return state / 2 ** 32;
  };
}

/** Nodes that keep their state with a chance of their own, shape [time, node]. */
function chains(alphabet) {
  const uniform = uniforms(7);
  const states = new Uint8Array(NODES * STEPS);
  for (let at = 0; at < states.length; at++) {
    const keeps = at >= NODES && uniform() < (at % NODES) / (2 * NODES);
    states[at] = keeps ? states[at - NODES] : Math.floor(uniform() * alphabet);
  }
  return states;
}

/** x[n] = coefficient · x[n−1] + noise, the noise a sum of uniform draws. */
function autoregression(length, coefficient) {
  const uniform = uniforms(42);
  const series = new Float64Array(length);
  for (let n = 1; n < length; n++) {
    let noise = 0;
    for (let i = 0; i < 12; i++) noise += uniform() - 0.5;
    series[n] = coefficient * series[n - 1] + noise;
  }
  return series;
}
