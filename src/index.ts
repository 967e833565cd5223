/**
 * Latchmap as a library: from a recording to a storage map, the same numbers as the command line
 * and the viewer give. What is exported here is the public face; everything else may change.
 */

export { blockLength, stationaryResample } from "./evidence/bootstrap.js";
export { benjaminiHochberg, benjaminiYekutieli } from "./evidence/falsediscovery.js";
export {
  type Interval,
  type IntervalWish,
  type LocalSums,
  localSums,
  storageInterval,
} from "./evidence/interval.js";
export { NULL_KINDS, type NullKind, nullSentence } from "./evidence/nulls.js";
export { sequentialTest, type TestResult, type TestWish } from "./evidence/sequential.js";
export { type ByteSource, bytesInMemory } from "./formats/bytesource.js";
export { type LinksWish, readLinks } from "./formats/links.js";
export { npyBytes } from "./formats/npywriter.js";
export {
  type ErrorCode,
  type ErrorFacts,
  errorFacts,
  LatchmapError,
  type Where,
} from "./recording/errors.js";
export { type LatticeOffset, parseOffsets } from "./recording/latticeoffsets.js";
export type { Layout, LayoutKind } from "./recording/layout.js";
export { type RecordingParts, recordingInMemory } from "./recording/memory.js";
export type { Network, Positions } from "./recording/network.js";
export { type Pool, poolAll, poolEach, poolGroups } from "./recording/pools.js";
export type { Origin, Recording, Slab, Values } from "./recording/recording.js";
export type { TimeAxis } from "./recording/time.js";
export { type ApplySettings, applyModel } from "./run/applymodel.js";
export { type Check, checkRecording } from "./run/check.js";
export { type FileSource, openFile } from "./run/files.js";
export { mapRecording } from "./run/map.js";
export { type MapInMemory, mapInMemory } from "./run/memory.js";
export { measureNodes, type NodesGiven, type NodesOutcome, type NodesWish } from "./run/nodes.js";
export { type Opened, type OpenRequest, openRecording } from "./run/open.js";
export { type OpenedResult, openResult, type StoredPlaceRow } from "./run/openresult.js";
export type { MapOutcome, MapSink, PlaceRow, Summary } from "./run/outcome.js";
export type { LatticeParts } from "./run/partsplan.js";
export { type Progress, silentProgress } from "./run/progress.js";
export type { MapPlan, MapRequest } from "./run/request.js";
export { type MapJob, mapIntoFolder, type ResultTarget } from "./run/resultfolder.js";
export { modelText, parseModel, type SavedModel } from "./run/savedmodel.js";
export { VERSION } from "./run/version.js";
export type { Coding } from "./states/coding.js";
export { parseRule, type StateRule } from "./states/rule.js";
export type { Averages } from "./storage/averages.js";
export type { InformationParts, Part } from "./storage/informationparts.js";
export type { MapRows, Precision } from "./storage/maprows.js";
export { evenPast, type Past, pastOfLags } from "./storage/past.js";
export {
  BACKGROUND_LIMITS,
  type Background,
  type BackgroundLimits,
  findBackground,
} from "./structures/background.js";
export { type Bodies, BodyGatherer, type Closeness } from "./structures/bodies.js";
export { type Departures, departuresFrom } from "./structures/departures.js";
export type { Kind } from "./structures/kinds.js";
export type { Meeting, Reaction } from "./structures/meetings.js";
export { type RunList, runsOfMask } from "./structures/runlist.js";
export { type Lattice, latticeOf, type StateTable } from "./structures/statetable.js";
export { type TrackCatalogue, trackCatalogue } from "./structures/trackcatalogue.js";
export { TRACK_WISH, type Track, type TrackWish } from "./structures/tracks.js";
