import type { ErrorFacts } from "../../src/recording/errors.js";
import type { OpenRequest } from "../../src/run/open.js";
import type { MapRequest } from "../../src/run/request.js";
import type { MadeMap } from "../map/shownmap.js";

/** What the page asks of the worker: to map a recording. */
export interface Job {
  /** The same number for the same bytes, so that the worker opens them once. */
  readonly source: number;
  readonly from: File | { readonly sample: string };
  readonly wish: OpenRequest;
  readonly request: MapRequest;
}

/** A job with the ticket that its answers will carry. */
export interface Ask {
  readonly ticket: number;
  readonly job: Job;
}

/** What the worker answers: any number of tidings, then one end. */
export type Answer = { readonly ticket: number } & (
  | { readonly kind: "stage"; readonly name: string; readonly total: number }
  | { readonly kind: "advance"; readonly done: number }
  | { readonly kind: "done"; readonly made: MadeMap }
  | { readonly kind: "failed"; readonly facts: ErrorFacts }
);
