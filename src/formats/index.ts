export { type Covariance, type EpochCovariance, fullCovariance } from "./covariance.ts";
export type {
  MessageEpoch,
  MessageHeader,
  MessageVersion,
  ReadMessage,
  SpacecraftParameters,
  Triple,
  UserDefined,
} from "./message.ts";
export { messageInstant } from "./messageInstant.ts";
export { type MessageKind, messageKind } from "./messageKind.ts";
export { parseOem, writeOem } from "./oem.ts";
export type { Oem, OemMetadata, OemSegment, OemState } from "./oemRecord.ts";
export { ommFromJson, parseOmm, writeOmm } from "./omm.ts";
export type { Omm, OmmElements, OmmMetadata, OmmTleParameters } from "./ommRecord.ts";
export {
  type Opm,
  type OpmKeplerian,
  type OpmManoeuvre,
  type OpmMetadata,
  type OpmState,
  parseOpm,
  writeOpm,
} from "./opm.ts";
export { parseTle, type Tle, writeTle } from "./tle.ts";
export { type ElementNumber, lineChecksum } from "./tleColumns.ts";
export { type ElementSet, splitElementSets } from "./tleText.ts";
