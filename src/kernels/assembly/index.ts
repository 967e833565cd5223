/**
 * The hot loops on typed arrays in linear memory; arguments ending in nothing but a noun are byte
 * offsets. Each has a plain twin in the folder above, which says what it does.
 */
export { roll8, roll16, roll32 } from "./roll";
export { gather8, gather16, gather32 } from "./gather";
export { blank8, blank16, blank32 } from "./blank";
export { count, lookUp32, lookUp64 } from "./table";
export { tally } from "./tally";
export { build } from "./kdtree";
export { nearest } from "./nearest";
export { countSorted, countWithin } from "./within";
export { sort } from "./sort";
export { permuted } from "./tables";
export { classify32, classify64 } from "./classes";
export { findRuns } from "./runs";
export { joinRuns } from "./joins";
export { gatherRegions32, gatherRegions64 } from "./regions";
export { columns, neighbours, widen } from "./strongest";
export { lists, rearranged } from "./nearlists";
