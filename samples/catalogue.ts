import { npyBytes } from "../src/formats/npywriter.js";
import { runElementary } from "./automaton.js";
import { B3S23, runLife } from "./life.js";
import { ormsleyCsv, ormsleyGaugesCsv, ormsleyLinksCsv } from "./ormsley.js";

/** A file of a sample. */
export interface SampleFile {
  readonly name: string;
  readonly bytes: Uint8Array<ArrayBuffer>;
}

/** A demo recording: its files (the recording first), and how to map it. */
export interface Sample {
  readonly name: string;
  readonly sentence: string;
  /** Makes the files; the same bytes every time. */
  files(): SampleFile[];
  /** The command that maps it, when its files lie in a folder. */
  command(folder: string): string;
}

/** All samples, by the order in which a new user would look at them. */
export const samples: readonly Sample[] = [
  {
    name: "rule110",
    sentence:
      "An elementary automaton, rule 110, 400 cells on a ring over 400 steps: a background that remembers, and gliders that mislead it.",
    files: () => [automatonFile("rule110.npy", 110, 5)],
    command: (folder) => mapping(folder, "rule110", "npy", "--layout line --wrap --history 10"),
  },
  {
    name: "ormsley",
    sentence:
      "Hourly levels of 16 gauges in the invented Ormsley valley, with gaps, links and a few faulty sensors.",
    files: () => [
      textFile("ormsley.csv", ormsleyCsv()),
      textFile("ormsley-links.csv", ormsleyLinksCsv()),
      textFile("ormsley-gauges.csv", ormsleyGaugesCsv()),
    ],
    command: (folder) => mapping(folder, "ormsley", "csv", "--states quantile:4 --history 2"),
  },
  {
    name: "rule54",
    sentence:
      "An elementary automaton, rule 54, 400 cells on a ring over 400 steps: gliders that meet and part.",
    files: () => [automatonFile("rule54.npy", 54, 3)],
    command: (folder) => mapping(folder, "rule54", "npy", "--layout line --wrap --history 10"),
  },
  {
    name: "life",
    sentence:
      "A life-like automaton, B3/S23, on a torus of 64 × 64 cells over 200 steps: still lives, blinkers and what passes between.",
    files: () => {
      const { states, timeSteps, rows, columns } = runLife(
        B3S23,
        { rows: 64, columns: 64 },
        200,
        0.35,
        7,
      );
      return [{ name: "life.npy", bytes: npyBytes(states, [timeSteps, rows, columns]) }];
    },
    command: (folder) => mapping(folder, "life", "npy", "--wrap --history 8"),
  },
];

function automatonFile(name: string, rule: number, seed: number): SampleFile {
  const { states, timeSteps, cells } = runElementary(rule, 400, 400, seed);
  return { name, bytes: npyBytes(states, [timeSteps, cells]) };
}

function textFile(name: string, text: string): SampleFile {
  return { name, bytes: new TextEncoder().encode(text) };
}

function mapping(folder: string, name: string, ending: string, settings: string): string {
  const within = (path: string): string => {
    const joined = folder === "." ? path : `${folder.replace(/\/+$/, "")}/${path}`;
    return /\s/.test(joined) ? `"${joined}"` : joined;
  };
  return `latchmap map ${within(`${name}.${ending}`)} ${settings} --out ${within(`${name}-map`)}`;
}
