import { errorFacts, errorLine, LatchmapError } from "../recording/errors.js";
import { jsonText } from "../run/jsontext.js";

/** Exit codes: all well; the data or settings are wrong; the call is wrong. */
export const EXIT = { well: 0, wrongData: 1, wrongCall: 2 } as const;

const COLUMNS = 80;

/** Prints a line on standard output. */
export function say(line = ""): void {
  process.stdout.write(`${line}\n`);
}

/** Prints a line on standard error: what accompanies the result without being part of it. */
export function remark(line: string): void {
  process.stderr.write(`${line}\n`);
}

/** Prints a value as JSON on standard output, alone. */
export function sayJson(value: unknown): void {
  process.stdout.write(jsonText(value));
}

/** Text broken at words into lines of up to `width` columns. */
export function brokenLines(text: string, width = COLUMNS): string[] {
  const lines: string[] = [];
  let line = "";
  for (const word of text.split(" ")) {
    if (line !== "" && line.length + 1 + word.length > width) {
      lines.push(line);
      line = word;
    } else {
      line = line === "" ? word : `${line} ${word}`;
    }
  }
  return [...lines, line];
}

/** Prints text broken at words so that no line is longer than 80 columns. */
export function sayWrapped(text: string): void {
  for (const line of brokenLines(text)) say(line);
}

/** Prints rows of label and text, the labels in one column; a repeated label may be left empty. */
export function sayRows(rows: readonly (readonly [label: string, text: string])[]): void {
  const width = Math.max(0, ...rows.map(([label]) => label.length)) + 2;
  for (const [label, text] of rows) {
    brokenLines(text, COLUMNS - width).forEach((line, i) => {
      say(`${(i === 0 ? label : "").padEnd(width)}${line}`);
    });
  }
}

/** Whether standard output is a terminal that shows colour, and whether its ground is light or dark. */
export function terminalColour(): "light" | "dark" | "none" {
  const refused = (process.env.NO_COLOR ?? "") !== "" || process.env.TERM === "dumb";
  if (process.stdout.isTTY !== true || refused || process.stdout.getColorDepth() < 24)
    return "none";
  // Terminals that say so write "foreground;background"; 7 and 15 are the light grounds.
  const ground = process.env.COLORFGBG?.split(";").at(-1);
  return ground === "7" || ground === "15" ? "light" : "dark";
}

/** Reports an error in one line (or as JSON facts) and gives the exit code that goes with it. */
export function reportError(error: unknown, json: boolean): number {
  if (!(error instanceof LatchmapError)) throw error;
  if (json) process.stderr.write(jsonText({ error: errorFacts(error) }));
  else remark(`latchmap: ${errorLine(error)}`);
  return error.code === "bad-call" ? EXIT.wrongCall : EXIT.wrongData;
}
