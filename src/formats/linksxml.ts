/// <reference path="./xmldom.d.ts" />
import { DOMParser, type Document, type Element } from "@xmldom/xmldom/lib/dom-parser.js";
import { LatchmapError, latchmapError } from "../recording/errors.js";

/**
 * Parses XML text.
 * @throws {LatchmapError} `damaged-file` with the row where it is not well formed, `unsafe-file` when
 * it declares entities of its own
 */
export function parseXml(file: string, text: string): Document {
  if (/<!ENTITY/i.test(text)) {
    throw latchmapError(
      "unsafe-file",
      "it declares entities of its own, which can blow up without end",
      "Save it without a <!DOCTYPE> part",
      { file },
    );
  }
  const parser = new DOMParser({
    locator: {},
    errorHandler: (level, message) => {
      if (level !== "warning") throw badXml(file, message);
    },
  });
  const document = parser.parseFromString(text, "application/xml");
  if (document?.documentElement != null) return document;
  throw badXml(file, "there is no element");
}

/** The elements of a name, as a list that stays as it is while the document changes. */
export function elementsOf(within: Document | Element, name: string): Element[] {
  return Array.from(within.getElementsByTagName(name));
}

/**
 * Reads a graph with a reader from outside, whose complaints become errors that name the file.
 * @throws {LatchmapError} `damaged-file`
 */
export function guardedRead<T>(file: string, format: string, read: () => T): T {
  try {
    return read();
  } catch (cause) {
    if (cause instanceof LatchmapError) throw cause;
    const message = cause instanceof Error ? cause.message : String(cause);
    throw latchmapError(
      "damaged-file",
      `it cannot be read as ${format} (${oneLine(message)})`,
      `Check how it was written, or give the links as CSV with the columns source,target`,
      { file },
    );
  }
}

function badXml(file: string, message: string): LatchmapError {
  const row = /line:(\d+)/.exec(message)?.[1];
  return latchmapError(
    "damaged-file",
    `it is not well-formed XML (${oneLine(message)})`,
    "Copy it again, or write it again with the program that it is from",
    { file, ...(row === undefined ? {} : { row: Number(row) }) },
  );
}

/** A message of a library on one line, without its own name in front and full stop behind. */
function oneLine(message: string): string {
  return message
    .replace(/@#\[.*$/s, "")
    .replace(/^\[xmldom \w+\]\s*/, "")
    .replace(/^(?:graphology-\w+\/parser|Graph\.[\w.]+): */, "")
    .replace(/\s+/g, " ")
    .trim()
    .replace(/\.$/, "");
}
