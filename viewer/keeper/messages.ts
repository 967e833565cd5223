import type { ErrorFacts } from "../../src/recording/errors.js";
import type { Cell, MadeMap, ShownMap } from "../map/shownmap.js";
import type { Ink } from "../picture/ink.js";
import type { Tiling } from "../picture/tiling.js";
import type { PlaneStretch } from "./stretch.js";

/** A rectangle of a field as a picture. */
export interface PictureWish {
  readonly map: number;
  readonly field: string;
  readonly stretch: PlaneStretch;
  readonly tiling: Tiling;
  readonly ink: Ink;
}

/** The numbers of one cell, by the names of their fields. */
export type CellNumbers = Readonly<Record<string, number>>;

/** What the page asks of the keeper. */
export type Question =
  | { readonly kind: "keep"; readonly made: MadeMap }
  /** Opens a result folder at an address that ends in a slash. */
  | { readonly kind: "open"; readonly base: string }
  | { readonly kind: "forget"; readonly map: number }
  | ({ readonly kind: "picture" } & PictureWish)
  | { readonly kind: "cell"; readonly map: number; readonly cell: Cell }
  /** Which cell of a stretch stands out most. */
  | {
      readonly kind: "strongest";
      readonly map: number;
      readonly field: string;
      readonly stretch: PlaneStretch;
    };

/** What the keeper answers, by what was asked. */
export type Reply =
  | { readonly kind: "map"; readonly map: ShownMap }
  | { readonly kind: "done" }
  | { readonly kind: "picture"; readonly words: Uint32Array<ArrayBuffer> }
  | { readonly kind: "cell"; readonly numbers: CellNumbers }
  | { readonly kind: "strongest"; readonly cell: Cell };

/** A question with the ticket that its answers will carry, or a question that is no longer of use. */
export type Ask =
  | { readonly ticket: number; readonly question: Question }
  | { readonly ticket: number; readonly drop: true };

/** An end to a question; before it, how far the work is. */
export type Told = { readonly ticket: number } & (
  | { readonly kind: "stage"; readonly name: string; readonly total: number }
  | { readonly kind: "advance"; readonly done: number }
  | { readonly kind: "replied"; readonly reply: Reply }
  | { readonly kind: "failed"; readonly facts: ErrorFacts }
);
