import type { ComparedNodes } from "../report/nodefindings.js";
import { DIFFER_AT } from "./comparenodes.js";
import type { NodesOutcome } from "./nodes.js";

/** What sentences about an outcome are made from. */
export function comparedOf({ names, columns, comparison }: NodesOutcome): ComparedNodes {
  const column = (name: string): Float64Array =>
    columns.find((each) => each.name === name)?.values ?? new Float64Array(names.length);
  return {
    names,
    storage: column("storage_bits_corrected"),
    low: column("low"),
    high: column("high"),
    ranks: comparison.ranks,
    ...(comparison.pairs === undefined ? {} : { pairs: comparison.pairs }),
    ...(comparison.alike === undefined ? {} : { alike: comparison.alike }),
    differAt: DIFFER_AT,
  };
}
