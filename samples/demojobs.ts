import { recordingInMemory } from "../src/recording/memory.js";
import type { Recording } from "../src/recording/recording.js";
import type { OpenRequest } from "../src/run/open.js";
import type { MapRequest } from "../src/run/request.js";
import { ormsleyTrueLevels } from "./ormsley.js";
import { gauges, plantedFaults } from "./ormsleyplan.js";

/** A job of the demo: a sample, how it is read and mapped, and which part of it the picture shows. */
export interface DemoJob {
  readonly sample: string;
  readonly title: string;
  readonly open: OpenRequest;
  readonly map: MapRequest;
  /** The first time step of the picture, how many of the places, and what there is to see. */
  readonly picture: { readonly start: number; readonly across: number; readonly caption: string };
  /** The file of the sample that holds the links between its places, where it has one. */
  readonly links?: string;
  /** The recording as it was before faults were planted, where some were. */
  readonly faultless?: () => Recording;
}

const stuck = plantedFaults.find((fault) => fault.kind === "stuck");

export const demoJobs: readonly DemoJob[] = [
  {
    sample: "rule110",
    title: "An automaton",
    open: { layout: "line", wrap: true },
    map: { history: 10 },
    picture: {
      start: 200,
      across: 80,
      caption: "The past misleads along slanting lines, where gliders pass.",
    },
  },
  {
    sample: "ormsley",
    title: "A network of sensors",
    open: {},
    map: { states: { kind: "quantile", bins: 4 }, history: 2 },
    links: "ormsley-links.csv",
    picture: {
      start: 1190,
      across: gauges.length,
      caption:
        stuck === undefined
          ? ""
          : `From step ${stuck.start} on ${stuck.gauge} is stuck; in four states that looks like calm water.`,
    },
    faultless: () =>
      recordingInMemory({
        values: ormsleyTrueLevels(),
        layout: { kind: "network", nodes: gauges.length },
        names: gauges.map((gauge) => gauge.name),
      }),
  },
];
