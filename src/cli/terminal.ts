import { errorFacts, errorLine, LatchmapError } from "../recording/errors.js";
import { jsonText } from "../run/resultfolder.js";

/** Exit codes: all well; the data or settings are wrong; the call is wrong. */
export const EXIT = { well: 0, wrongData: 1, wrongCall: 2 } as const;

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

/** Text broken at words so that no line is longer than 80 columns; later lines are indented. */
export function wrapped(text: string, indent = "", width = 80): string {
  const lines: string[] = [];
  let line = "";
  for (const word of text.split(" ")) {
    const room = width - (lines.length === 0 ? 0 : indent.length);
    if (line !== "" && line.length + 1 + word.length > room) {
      lines.push(line);
      line = word;
    } else {
      line = line === "" ? word : `${line} ${word}`;
    }
  }
  lines.push(line);
  return lines.map((each, i) => (i === 0 ? each : indent + each)).join("\n");
}

/** Rows of label and text, the labels in one column. */
export function sayRows(rows: readonly (readonly [label: string, text: string])[]): void {
  const width = Math.max(...rows.map(([label]) => label.length)) + 2;
  for (const [label, text] of rows) {
    say(wrapped(`${label.padEnd(width)}${text}`.trimEnd(), " ".repeat(width)));
  }
}

/** Reports an error in one line (or as JSON facts) and gives the exit code that goes with it. */
export function reportError(error: unknown, json: boolean): number {
  if (!(error instanceof LatchmapError)) throw error;
  if (json) process.stderr.write(jsonText({ error: errorFacts(error) }));
  else remark(`latchmap: ${errorLine(error)}`);
  return error.code === "bad-call" ? EXIT.wrongCall : EXIT.wrongData;
}
