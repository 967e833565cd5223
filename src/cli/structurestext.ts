import { describeLayout } from "../recording/layout.js";
import { placeName } from "../recording/recording.js";
import { FAULTS_CAUTION, faultText } from "../report/faulttext.js";
import { strongestLines, structureFindings } from "../report/structurefindings.js";
import { kindLines, kindsKey, reactionLines, trackFindings } from "../report/trackfindings.js";
import type { OpenedResult } from "../run/openresult.js";
import { isSigned } from "../run/segment.js";
import type { StructuresFound } from "../run/structures.js";
import type { TracksFound } from "../run/trackfollower.js";
import { TRACK_FILES } from "../run/tracksfolder.js";
import { say, sayRows, sayWrapped } from "./terminal.js";

const FAULTS_SHOWN = 10;

/** Prints what was found in a map: settings, counts, the strongest structures, a picture, the faults. */
export function sayStructures(result: OpenedResult, found: StructuresFound): void {
  const { map, folder } = result;
  const { list, settled } = found;
  sayRows([["map", `${found.of} of ${describeLayout(map.layout)}`]]);
  const chosen = [...found.chosen, ...(found.tracks?.chosen ?? [])];
  sayRows(chosen.map((choice, i) => [i === 0 ? "chosen" : "", choice]));
  say();
  const told = {
    of: map,
    list,
    found: found.found,
    levels: settled.cells,
    byEvidence: settled.byEvidence,
    signed: isSigned(found.of),
    cells: found.cells,
  };
  for (const sentence of structureFindings(told)) sayWrapped(sentence);
  if (list.length > 0) {
    say();
    for (const line of strongestLines(told)) say(line);
    say();
    sayPicture(result, found);
  }
  if (found.tracks !== undefined) {
    say();
    sayTracks(found.tracks);
  }
  if (found.faults.length > 0) {
    say();
    sayFaults(result, found);
  }
  say();
  const faults = map.layout.kind === "network" && found.looked ? ", faults.csv" : "";
  const tracks = found.tracks === undefined ? "" : `, ${TRACK_FILES.join(", ")}`;
  sayWrapped(
    `${folder}/ now holds structures.csv${tracks}${faults}, structures.json and map.zarr/structure.`,
  );
}

function sayTracks({ catalogue, background, explained }: TracksFound): void {
  for (const sentence of trackFindings(catalogue, background, explained)) sayWrapped(sentence);
  if (catalogue.tracks.length === 0) return;
  say();
  for (const line of kindLines(catalogue)) say(line);
  const key = kindsKey(catalogue);
  if (key !== undefined) sayWrapped(key);
  const reactions = reactionLines(catalogue);
  if (reactions.length === 0) return;
  say();
  say("times  what goes into a meeting, and what comes out");
  for (const line of reactions) say(line);
}

function sayPicture({ map }: OpenedResult, { picture }: StructuresFound): void {
  if (picture === undefined) return;
  const { firstStep, steps, firstRow, rows, firstColumn, columns } = picture.window;
  const { layout } = map;
  const where =
    layout.kind === "grid"
      ? `Step ${firstStep}, rows ${firstRow} to ${(firstRow + rows - 1) % layout.rows} downwards, columns ${firstColumn} to ${(firstColumn + columns - 1) % layout.columns} across`
      : `Steps ${firstStep} to ${firstStep + steps - 1} downwards, ${across(map, firstColumn, columns)} across`;
  sayWrapped(`${where}: where the strongest structure is strongest.`);
  for (const line of picture.lines) say(line);
}

function across(map: OpenedResult["map"], first: number, count: number): string {
  const { layout } = map;
  const last = layout.kind === "line" ? (first + count - 1) % layout.cells : first + count - 1;
  const thing = layout.kind === "line" ? "cells" : "places";
  return `${thing} ${placeName(map, first)} to ${placeName(map, last)}`;
}

function sayFaults({ map }: OpenedResult, { faults }: StructuresFound): void {
  say("Spells that look like faults of sensors:");
  for (const fault of faults.slice(0, FAULTS_SHOWN)) {
    const bits = (value: number): string => value.toFixed(2).replace("-", "−");
    const mapped = Number.isNaN(fault.storage)
      ? ""
      : `; the map has ${bits(fault.storage)} bit there and ${bits(fault.storageElse)} elsewhere`;
    sayRows([["  •", `${faultText(map, fault)} (${fault.surprise.toFixed(0)} bit)${mapped}`]]);
  }
  const more = faults.length - FAULTS_SHOWN;
  if (more > 0) say(`  and ${more} more in faults.csv`);
  sayWrapped(FAULTS_CAUTION);
}
