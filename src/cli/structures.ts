import { type Command, Option } from "commander";
import { latchmapError } from "../recording/errors.js";
import { outNeighbours } from "../recording/network.js";
import { openFile } from "../run/files.js";
import { type OpenedResult, openResult } from "../run/openresult.js";
import { isSigned, LOCAL_STORAGE } from "../run/segment.js";
import type { StructuresWish } from "../run/structures.js";
import { structuresIntoFolder } from "../run/structuresfolder.js";
import { structuresSummary } from "../run/structuressummary.js";
import { BODY_SOURCES, type BodySource, type TracksWish } from "../run/trackfollower.js";
import { FAULT_WISH, type FaultWish } from "../structures/faultwish.js";
import { parseLevel } from "../structures/levels.js";
import { parseNeighbourhood } from "../structures/neighbourhood.js";
import { TRACK_WISH } from "../structures/tracks.js";
import { decimal, whole } from "./options.js";
import { terminalProgress } from "./progressbar.js";
import { sayStructures } from "./structurestext.js";
import { sayJson } from "./terminal.js";

interface StructuresCall {
  readonly of: string;
  readonly level?: string;
  readonly edge?: string;
  readonly neighbourhood?: string;
  readonly fewest?: number;
  readonly links?: string;
  readonly tracks: boolean;
  readonly bodies?: BodySource;
  readonly leastSteps: number;
  readonly near?: number;
  readonly reach?: number;
  readonly patience?: number;
  readonly faults: boolean;
  readonly faultBits: number;
  readonly silent: number;
  readonly stuck: number;
  readonly saturated: number;
  readonly shiftSteps: number;
  readonly shiftSpreads: number;
  readonly json?: boolean;
}

/** `latchmap structures`: the regions of a map, and the faults of sensors. */
export function addStructuresCommand(program: Command): void {
  program
    .command("structures")
    .summary("the catalogue of what stands out in a map")
    .description(
      "Finds what stands out in the map of a result folder: regions of cells, connected in space and time, where the past told or misled more than usual. Adds structures.csv, structures.json and the array structure to the folder; on lattices the tracks of bodies that move against the background, their kinds and where they meet (tracks.csv, kinds.csv, meetings.csv, reactions.csv); and on networks faults.csv: spells in which sensors are silent, stuck, saturated, off by a jump or drifting.",
    )
    .argument("<result>", "a result folder that latchmap map made")
    .option(
      "--level <rule>",
      "bits as in 1 or -1,0.8 (below, above; none for a side), quantile:Q or evidence",
    )
    .option("--edge <rule>", "weaker level of cells that hang together with such: bits, quantile:Q")
    .option(
      "--neighbourhood <which>",
      "faces, full, a box of places by steps as in 2x3, or offsets as in 0,1;1,-1;1,0",
    )
    .option("--fewest <n>", "the fewest cells of a structure", whole)
    .option("--of <map>", "the map to take apart, such as local_entropy_rate", LOCAL_STORAGE)
    .option("--links <file>", "links of a network: CSV with source,target, GraphML, GEXF, JSON")
    .option("--no-tracks", "follow no bodies")
    .addOption(new Option("--bodies <which>", "what bodies are made of").choices(BODY_SOURCES))
    .option("--least-steps <n>", "fewest steps of a track", whole, TRACK_WISH.leastSteps)
    .option("--near <n>", "most cells between the parts of a body", whole)
    .option("--reach <n>", "most cells that a body skips in a step", whole)
    .option("--patience <n>", "steps that a body may be out of sight", whole)
    .option("--no-faults", "look for no faults of sensors")
    .option("--fault-bits <b>", "least surprise of a fault", decimal, FAULT_WISH.leastBits)
    .option("--silent <n>", "fewest steps of a silent spell", whole, FAULT_WISH.silentSteps)
    .option("--stuck <n>", "fewest steps of a stuck spell", whole, FAULT_WISH.stuckSteps)
    .option("--saturated <n>", "fewest steps at a limit", whole, FAULT_WISH.saturatedSteps)
    .option("--shift-steps <n>", "fewest steps of a jump or drift", whole, FAULT_WISH.shiftSteps)
    .option(
      "--shift-spreads <s>",
      "least size of a jump or drift, in spreads of means over such steps",
      decimal,
      FAULT_WISH.shiftSpreads,
    )
    .option("--json", "print the result as JSON, alone")
    .addHelpText(
      "after",
      `
Examples:
  latchmap structures automaton-map
  latchmap structures wind-map --level -1,none --edge -0.3,none --json
  latchmap structures ormsley-map --links ormsley-links.csv`,
    )
    .action(async (path: string, options: StructuresCall) => {
      const result = await openResult(path);
      const { progress, clear } = terminalProgress();
      try {
        const wish = await structuresWish(options, result);
        const faultWish = options.faults ? faultWishOf(options) : undefined;
        const found = await structuresIntoFolder(result, wish, faultWish, progress);
        clear();
        if (options.json === true) sayJson(structuresSummary(result, found));
        else sayStructures(result, found);
      } finally {
        clear();
      }
    });
}

async function structuresWish(
  call: StructuresCall,
  { map, places }: OpenedResult,
): Promise<StructuresWish> {
  const { of, level, edge, neighbourhood, fewest, links } = call;
  const signed = isSigned(of);
  if (fewest !== undefined && fewest < 1) {
    throw latchmapError("bad-call", `a structure cannot have ${fewest} cells`, "Give 1 or more", {
      option: "--fewest",
    });
  }
  const names = places.map(({ place }) => place);
  return {
    of,
    ...(level === undefined ? {} : { level: parseLevel(level, signed, "--level") }),
    ...(edge === undefined ? {} : { edge: parseLevel(edge, signed, "--edge") }),
    ...(neighbourhood === undefined
      ? {}
      : { neighbourhood: parseNeighbourhood(neighbourhood, map.layout.kind) }),
    ...(fewest === undefined ? {} : { fewestCells: fewest }),
    tracks: call.tracks ? tracksWish(call) : false,
    ...(links === undefined ? {} : { links: await readNeighbours(links, names, map.layout.kind) }),
  };
}

function tracksWish({ bodies, leastSteps, near, reach, patience }: StructuresCall): TracksWish {
  if (leastSteps < 4) {
    throw latchmapError("bad-call", `${leastSteps} steps make no track`, "Give 4 or more", {
      option: "--least-steps",
    });
  }
  return {
    leastSteps,
    ...(bodies === undefined ? {} : { bodies }),
    ...(near === undefined ? {} : { near }),
    ...(reach === undefined ? {} : { reach }),
    ...(patience === undefined ? {} : { patience }),
  };
}

/** The places that links join, whichever way they lead. */
async function readNeighbours(
  path: string,
  names: readonly string[],
  layout: string,
): Promise<NonNullable<StructuresWish["links"]>> {
  if (layout !== "network") {
    throw latchmapError("bad-call", "the cells of a lattice need no links", "Leave it out", {
      option: "--links",
    });
  }
  const source = await openFile(path);
  try {
    const { readLinks } = await import("../formats/links.js");
    const { links } = await readLinks(source, { undirected: true });
    const { matchPlaces } = await import("../nodes/matchplaces.js");
    const { network, report } = matchPlaces(links, names);
    if (report.matched === 0) {
      throw latchmapError(
        "bad-setting",
        `none of its names is a place of the map, whose places are ${names.slice(0, 3).join(", ")} …`,
        "Name the nodes as the places are named in the result's places.csv",
        { file: source.name },
      );
    }
    return outNeighbours(network);
  } finally {
    await source.close();
  }
}

function faultWishOf(options: StructuresCall): FaultWish {
  const { faultBits, silent, stuck, saturated, shiftSteps, shiftSpreads } = options;
  const steps = { "--silent": silent, "--stuck": stuck, "--saturated": saturated };
  for (const [option, value] of Object.entries(steps)) requireAtLeast(2, option, value);
  requireAtLeast(8, "--shift-steps", shiftSteps);
  return {
    leastBits: faultBits,
    silentSteps: silent,
    stuckSteps: stuck,
    saturatedSteps: saturated,
    shiftSteps,
    shiftSpreads,
  };
}

function requireAtLeast(least: number, option: string, value: number): void {
  if (value >= least) return;
  throw latchmapError("bad-call", `${value} steps are too few`, `Give ${least} or more`, {
    option,
  });
}
