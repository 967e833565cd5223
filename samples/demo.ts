import { mkdir, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { brokenLines, reportError, say, sayWrapped, terminalColour } from "../src/cli/terminal.js";
import { readLinks } from "../src/formats/links.js";
import { LatchmapError, latchmapError } from "../src/recording/errors.js";
import { placeName, placesOf, type Recording } from "../src/recording/recording.js";
import { findings } from "../src/report/findings.js";
import { comparisonFindings, graphFindings } from "../src/report/nodefindings.js";
import { textMap } from "../src/report/textmap.js";
import { comparedOf } from "../src/run/comparednodes.js";
import { openFile, systemCode } from "../src/run/files.js";
import { mapRecording } from "../src/run/map.js";
import { mapInMemory } from "../src/run/memory.js";
import { measureNodes } from "../src/run/nodes.js";
import { nodesIntoFolder } from "../src/run/nodesfolder.js";
import { openRecording } from "../src/run/open.js";
import { openResult } from "../src/run/openresult.js";
import { silentProgress } from "../src/run/progress.js";
import { mapIntoFolder } from "../src/run/resultfolder.js";
import type { PlaceRow } from "../src/storage/summary.js";
import { type Sample, samples } from "./catalogue.js";
import { type DemoJob, demoJobs } from "./demojobs.js";

const FOLDER = "latchmap-demo";
const WIDTH = 80;
const HEIGHT = 24;

const ascii = process.argv.includes("--ascii");
const colour = ascii ? "none" : terminalColour();

// A reader such as head may have seen enough; what it closes is no fault.
process.stdout.on("error", (error) => {
  if (systemCode(error) === "EPIPE") process.exit(0);
  throw error;
});

try {
  await mkdir(FOLDER, { recursive: true });
  for (const job of demoJobs) await run(job);
  say("To look at them in the browser, on this machine only:");
  say("  npm run build");
  for (const job of demoJobs) say(`  npx latchmap view ${FOLDER}/${job.sample}-map`);
} catch (error) {
  process.exitCode = reportError(known(error), false);
}

async function run(job: DemoJob): Promise<void> {
  const sample = sampleOf(job);
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

  say(`${ascii ? "--" : "──"} ${job.title}: ${job.sample} `.padEnd(WIDTH, ascii ? "-" : "─"));
  say();
  sayWrapped(sample.sentence);
  say();
  for (const sentence of findings(summary, places)) bullet(sentence);
  for (const warning of summary.warnings) bullet(`Beware: ${warning}.`);
  for (const sentence of await withoutFaults(job, places)) bullet(sentence);
  for (const sentence of await comparedNodes(job, out)) bullet(sentence);
  say();
  sayPicture(job, recording, storage);
  say();
  say(`Result folder: ${out}/`);
  say();
}

/** What the planted faults do to the averages: the same map of the values as they were before them. */
async function withoutFaults(job: DemoJob, places: readonly PlaceRow[]): Promise<string[]> {
  if (job.faultless === undefined) return [];
  const before = await mapInMemory(job.faultless(), job.map);
  const changed = places.flatMap((place, i) => {
    const was = before.places[i].storage_bits_corrected;
    const now = place.storage_bits_corrected;
    return Math.abs(now - was) < 0.05
      ? []
      : [`${place.place} would store ${was.toFixed(2)} bit in place of ${now.toFixed(2)}`];
  });
  if (changed.length === 0) return [];
  return [
    `Faults can pass for memory: without those planted in this record, and without its gaps, ${changed.join(", ")}.`,
  ];
}

/** What a comparison of the places finds along their links: which are alike, and what the links explain. */
async function comparedNodes(job: DemoJob, out: string): Promise<string[]> {
  if (job.links === undefined) return [];
  const source = await openFile(join(FOLDER, job.links));
  const links = await readLinks(source);
  await source.close();
  const result = await openResult(out);
  const wish = { resamples: 1000, permutations: 9999, seed: 0, withReach: true };
  const outcome = await nodesIntoFolder(
    result,
    (progress) => measureNodes(result, { links }, wish, progress),
    { out: join(out, "nodes"), force: true, wish, notes: links.notes },
    silentProgress,
  );
  const explains = outcome.graph === undefined ? [] : graphFindings(outcome.graph.explains);
  return [...comparisonFindings(comparedOf(outcome)).slice(1, 3), ...explains.slice(0, 1)];
}

function sayPicture(
  job: DemoJob,
  recording: Recording,
  storage: Float32Array | Float64Array,
): void {
  const { start, across } = job.picture;
  const steps = colour === "none" ? HEIGHT : 2 * HEIGHT;
  const places = placesOf(recording);
  const part = Float64Array.from({ length: steps * across }, (_, i) => {
    const step = start + Math.floor(i / across);
    return storage[step * places + (i % across)];
  });
  const wide = Math.floor(WIDTH / across);
  const named = recording.names !== undefined && wide > 3;
  sayWrapped(
    `Steps ${start} to ${start + steps - 1} downwards, ${named ? `${across} places` : `places 0 to ${across - 1}`} across. ${job.picture.caption}`,
  );
  if (named) {
    const heads = Array.from({ length: across }, (_, place) =>
      placeName(recording, place)
        .slice(0, wide - 1)
        .padEnd(wide),
    );
    say(heads.join("").trimEnd());
  }
  for (const line of textMap(part, across, { width: WIDTH, height: HEIGHT, colour, ascii })) {
    say(line);
  }
}

function sampleOf(job: DemoJob): Sample {
  const sample = samples.find((each) => each.name === job.sample);
  if (sample !== undefined) return sample;
  throw latchmapError("bad-call", `there is no sample "${job.sample}"`, "Name one that there is");
}

async function write(sample: Sample): Promise<string> {
  const files = sample.files();
  for (const { name, bytes } of files) await writeFile(join(FOLDER, name), bytes);
  return files[0]?.name ?? "";
}

function bullet(sentence: string): void {
  brokenLines(sentence, WIDTH - 4).forEach((line, i) => {
    say(`${i === 0 ? `  ${ascii ? "*" : "•"} ` : "    "}${line}`);
  });
}

/** A refusal of the system to write becomes one that says what to do; anything else stays. */
function known(error: unknown): unknown {
  const code = systemCode(error);
  if (error instanceof LatchmapError || code === "") return error;
  return latchmapError(
    "cannot-write",
    `the demo cannot be written (${code})`,
    "Run it in a folder that you may write to, with some space left",
    { file: FOLDER },
  );
}
