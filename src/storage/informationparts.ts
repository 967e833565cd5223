/** One part of what is known of the next value, in bits. */
export interface Part {
  readonly bits: number;
  /** Less its bias, as the run corrects averages; may be negative. */
  readonly corrected: number;
  /**
   * Chance of so much where there is none, the conditioning kept; 0 < p ≤ 1, NaN where it was not
   * tested.
   */
  readonly p: number;
}

/**
 * What the own past and the pasts of other places, the sources, tell of the next value, all from the
 * windows that are whole for every one of them. By the chain rule
 * total = storage + joint transfer, and total = kept storage + what the sources tell alone.
 *
 * All of it is about prediction: a part says by whose past the next value can be told, not what made it.
 *
 * @see Lizier, Prokopenko & Zomaya 2010, Chaos 20:037109, storage and transfer as parts of the whole;
 *   Schreiber 2000, Phys. Rev. Lett. 85:461–464, transfer entropy
 */
export interface InformationParts {
  readonly samples: number;
  /** Distinct pasts seen, own and of all sources together; NaN for a Gaussian. */
  readonly pastStatesSeen: number;
  /** H(next); differential for a Gaussian. */
  readonly entropy: number;
  /** I(own past; next). */
  readonly storage: Part;
  /** I(own past; next | pasts of all sources): storage that remains when these are known. */
  readonly kept: Part;
  /** I(pasts of all sources; next | own past). */
  readonly joint: Part;
  /** I(past of one source; next | own past), one a source. */
  readonly transfers: readonly Part[];
  /** I(own past, pasts of all sources; next). */
  readonly total: number;
}

/** The local values of the parts, one a row; over the rows' windows their means are the parts. */
export interface LocalParts {
  readonly storage: Float64Array;
  readonly kept: Float64Array;
  readonly joint: Float64Array;
  readonly transfers: readonly Float64Array[];
}

/** Local values as a list: storage, kept, joint, and each transfer. */
export function localList({ storage, kept, joint, transfers }: LocalParts): Float64Array[] {
  return [storage, kept, joint, ...transfers];
}

/** Parts with their local values. */
export interface ScoredParts {
  readonly parts: InformationParts;
  readonly local: LocalParts;
}

/** The parts of a group without windows. */
export function noParts(sources: number): ScoredParts {
  const none: Part = { bits: Number.NaN, corrected: Number.NaN, p: Number.NaN };
  const nothing = new Float64Array();
  return {
    parts: {
      samples: 0,
      pastStatesSeen: Number.NaN,
      entropy: Number.NaN,
      storage: none,
      kept: none,
      joint: none,
      transfers: new Array<Part>(sources).fill(none),
      total: Number.NaN,
    },
    local: {
      storage: nothing,
      kept: nothing,
      joint: nothing,
      transfers: new Array<Float64Array>(sources).fill(nothing),
    },
  };
}
