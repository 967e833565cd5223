import { PARTS_CAUTION, partsFindings, type ToldPart } from "../report/partsfindings.js";
import type { Summary } from "../run/outcome.js";
import type { NeighbourFacts } from "../run/partsfacts.js";
import { say, sayRows, sayWrapped } from "./terminal.js";

/** Prints what the neighbours of a lattice's cells tell: the parts, in sentences, with what to beware of. */
export function sayParts(facts: NeighbourFacts, { estimator }: Summary): void {
  const told = ({ bits, bits_corrected: corrected, p }: NeighbourFacts["storage"]): ToldPart => ({
    bits,
    corrected,
    p,
  });
  say();
  const findings = partsFindings({
    storage: told(facts.storage),
    kept: told(facts.kept_storage),
    joint: told(facts.joint_transfer),
    transfers: facts.transfers.map((part) => ({ ...told(part), neighbour: part.neighbour })),
    ...(estimator === "plugin" ? { entropy: facts.entropy_bits } : {}),
    total: facts.total_bits,
  });
  for (const sentence of findings) sayWrapped(sentence);
  sayWrapped(PARTS_CAUTION);
  if (facts.warnings.length > 0) {
    say();
    sayRows(facts.warnings.map((warning) => ["beware", warning]));
  }
}
