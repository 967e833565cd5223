// The two passes of the plug-in estimator in one thread, from states in memory: count; map to float32.
import { writeFileSync } from "node:fs";
import { join } from "node:path";
import { openWorkspace } from "../../dist/src/kernels/workspace.js";
import { poolAll } from "../../dist/src/recording/pools.js";
import { blockBits } from "../../dist/src/storage/blocktable.js";
import { evenPast } from "../../dist/src/storage/past.js";
import {
  eachTileOfIds,
  idArrays,
  prepareIdArraysInPlace,
  tableOfCounts,
} from "../../dist/src/storage/tableblocks.js";
import { companion, compiled, folder, here, pythonWith, spread } from "./peers.mjs";
import { CELLS, HISTORY, rule110, STEPS } from "./rule110.mjs";

const REPEATS = 15;
const MOST_OF_C = 2;
const LEAST_OF_NUMPY = 12;

export async function kernels() {
  console.log(
    `Counting and mapping: rule 110, ${CELLS} cells × ${STEPS} steps, history ${HISTORY}, pooled`,
  );
  const states = rule110();
  const file = join(folder, "states.bin");
  writeFileSync(file, states);
  const program = compiled("plain.c");
  const python = pythonWith("numpy", "python3-numpy");
  const peers = {
    "plain C, gcc -O3 -march=native": program && companion(program, [file]),
    "numpy: rolling code, bincount, take":
      python && companion(python, [here("numpy_map.py"), file]),
  };
  const ours = ourPasses(states);
  const results = new Map([["Latchmap, compiled kernels", []]]);
  for (let repeat = 0; repeat < REPEATS; repeat++) {
    results.get("Latchmap, compiled kernels").push(ours());
    for (const [name, peer] of Object.entries(peers)) {
      if (!peer) continue;
      if (!results.has(name)) results.set(name, []);
      results.get(name).push(await peer.ask());
    }
  }
  for (const peer of Object.values(peers)) peer?.end();
  return report(results);
}

/** A run of both passes, the copy of the states into the workspace included. */
function ourPasses(states) {
  const shape = { alphabet: 2, past: evenPast(HISTORY), pool: poolAll(CELLS) };
  const blocks = 2 ** (HISTORY + 1);
  const workspace = openWorkspace((room) => ({
    ...idArrays(room, shape, STEPS),
    counts: room.uint32(blocks + 1),
    table: room.float32(blocks + 1),
    out: room.float32(CELLS * STEPS),
  }));
  const { arrays, kernels: loops } = workspace;
  prepareIdArraysInPlace(arrays, shape, blocks);
  const slab = { steps: STEPS, lead: 0, mayHaveGaps: false };
  return () => {
    arrays.counts.fill(0);
    const start = performance.now();
    arrays.states.set(states);
    const count = (ids) => loops.countIds(ids, arrays.counts);
    eachTileOfIds(workspace, shape, slab, blocks, count, arrays.counts);
    const counted = performance.now();
    const { storage } = blockBits(tableOfCounts(Float64Array.from(arrays.counts), shape));
    arrays.table.set(storage);
    arrays.table[blocks] = Number.NaN;
    const tabled = performance.now();
    eachTileOfIds(workspace, shape, slab, blocks, (ids, from) =>
      loops.lookUpIds(
        ids,
        arrays.table,
        arrays.out.subarray(from * CELLS, from * CELLS + ids.length),
      ),
    );
    const mapped = performance.now();
    let sum = 0;
    for (let i = HISTORY * CELLS; i < arrays.out.length; i++) sum += arrays.out[i];
    return {
      count: counted - start,
      map: mapped - tabled,
      mean: sum / (CELLS * (STEPS - HISTORY)),
      check: checksum(arrays.counts.subarray(0, blocks)),
    };
  };
}

/** Σ count · (id + 1), modulo 2³². */
function checksum(counts) {
  let sum = 0;
  for (let id = 0; id < counts.length; id++) sum = (sum + Math.imul(counts[id], id + 1)) >>> 0;
  return sum;
}

function report(results) {
  const cells = CELLS * STEPS;
  console.log(
    `  ${"ns a cell, median (least) of ".concat(REPEATS).padEnd(36)}  count    map   both`,
  );
  const medians = new Map();
  let sound = true;
  const first = [...results.values()][0][0];
  for (const [name, runs] of results) {
    const both = spread(runs.map((run) => run.count + run.map));
    const column = (pick) => ((spread(runs.map(pick)).median * 1e6) / cells).toFixed(2).padStart(6);
    medians.set(name, both.median);
    console.log(
      `  ${name.padEnd(36)} ${column((run) => run.count)} ${column((run) => run.map)} ${column((run) => run.count + run.map)} (${((both.least * 1e6) / cells).toFixed(2)})`,
    );
    if (runs[0].check !== first.check || Math.abs(runs[0].mean - first.mean) > 1e-6) {
      console.log(`  ${name} gives another result: ${JSON.stringify(runs[0])}`);
      sound = false;
    }
  }
  const [ours, ...others] = [...medians];
  for (const [name, median] of others) {
    if (name.startsWith("plain C")) {
      console.log(`  ours / C = ${(ours[1] / median).toFixed(2)}, wanted at most ${MOST_OF_C}`);
    } else {
      console.log(
        `  numpy / ours = ${(median / ours[1]).toFixed(1)}, wanted at least ${LEAST_OF_NUMPY}`,
      );
    }
  }
  console.log();
  return sound;
}
