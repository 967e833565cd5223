import type { PlaceRow, Summary } from "../storage/summary.js";

const LITTLE = 0.05;
const MOST = 0.8;

/**
 * What a map says, in sentences made from its numbers and never more certain than they are.
 * Nothing here is a test: differences between places are named, not called significant.
 */
export function findings(summary: Summary, places: readonly PlaceRow[]): string[] {
  const sentences = [whole(summary), misled(summary)];
  if (summary.pool === "each" && places.length > 1) sentences.push(...spread(places));
  return sentences;
}

function whole(summary: Summary): string {
  const bits = summary.storage_bits.toFixed(2);
  if (summary.entropy_bits === 0) {
    return "Nothing ever changes here, so there is nothing to predict: storage is 0 bits.";
  }
  const share = summary.storage_bits / summary.entropy_bits;
  const past =
    summary.history === 1 ? "the last state alone" : `the last ${summary.history} states`;
  const sentence = `From ${past} of a place, ${bits} of the ${summary.entropy_bits.toFixed(2)} bits of what comes next can be read off (${percent(share)})`;
  if (summary.storage_bits_corrected <= 0) {
    return `${sentence}; the bias of counting explains all of it, so no memory shows at this length.`;
  }
  const bias = summary.storage_bits - summary.storage_bits_corrected;
  if (bias > 0.2 * summary.storage_bits) {
    return `${sentence}; about ${percent(bias / summary.storage_bits)} of that may be the bias of counting few samples.`;
  }
  if (share < LITTLE) return `${sentence}: hardly any memory shows at this length.`;
  return share > MOST ? `${sentence}: the past settles nearly everything.` : `${sentence}.`;
}

function misled(summary: Summary): string {
  if (summary.negative_fraction === 0) return "Nowhere did the past mislead.";
  return `At ${percent(summary.negative_fraction)} of all moments the past misled: what came was less likely after it than in general.`;
}

function spread(places: readonly PlaceRow[]): string[] {
  const known = places.filter((place) => place.samples > 0);
  const byStorage = [...known].sort((a, b) => b.storage_bits_corrected - a.storage_bits_corrected);
  const most = byStorage[0];
  const least = byStorage[byStorage.length - 1];
  if (most === undefined || least === undefined || most === least) return [];
  const named = (place: PlaceRow): string =>
    `${place.place} (${place.storage_bits_corrected.toFixed(2)} bit)`;
  const silent = known.filter((place) => place.storage_bits_corrected <= 0);
  const sentences = [
    `By the corrected storage, ${named(most)} draws most on its own past and ${named(least)} least.`,
  ];
  if (silent.length > 0) {
    const names = silent.slice(0, 4).map((place) => place.place);
    const more = silent.length > 4 ? ` and ${silent.length - 4} more` : "";
    sentences.push(`No memory shows beyond bias at ${names.join(", ")}${more}.`);
  }
  return sentences;
}

function percent(share: number): string {
  return `${(100 * share).toFixed(share < 0.1 ? 1 : 0)}%`;
}
