import type { PlaceRow, Summary } from "../storage/summary.js";

/** Shares of the entropy, or bits where there is no entropy to share, below which little shows. */
const LITTLE = 0.05;
const MOST = 0.8;
/** Share of the storage from which its bias is worth saying. */
const MUCH_BIAS = 0.2;

/**
 * What a map of storage says, in sentences made from its numbers and never more certain than they
 * are. Nothing here is a test: differences between places are named, not called significant, and not
 * even named where they vanish in rounding.
 */
export function findings(summary: Summary, places: readonly PlaceRow[]): string[] {
  if (!(summary.samples > 0)) {
    return ["No past is whole together with what came next, so nothing can be said."];
  }
  const sentences = [whole(summary), misled(summary)];
  if (summary.pool === "each" && places.length > 1) sentences.push(...spread(summary, places));
  return sentences;
}

/** Only counted states have an entropy of which storage is a share; the others' is differential. */
function isCounted(summary: Summary): boolean {
  return summary.estimator === "plugin" || summary.estimator === "ordinal";
}

function whole(summary: Summary): string {
  const counted = isCounted(summary);
  const { storage_bits: storage, storage_bits_corrected: corrected } = summary;
  if (counted && summary.entropy_bits === 0) {
    return "Nothing ever changes here, so there is nothing to predict: storage is 0 bits.";
  }
  if (storage <= 0) {
    return `From ${pastOf(summary)}, the estimate of storage is ${bits(storage)} bit: no memory shows at this length.`;
  }
  const share = storage / summary.entropy_bits;
  const sentence = counted
    ? `From ${pastOf(summary)}, ${bits(storage)} of the ${bits(summary.entropy_bits)} bits of what comes next can be read off (${percent(share)})`
    : `From ${pastOf(summary)}, ${bits(storage)} bits of what comes next can be read off`;
  if (corrected <= 0) {
    return `${sentence}; the bias of the estimate explains all of it, so no memory shows at this length.`;
  }
  const bias = storage - corrected;
  if (bias > MUCH_BIAS * storage) {
    return `${sentence}; about ${percent(bias / storage)} of that may be the bias of few samples.`;
  }
  if ((counted ? share : storage) < LITTLE) {
    return `${sentence}: hardly any memory shows at this length.`;
  }
  return counted && share > MOST
    ? `${sentence}: the past settles nearly everything.`
    : `${sentence}.`;
}

/** The past in words: `the last 2 states of a place`, `the values of a place 2 and 4 steps back`. */
function pastOf(summary: Summary): string {
  const { history, delay } = summary;
  const thing = summary.states === "none" ? "value" : "state";
  const lags = summary.lags ?? Array.from({ length: history }, (_, i) => (i + 1) * delay);
  if (lags.every((lag, i) => lag === i + 1)) {
    return history === 1
      ? `the last ${thing} of a place alone`
      : `the last ${history} ${thing}s of a place`;
  }
  const last = lags[lags.length - 1];
  if (lags.length === 1) return `the ${thing} of a place ${last} steps back`;
  if (lags.length > 4) {
    return `${lags.length} ${thing}s of a place, ${lags[0]} to ${last} steps back`;
  }
  return `the ${thing}s of a place ${lags.slice(0, -1).join(", ")} and ${last} steps back`;
}

function misled(summary: Summary): string {
  if (summary.negative_fraction === 0) return "Nowhere did the past mislead.";
  return `At ${percent(summary.negative_fraction)} of all moments the past misled: what came was less likely after it than in general.`;
}

function spread(summary: Summary, places: readonly PlaceRow[]): string[] {
  const known = places.filter((place) => place.samples > 0);
  const byStorage = [...known].sort((a, b) => b.storage_bits_corrected - a.storage_bits_corrected);
  const none = known.filter((place) => place.storage_bits_corrected <= 0);
  const little = known.filter(
    (place) => place.storage_bits_corrected > 0 && shownAt(summary, place) < LITTLE,
  );
  return [
    ...ends(byStorage, none.length + little.length > 0),
    ...(little.length > 0 ? [`Hardly any memory shows at ${listed(little)}.`] : []),
    ...(none.length > 0 ? [`No memory shows beyond bias at ${listed(none)}.`] : []),
  ];
}

/** Corrected storage as a share of the entropy of a place, or in bits where there is none. */
function shownAt(summary: Summary, place: PlaceRow): number {
  const entropy = isCounted(summary) ? place.entropy_bits : 1;
  return place.storage_bits_corrected / entropy;
}

/** The places with most and least storage; the least only where no sentence of its own names it. */
function ends(byStorage: readonly PlaceRow[], leastIsTold: boolean): string[] {
  const most = byStorage[0];
  const least = byStorage[byStorage.length - 1];
  if (most === undefined || least === undefined || most === least) return [];
  const of = (place: PlaceRow): string => bits(place.storage_bits_corrected);
  if (of(most) === of(least)) {
    return [`All places store the same to two decimals, ${of(most)} bit.`];
  }
  const first = byStorage.filter((place) => of(place) === of(most));
  const draws = first.length === 1 ? "draws most on its own past" : "draw most on their own pasts";
  const low = leastIsTold ? "" : ` and ${withBits(least)} least`;
  return [`By the corrected storage, ${listed(first)} ${draws}${low}.`];
}

/** Up to four names with what they store, and how many more. */
function listed(places: readonly PlaceRow[]): string {
  const shown = places.slice(0, 4).map(withBits).join(", ");
  return places.length > 4 ? `${shown} and ${places.length - 4} more` : shown;
}

function withBits(place: PlaceRow): string {
  return `${place.place} (${bits(place.storage_bits_corrected)} bit)`;
}

/** Two decimals, and no minus before what rounds to zero. */
function bits(value: number): string {
  return value.toFixed(2).replace(/^-0\.00$/, "0.00");
}

/** A share in percent that says 0 or 100 only where it is exactly that. */
function percent(share: number): string {
  if (share > 0 && share < 0.001) return "less than 0.1%";
  if (share > 0.99 && share < 1) return "more than 99%";
  return `${(100 * share).toFixed(share > 0 && share < 0.1 ? 1 : 0)}%`;
}
