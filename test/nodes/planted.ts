import { uniformFloat64 } from "pure-rand/distribution/uniformFloat64";
import { recordingInMemory } from "../../src/recording/memory.js";
import type { Recording } from "../../src/recording/recording.js";
import { namedStream } from "../../src/storage/streams.js";

/** Nodes of three kinds: without memory, with their own, and with memory only through a loop of two. */
export const PLANTED = {
  none: ["none 1", "none 2", "none 3"],
  own: ["own 1", "own 2", "own 3"],
  loop: ["loop 1a", "loop 1b", "loop 2a", "loop 2b"],
} as const;

/** Links of the planted network: the loops, and links that carry nothing. */
export const PLANTED_LINKS = `source,target
loop 1a,loop 1b
loop 1b,loop 1a
loop 2a,loop 2b
loop 2b,loop 2a
none 1,own 1
own 1,own 2
own 2,own 3
none 2,none 3
`;

const NAMES = [...PLANTED.none, ...PLANTED.own, ...PLANTED.loop];

/**
 * A network of two states a node. A node of its own memory keeps its state with the chance 0.9. A node
 * of a loop takes over the state that the other had, with the chance 0.95, and so has its own of two
 * steps ago back with the chance 0.95² + 0.05² = 0.905; of its state one step ago it knows nothing.
 */
export function plantedNetwork(steps: number, seed: number): Recording {
  const stream = namedStream(seed, 31);
  const uniform = (): number => uniformFloat64(stream);
  const values = new Uint8Array(steps * NAMES.length);
  const kept = (state: number, chance: number): number => (uniform() < chance ? state : 1 - state);
  let state: readonly number[] = NAMES.map(() => Math.round(uniform()));
  for (let step = 0; step < steps; step++) {
    const before = state;
    state = NAMES.map((name, node) => {
      if (name.startsWith("none")) return kept(0, 0.5);
      if (name.startsWith("own")) return kept(before[node], 0.9);
      return kept(before[name.endsWith("a") ? node + 1 : node - 1], 0.95);
    });
    values.set(state, step * NAMES.length);
  }
  return recordingInMemory({
    values,
    layout: { kind: "network", nodes: NAMES.length },
    names: NAMES,
  });
}
