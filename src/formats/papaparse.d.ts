/**
 * The one part of papaparse that is used: its parser of text at hand. The declarations that are
 * published for it pull in the types of Node, which this room must not see.
 */
declare module "papaparse/papaparse.min.js" {
  interface ParserSettings {
    readonly delimiter: string;
    readonly newline: "\n" | "\r";
  }
  interface ParsedText {
    /** Whole records, each a list of cells. */
    readonly data: string[][];
    /** `row` is the index of the record in `data` that the error belongs to. */
    readonly errors: readonly {
      readonly code: "MissingQuotes" | "InvalidQuotes";
      readonly row: number;
    }[];
    /** `cursor` is where the first record that is not whole begins. */
    readonly meta: { readonly cursor: number };
  }
  class Parser {
    constructor(settings: ParserSettings);
    /** With `ignoreLastRow` a last record without its line end is left for the next call. */
    parse(text: string, baseIndex: number, ignoreLastRow: boolean): ParsedText;
  }
  const Papa: { readonly Parser: typeof Parser };
  export default Papa;
}
