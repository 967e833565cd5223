/**
 * The parser of XML text, and the readers and the writer of graphs that work on what it makes. The
 * declarations that are published for them pull in the types of a browser, which this room must not
 * see.
 */
declare module "@xmldom/xmldom/lib/dom-parser.js" {
  /** An element of a document. */
  export interface Element {
    readonly tagName: string;
    readonly parentNode: Element | null;
    getAttribute(name: string): string;
    setAttribute(name: string, value: string): void;
    removeAttribute(name: string): void;
    cloneNode(deep: boolean): Element;
    appendChild(child: Element): void;
    insertBefore(child: Element, before: Element): void;
    removeChild(child: Element): void;
    getElementsByTagName(name: string): ArrayLike<Element>;
  }
  export interface Document {
    readonly documentElement: Element | null;
    getElementsByTagName(name: string): ArrayLike<Element>;
  }
  export class DOMParser {
    constructor(settings: {
      readonly locator: Record<string, unknown>;
      readonly errorHandler: (level: string, message: string) => void;
    });
    parseFromString(text: string, mimeType: string): Document | undefined;
  }
}

declare module "graphology-graphml/common/parser.js" {
  export default function createParser(
    parser: unknown,
    document: unknown,
  ): (
    graph: typeof import("graphology").default,
    source: import("@xmldom/xmldom/lib/dom-parser.js").Document,
  ) => import("graphology").default;
}

declare module "graphology-gexf/common/parser.js" {
  export default function createParser(
    parser: unknown,
    document: unknown,
  ): (
    graph: typeof import("graphology").default,
    source: import("@xmldom/xmldom/lib/dom-parser.js").Document,
    settings: { readonly allowUndeclaredAttributes: boolean },
  ) => import("graphology").default;
}

declare module "graphology-gexf/common/writer.js" {
  export default function write(
    graph: import("graphology").default,
    settings: { readonly version: "1.2" | "1.3" },
  ): string;
}
