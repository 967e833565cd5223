// Runs the benchmarks: `npm run bench` for all, `npm run bench -- kernels` for one. Every ratio comes
// from one run, side by side; nothing is printed that was not measured.
import { endToEnd } from "./endtoend.mjs";
import { evidence } from "./evidence.mjs";
import { kernels } from "./kernels.mjs";
import { neighbours } from "./neighbours.mjs";
import { structures } from "./structures.mjs";

const benches = { kernels, endtoend: endToEnd, neighbours, structures, evidence };

const wanted = process.argv.slice(2);
const unknown = wanted.find((name) => !(name in benches));
if (unknown !== undefined) {
  console.error(
    `There is no benchmark "${unknown}". There are: ${Object.keys(benches).join(", ")}`,
  );
  process.exit(2);
}
let sound = true;
for (const [name, bench] of Object.entries(benches)) {
  if (wanted.length === 0 || wanted.includes(name)) sound = (await bench()) && sound;
}
process.exitCode = sound ? 0 : 1;
