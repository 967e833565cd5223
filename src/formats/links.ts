import { latchmapError } from "../recording/errors.js";
import { tidyLinks } from "../recording/linklist.js";
import type { ByteSource } from "./bytesource.js";
import { linksOfCsv } from "./linkscsv.js";
import type { LinksRead } from "./linksgraph.js";

/** How a user wishes links to be read. */
export interface LinksWish {
  /** Whether the links hold both ways, whatever the file says. */
  readonly undirected?: boolean;
}

const LOOKED_AT = 4096;
const LONGEST_TEXT = 2 ** 28;

/**
 * Reads the links of a network: a CSV or TSV table with a row a link, GraphML, GEXF, or JSON (as
 * graphology serialises graphs, or in node-link form). The format is told from the content.
 *
 * @throws {LatchmapError} where the file holds no links, with row and column as far as they are known
 */
export async function readLinks(source: ByteSource, wish: LinksWish = {}): Promise<LinksRead> {
  const file = source.name;
  const start = new TextDecoder().decode(await source.read(0, Math.min(LOOKED_AT, source.size)));
  const format = formatOf(start);
  const read = await readAs(format, source);
  if (read.links.sources.length === 0) {
    throw latchmapError(
      "empty-file",
      "there is no link between two nodes",
      "Check how it was written",
      { file },
    );
  }
  const { links, notes } = wish.undirected === true ? withoutDirection(read) : read;
  return {
    file,
    links,
    notes: [
      `format: ${format}`,
      ...notes,
      links.directed ? "each link has a direction" : "each link holds both ways",
    ],
  };
}

function withoutDirection({ file, links, notes }: LinksRead): LinksRead {
  const raw = Array.from(links.sources, (source, i) => ({
    source,
    target: links.targets[i],
    weight: links.weights[i],
    both: true,
  }));
  const { notes: more, ...tidy } = tidyLinks(raw);
  return { file, links: { ...links, ...tidy }, notes: [...notes, ...more] };
}

type LinksFormat = "table" | "GraphML" | "GEXF" | "JSON" | "XML";

function formatOf(start: string): LinksFormat {
  const text = start.trimStart();
  if (text.startsWith("{") || text.startsWith("[")) return "JSON";
  if (!text.startsWith("<")) return "table";
  if (/<(?:\w+:)?graphml[\s>/]/i.test(text)) return "GraphML";
  return /<(?:\w+:)?gexf[\s>/]/i.test(text) ? "GEXF" : "XML";
}

async function readAs(format: LinksFormat, source: ByteSource): Promise<LinksRead> {
  const file = source.name;
  switch (format) {
    case "table":
      return linksOfCsv(source);
    case "JSON":
      return (await import("./linksjson.js")).linksOfJson(file, await wholeText(source));
    case "GraphML":
    case "GEXF": {
      const { parseXml } = await import("./linksxml.js");
      const document = parseXml(file, await wholeText(source));
      return format === "GraphML"
        ? (await import("./linksgraphml.js")).linksOfGraphml(file, document)
        : (await import("./linksgexf.js")).linksOfGexf(file, document);
    }
    case "XML":
      throw latchmapError(
        "unknown-format",
        "this XML is neither GraphML nor GEXF",
        "Give the links as CSV with the columns source,target, or as GraphML, GEXF or JSON",
        { file },
      );
  }
}

/** The text of a file, in UTF-8 or in the encoding that its XML declaration names. */
async function wholeText(source: ByteSource): Promise<string> {
  const file = source.name;
  if (source.size > LONGEST_TEXT) {
    throw latchmapError(
      "unsafe-file",
      "it is too large to be read whole",
      "Give the links as CSV with the columns source,target",
      { file },
    );
  }
  const bytes = await source.read(0, source.size);
  const declared = /^\s*<\?xml[^>]*encoding=["']([\w-]+)["']/.exec(
    new TextDecoder().decode(bytes.subarray(0, 200)),
  )?.[1];
  try {
    return new TextDecoder(declared ?? "utf-8", { fatal: true }).decode(bytes);
  } catch {
    throw latchmapError(
      "damaged-file",
      `it is not text in ${declared ?? "UTF-8"}`,
      "Save it as UTF-8",
      { file },
    );
  }
}
