import { mkdir, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { brokenLines, say, sayWrapped, terminalColour } from "../src/cli/terminal.js";
import { placesOf } from "../src/recording/recording.js";
import { findings } from "../src/report/findings.js";
import { textMap } from "../src/report/textmap.js";
import { openFile } from "../src/run/files.js";
import { mapRecording } from "../src/run/map.js";
import { mapInMemory } from "../src/run/memory.js";
import { type OpenRequest, openRecording } from "../src/run/open.js";
import { silentProgress } from "../src/run/progress.js";
import type { MapRequest } from "../src/run/request.js";
import { mapIntoFolder } from "../src/run/resultfolder.js";
import { type Sample, samples } from "./catalogue.js";

const FOLDER = "latchmap-demo";

/** A demo job: a sample, how it is read and mapped, and which part of it the picture shows. */
interface Job {
  readonly sample: string;
  readonly title: string;
  readonly open: OpenRequest;
  readonly map: MapRequest;
  /** Time steps of the picture, and how many of the places. */
  readonly picture: readonly [start: number, stop: number];
  readonly across: number;
}

const jobs: readonly Job[] = [
  {
    sample: "rule110",
    title: "An automaton",
    open: { layout: "line", wrap: true },
    map: { history: 10 },
    picture: [200, 224],
    across: 80,
  },
  {
    sample: "ormsley",
    title: "A network of sensors",
    open: {},
    map: { states: { kind: "quantile", bins: 4 }, history: 2 },
    picture: [1190, 1214],
    across: 16,
  },
];

await mkdir(FOLDER, { recursive: true });
for (const job of jobs) await run(job);
say("To look at them in the browser, on this machine only:");
say("  npm run build");
for (const job of jobs) say(`  npx latchmap view ${FOLDER}/${job.sample}-map`);

async function run(job: Job): Promise<void> {
  const sample = samples.find((each) => each.name === job.sample);
  if (sample === undefined) throw new Error(`no sample ${job.sample}`);
  const file = await write(sample);
  const source = await openFile(join(FOLDER, file));
  const { recording, notes } = await openRecording(source, job.open);
  const out = join(FOLDER, `${job.sample}-map`);
  const target = { out, force: true, notes, asked: { ...job.open, ...job.map } };
  const { summary, places } = await mapIntoFolder(
    recording,
    (sink, progress) => mapRecording(recording, job.map, sink, progress),
    target,
    silentProgress,
  );
  const { storage } = await mapInMemory(recording, job.map);
  await source.close();

  say(`── ${job.title}: ${job.sample} `.padEnd(80, "─"));
  say();
  sayWrapped(sample.sentence);
  say();
  for (const sentence of findings(summary, places)) bullet(sentence);
  for (const warning of summary.warnings) bullet(`Beware: ${warning}.`);
  say();
  const [start, stop] = job.picture;
  const part = cut(storage, placesOf(recording), job);
  say(`Steps ${start} to ${stop - 1} downwards, places 0 to ${job.across - 1} across:`);
  const style = { width: 80, height: 24, colour: terminalColour() };
  for (const line of textMap(part, job.across, style)) say(line);
  say();
  say(`Result folder: ${out}/`);
  say();
}

/** The part of a map that the picture shows, shape [time, place]. */
function cut(storage: Float32Array | Float64Array, places: number, job: Job): Float64Array {
  const [start, stop] = job.picture;
  return Float64Array.from({ length: (stop - start) * job.across }, (_, i) => {
    const step = start + Math.floor(i / job.across);
    return storage[step * places + (i % job.across)];
  });
}

async function write(sample: Sample): Promise<string> {
  const files = sample.files();
  for (const { name, bytes } of files) await writeFile(join(FOLDER, name), bytes);
  return files[0]?.name ?? "";
}

function bullet(sentence: string): void {
  brokenLines(sentence, 76).forEach((line, i) => {
    say(`${i === 0 ? "  • " : "    "}${line}`);
  });
}
