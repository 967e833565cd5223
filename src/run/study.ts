import * as v from "valibot";
import { LineCounter, parseDocument } from "yaml";
import { type LatchmapError, latchmapError } from "../recording/errors.js";

/** Options of `latchmap map` by their names without the dashes, as in `history: 2`. */
export type NamedOptions = Readonly<Record<string, unknown>>;

/** A recording of a study: one file, or several that are runs of one system. */
export interface StudyRecording {
  readonly name: string;
  readonly files: readonly string[];
  readonly options: NamedOptions;
}

/** One way to map every recording of a study. */
export interface StudySettings {
  readonly name: string;
  readonly options: NamedOptions;
}

/** Recordings × settings: every recording is mapped in every way. */
export interface Study {
  readonly recordings: readonly StudyRecording[];
  readonly settings: readonly StudySettings[];
}

const options = v.record(v.string(), v.unknown());
const name = v.pipe(
  v.string(),
  v.regex(/^[^/\\.][^/\\]*$/, "a name becomes a folder: it holds no slash and begins with no dot"),
);
const recordingShape = v.union([
  v.string(),
  v.strictObject({
    name: v.optional(name),
    file: v.union([v.string(), v.pipe(v.array(v.string()), v.minLength(1))]),
    options: v.optional(options),
  }),
]);
const studyShape = v.strictObject({
  $schema: v.optional(v.string()),
  recordings: v.pipe(v.array(recordingShape), v.minLength(1)),
  settings: v.pipe(v.array(v.strictObject({ name, options: v.optional(options) })), v.minLength(1)),
});

/**
 * Reads a study from YAML or JSON (which is YAML too).
 * @throws {LatchmapError} `bad-setting` with the line, or the entry, that is wrong
 */
export function parseStudy(text: string, file: string): Study {
  const lines = new LineCounter();
  const document = parseDocument(text, { lineCounter: lines });
  const error = document.errors.at(0);
  if (error !== undefined) {
    const what = error.message.split(/ at line |\n/)[0] ?? "it cannot be read";
    throw latchmapError("bad-setting", `${what}`, "Write it as YAML or JSON", {
      file,
      row: lines.linePos(error.pos[0]).line,
    });
  }
  const checked = v.safeParse(studyShape, document.toJS());
  if (!checked.success) throw misshapen(checked.issues[0], file);
  const study: Study = {
    recordings: checked.output.recordings.map(recordingOf),
    settings: checked.output.settings.map(({ name, options = {} }) => ({ name, options })),
  };
  requireOwnNames(study.recordings, "recordings", file);
  requireOwnNames(study.settings, "settings", file);
  return study;
}

function recordingOf(written: v.InferOutput<typeof recordingShape>): StudyRecording {
  const whole = typeof written === "string" ? { file: written } : written;
  const files = typeof whole.file === "string" ? [whole.file] : whole.file;
  const { name = stemOf(files[0] ?? ""), options = {} } = whole;
  return { name, files, options };
}

/** `archive/wind.csv` → `wind`. */
function stemOf(file: string): string {
  const base = file.split(/[/\\]/).at(-1) ?? file;
  return base.replace(/(?<=.)\.[^.]*$/, "");
}

function requireOwnNames(
  named: readonly { readonly name: string }[],
  list: string,
  file: string,
): void {
  const seen = new Set<string>();
  for (const { name } of named) {
    if (seen.has(name)) {
      throw latchmapError(
        "bad-setting",
        `two of the ${list} are called "${name}", and would share a folder`,
        "Give each a name of its own",
        { file },
      );
    }
    seen.add(name);
  }
}

function misshapen(issue: v.BaseIssue<unknown>, file: string): LatchmapError {
  const entry = issue.path?.map(({ key }) => String(key)).join(".") ?? "";
  const missing = issue.received === "undefined";
  const unknown = issue.expected === "never";
  const what = missing
    ? "is missing"
    : unknown
      ? "is not known"
      : issue.kind === "validation"
        ? issue.message
        : `is ${issue.received}, not as expected`;
  return latchmapError(
    "bad-setting",
    entry === "" ? "it holds no study" : `${entry}: ${what}`,
    "It takes recordings (files, or name, file, options) and settings (name, options)",
    { file },
  );
}
