import type { Network } from "../../src/recording/network.js";

/** A network from links such as `a>b`, each of weight 1 unless `a>b 0.5` says otherwise; `-` for both ways. */
export function networkFrom(nodes: string, ...links: readonly string[]): Network {
  const names = nodes.split(" ");
  const parts = links.map((link) => /^(\w+)([->])(\w+)(?: (\S+))?$/.exec(link) ?? []);
  return {
    names,
    sources: Uint32Array.from(parts, ([, source]) => names.indexOf(source)),
    targets: Uint32Array.from(parts, ([, , , target]) => names.indexOf(target)),
    weights: Float64Array.from(parts, ([, , , , weight]) => Number(weight ?? 1)),
    directed: parts.some(([, , arrow]) => arrow === ">"),
  };
}
