/** A part of what is known of the next value, as sentences are made from it. */
export interface ToldPart {
  readonly bits: number;
  readonly corrected: number;
  /** Chance of so much where there is none; null where it was not tested. */
  readonly p: number | null;
}

/** What sentences about a place, or a lattice, and its neighbours are made from. */
export interface ToldParts {
  readonly storage: ToldPart;
  readonly kept: ToldPart;
  readonly joint: ToldPart;
  readonly transfers: readonly (ToldPart & { readonly neighbour: string })[];
  /** What the next value has to tell; undefined where that is differential. */
  readonly entropy?: number;
  readonly total: number;
}

/** The chance from which a part is called more than chance. */
const BEYOND = 0.05;
/** Bits below which a part is nothing that two decimals show. */
const SHOWN = 0.005;
const MOST_NAMED = 4;

/** What of storage remains when the neighbours are known, and what they add, in sentences. */
export function partsFindings(told: ToldParts): string[] {
  const { storage, kept, joint } = told;
  if (Number.isNaN(storage.bits)) return ["No window is whole for a cell and all its neighbours."];
  return [keptSentence(told), addedSentence(told), ...openSentence(told)].concat(
    shows(storage) && !shows(kept) && !shows(joint)
      ? [
          "Own past and neighbours tell the same here, so these data alone cannot tell whether states are kept in place or handed round.",
        ]
      : [],
  );
}

/** What these numbers are not. */
export const PARTS_CAUTION =
  "This is about prediction, not about mechanism: it says by whose past the next value can be told, not what made it. Places that swap their states and places that each turn over their own can give the same data, and then the same numbers.";

/** Whether a part is beyond its null, or, untested, beyond its bias, and large enough to be seen. */
export function shows({ corrected, p }: ToldPart): boolean {
  return corrected >= SHOWN && (p === null || Number.isNaN(p) || p <= BEYOND);
}

function keptSentence({ storage, kept }: ToldParts): string {
  if (!shows(storage) && !shows(kept)) {
    return "No storage shows, with the neighbours' pasts known or without.";
  }
  if (!shows(storage)) {
    return `The own past tells nothing alone, and ${bits(kept)} bit once the neighbours' pasts are known: only together do they tell.`;
  }
  if (!shows(kept)) {
    return `Of ${bits(storage)} bit of storage none remains when the neighbours' pasts are known: they tell all of it.`;
  }
  const more = kept.corrected - storage.corrected;
  const whole = `Of ${bits(storage)} bit of storage`;
  if (Math.abs(more) < SHOWN) {
    return `${whole} all remains when the neighbours' pasts are known: they tell none of it.`;
  }
  return more > 0
    ? `The own past tells ${bits(storage)} bit alone, and ${bits(kept)} bit once the neighbours' pasts are known: partly they tell only together.`
    : `${whole} ${bits(kept)} bit remains when the neighbours' pasts are known (${percent(kept.corrected / storage.corrected)}).`;
}

function addedSentence({ joint, transfers }: ToldParts): string {
  if (!shows(joint)) return "Beyond the own past the neighbours tell nothing more.";
  if (transfers.length === 1) {
    return `Beyond the own past the neighbour at ${transfers[0].neighbour} adds ${bits(joint)} bit (transfer entropy).`;
  }
  const order = [...transfers].sort((a, b) => b.corrected - a.corrected);
  const named = order
    .slice(0, MOST_NAMED)
    .map((part) => `${bits(part)} from ${part.neighbour}`)
    .join(", ");
  const more = order.length > MOST_NAMED ? `, and ${order.length - MOST_NAMED} more` : "";
  return `Beyond the own past the neighbours together add ${bits(joint)} bit; each alone (transfer entropy) ${named}${more}.`;
}

function openSentence({ entropy, total }: ToldParts): string[] {
  if (entropy === undefined || entropy < SHOWN) return [];
  const left = entropy - total;
  return [
    Math.abs(left) < 1e-9
      ? `Own past and neighbours together settle all ${entropy.toFixed(2)} bit of what comes next.`
      : `Own past and neighbours together leave ${left.toFixed(2)} of ${entropy.toFixed(2)} bit open.`,
  ];
}

/** Corrected bits to two decimals, and no minus before what rounds to zero. */
function bits({ corrected }: ToldPart): string {
  return corrected.toFixed(2).replace(/^-0\.00$/, "0.00");
}

function percent(share: number): string {
  return `${Math.max(0, 100 * share).toFixed(0)}%`;
}
