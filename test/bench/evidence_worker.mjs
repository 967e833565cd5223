// A worker thread of the evidence benchmark: prepares a test once and then draws surrogates of it.
import { parentPort } from "node:worker_threads";
import { permutedStorage } from "../../dist/src/evidence/permutedcounts.js";
import { surrogatesOf } from "../../dist/src/evidence/surrogates.js";
import { rearrangedNeighbours } from "../../dist/src/storage/rearrangedneighbours.js";

let draw;

const prepare = {
  counts: ({ totals, name }) => permutedStorage(totals, name),
  neighbours: ({ wish, settings }) => {
    const { order } = surrogatesOf(wish);
    const { storage } = rearrangedNeighbours(wish.windows, settings);
    return (first, count) =>
      Float64Array.from({ length: count }, (_, i) => storage(order(first + i)));
  },
};

parentPort.on("message", ({ task, first, count }) => {
  if (task !== undefined) draw = prepare[task.kind](task);
  parentPort.postMessage(draw(first, count));
});
