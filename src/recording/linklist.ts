import { countText } from "./counttext.js";
import type { Network, Positions } from "./network.js";

/** One way in which the nodes of a file are named: by their keys, or by an attribute such as `label`. */
export interface Naming {
  readonly by: string;
  /** One name a node. */
  readonly names: readonly string[];
}

/** Links as a file gives them, before its nodes are matched to places. */
export interface LinkList extends Omit<Network, "names"> {
  /** At least one; the keys come first. */
  readonly namings: readonly Naming[];
  readonly positions?: Positions;
}

/** A link as it is read. `both`: it holds in both directions. */
export interface RawLink {
  readonly source: number;
  readonly target: number;
  /** NaN where none was given. */
  readonly weight: number;
  readonly both: boolean;
}

/** What links were tidied away, or completed, a sentence each. */
export interface TidyLinks extends Omit<Network, "names"> {
  readonly notes: readonly string[];
}

/**
 * Links in the order of their first appearance, without those from a node to itself, those of weight 0
 * and repeats, of which the first is kept. Where links of one direction and of both stand side by
 * side, the latter become two. A link without a weight has weight 1.
 */
export function tidyLinks(links: readonly RawLink[]): TidyLinks {
  const own = links.filter((link) => link.source === link.target).length;
  const none = links.filter((link) => link.source !== link.target && link.weight === 0).length;
  const kept = links.filter((link) => link.source !== link.target && link.weight !== 0);
  const directed = kept.some((link) => !link.both);
  const oneWay = kept.flatMap((link) => (directed && link.both ? [link, turned(link)] : [link]));
  const seen = new Map<string, number>();
  const first: RawLink[] = [];
  let repeats = 0;
  let unlike = 0;
  for (const link of oneWay) {
    const ends = [link.source, link.target];
    const name = (directed ? ends : ends.sort((a, b) => a - b)).join();
    const before = seen.get(name);
    if (before === undefined) {
      seen.set(name, first.length);
      first.push(link);
      continue;
    }
    repeats++;
    if (weightOf(first[before]) !== weightOf(link)) unlike++;
  }
  const weighted = first.some((link) => !Number.isNaN(link.weight));
  const bare = weighted ? first.filter((link) => Number.isNaN(link.weight)).length : 0;
  const mixed = directed && kept.some((link) => link.both);
  return {
    sources: Uint32Array.from(first, (link) => link.source),
    targets: Uint32Array.from(first, (link) => link.target),
    weights: Float64Array.from(first, weightOf),
    directed,
    notes: [
      ...(mixed ? ["links without direction beside directed ones: taken as one each way"] : []),
      ...(own > 0 ? [`${counted(own, "link")} from a node to itself: left out`] : []),
      ...(none > 0 ? [`${counted(none, "link")} of weight 0: left out`] : []),
      ...(repeats > 0 ? [`${counted(repeats, "repeated link")}: the first is kept`] : []),
      ...(unlike > 0 ? [`${countText(unlike)} of them with another weight`] : []),
      ...(bare > 0 ? [`${counted(bare, "link")} without a weight: taken as 1`] : []),
    ],
  };
}

function weightOf({ weight }: RawLink): number {
  return Number.isNaN(weight) ? 1 : weight;
}

function turned(link: RawLink): RawLink {
  return { ...link, source: link.target, target: link.source };
}

function counted(count: number, thing: string): string {
  return `${countText(count)} ${thing}${count === 1 ? "" : "s"}`;
}
