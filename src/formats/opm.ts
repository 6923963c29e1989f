import { type Covariance, covarianceKeywords, printCovariance, readCovariance } from "./covariance.ts";
import { type BlockRules, type Context, keywordsOf, type PrintedBlock, printFields, readFields } from "./fields.ts";
import {
  headerLayout,
  headerRules,
  type MessageLayout,
  printFlatMessage,
  printUserDefined,
  readFlatMessage,
  readUserDefined,
  spacecraftLayout,
  spacecraftRules,
  userDefinedLayout,
} from "./flatMessage.ts";
import {
  broken,
  type MessageEpoch,
  type MessageHeader,
  type MessageVersion,
  type ReadMessage,
  Remarks,
  type SpacecraftParameters,
  type UserDefined,
} from "./message.ts";

/**
 * Orbit parameter message: one state, in KVN or XML.
 * Source: CCSDS 502.0-B-3 section 3, tables 3-1 to 3-3; version 1.0 as in 502.0-B-1.
 */
export interface Opm {
  readonly version: MessageVersion;
  readonly header: MessageHeader;
  readonly metadata: OpmMetadata;
  readonly state: OpmState;
  /** Osculating elements at the epoch of the state. */
  readonly keplerian: OpmKeplerian | null;
  readonly spacecraft: SpacecraftParameters | null;
  readonly covariance: Covariance | null;
  readonly manoeuvres: readonly OpmManoeuvre[];
  readonly userDefined: UserDefined | null;
}

export interface OpmMetadata {
  readonly comments: readonly string[];
  readonly objectName: string;
  readonly objectId: string;
  readonly centerName: string;
  readonly refFrame: string;
  readonly refFrameEpoch: MessageEpoch | null;
  readonly timeSystem: string;
}

/** Position in km and velocity in km/s in the frame and about the centre that the metadata name. */
export interface OpmState {
  readonly comments: readonly string[];
  readonly epoch: MessageEpoch;
  readonly xKm: number;
  readonly yKm: number;
  readonly zKm: number;
  readonly xKmPerS: number;
  readonly yKmPerS: number;
  readonly zKmPerS: number;
}

/** Exactly one of the two anomalies is given. */
export interface OpmKeplerian {
  readonly comments: readonly string[];
  readonly semiMajorAxisKm: number;
  readonly eccentricity: number;
  readonly inclinationDeg: number;
  readonly ascendingNodeDeg: number;
  readonly pericentreArgumentDeg: number;
  readonly trueAnomalyDeg: number | null;
  readonly meanAnomalyDeg: number | null;
  readonly gmKm3PerS2: number;
}

export interface OpmManoeuvre {
  readonly comments: readonly string[];
  readonly ignition: MessageEpoch;
  /** 0: impulsive. */
  readonly durationS: number;
  readonly deltaMassKg: number;
  readonly refFrame: string;
  readonly dv1KmPerS: number;
  readonly dv2KmPerS: number;
  readonly dv3KmPerS: number;
}

const metadataRules: BlockRules<OpmMetadata> = {
  objectName: { keyword: "OBJECT_NAME", kind: "text", required: true },
  objectId: { keyword: "OBJECT_ID", kind: "text", required: true },
  centerName: { keyword: "CENTER_NAME", kind: "text", required: true },
  refFrame: { keyword: "REF_FRAME", kind: "text", required: true },
  refFrameEpoch: { keyword: "REF_FRAME_EPOCH", kind: "epoch", since: "2.0" },
  timeSystem: { keyword: "TIME_SYSTEM", kind: "text", required: true },
};

const stateRules: BlockRules<OpmState> = {
  epoch: { keyword: "EPOCH", kind: "epoch", required: true },
  xKm: { keyword: "X", kind: "number", unit: "km", required: true },
  yKm: { keyword: "Y", kind: "number", unit: "km", required: true },
  zKm: { keyword: "Z", kind: "number", unit: "km", required: true },
  xKmPerS: { keyword: "X_DOT", kind: "number", unit: "km/s", required: true },
  yKmPerS: { keyword: "Y_DOT", kind: "number", unit: "km/s", required: true },
  zKmPerS: { keyword: "Z_DOT", kind: "number", unit: "km/s", required: true },
};

const notNegative = [(value: number) => value >= 0, "a number of at least 0"] as const;

const keplerianRules: BlockRules<OpmKeplerian> = {
  semiMajorAxisKm: { keyword: "SEMI_MAJOR_AXIS", kind: "number", unit: "km", required: true },
  eccentricity: { keyword: "ECCENTRICITY", kind: "number", required: true, test: notNegative },
  inclinationDeg: { keyword: "INCLINATION", kind: "number", unit: "deg", required: true },
  ascendingNodeDeg: { keyword: "RA_OF_ASC_NODE", kind: "number", unit: "deg", required: true },
  pericentreArgumentDeg: { keyword: "ARG_OF_PERICENTER", kind: "number", unit: "deg", required: true },
  trueAnomalyDeg: { keyword: "TRUE_ANOMALY", kind: "number", unit: "deg" },
  meanAnomalyDeg: { keyword: "MEAN_ANOMALY", kind: "number", unit: "deg" },
  gmKm3PerS2: { keyword: "GM", kind: "number", unit: "km**3/s**2", required: true },
};

const manoeuvreRules: BlockRules<OpmManoeuvre> = {
  ignition: { keyword: "MAN_EPOCH_IGNITION", kind: "epoch", required: true },
  durationS: { keyword: "MAN_DURATION", kind: "number", unit: "s", required: true, test: notNegative },
  deltaMassKg: { keyword: "MAN_DELTA_MASS", kind: "number", unit: "kg", required: true },
  refFrame: { keyword: "MAN_REF_FRAME", kind: "text", required: true },
  dv1KmPerS: { keyword: "MAN_DV_1", kind: "number", unit: "km/s", required: true },
  dv2KmPerS: { keyword: "MAN_DV_2", kind: "number", unit: "km/s", required: true },
  dv3KmPerS: { keyword: "MAN_DV_3", kind: "number", unit: "km/s", required: true },
};

const layout: MessageLayout = {
  kind: "OPM",
  versions: ["1.0", "2.0", "3.0"],
  blocks: [
    headerLayout,
    { element: "metadata", keywords: keywordsOf(metadataRules), beforeData: true },
    { element: "stateVector", keywords: keywordsOf(stateRules) },
    { element: "keplerianElements", keywords: keywordsOf(keplerianRules) },
    spacecraftLayout,
    { element: "covarianceMatrix", keywords: covarianceKeywords },
    { element: "maneuverParameters", keywords: keywordsOf(manoeuvreRules), repeats: true },
    userDefinedLayout,
  ],
};

const noBlock = { where: "OPM", comments: [], entries: [] };

/**
 * Reads an OPM in KVN or XML (also as the only OPM of a combined message). A centre, frame or time system that cannot be
 * used here is no fault of the message: the record names it.
 * Errors: invalid-message, naming line and keyword, what was found and what would be right.
 */
export function parseOpm(text: string): ReadMessage<Opm> {
  const remarks = new Remarks();
  const { version, blocks } = readFlatMessage(text, layout, remarks);
  const metadataBlock = blocks.get("metadata")?.[0] ?? noBlock;
  const timeSystem = metadataBlock.entries.find(({ keyword }) => keyword === "TIME_SYSTEM")?.value ?? "";
  const context: Context = { version, timeSystem, remarks };
  const header = readFields(headerRules, blocks.get("header")?.[0] ?? noBlock, context);
  const metadata = readFields(metadataRules, metadataBlock, context);
  const state = readFields(stateRules, blocks.get("stateVector")?.[0] ?? noBlock, context);
  const keplerianBlock = blocks.get("keplerianElements")?.[0];
  const keplerian = keplerianBlock ? readFields(keplerianRules, keplerianBlock, context) : null;
  if (keplerian && (keplerian.trueAnomalyDeg === null) === (keplerian.meanAnomalyDeg === null)) {
    throw broken(keplerianBlock!.where, null, "one of TRUE_ANOMALY and MEAN_ANOMALY in the Keplerian elements");
  }
  const spacecraftBlock = blocks.get("spacecraftParameters")?.[0];
  const covarianceBlock = blocks.get("covarianceMatrix")?.[0];
  const userBlock = blocks.get("userDefinedParameters")?.[0];
  if (userBlock && version === "1.0") throw broken(userBlock.where, null, "no user-defined parameters in version 1.0");
  const manoeuvres = (blocks.get("maneuverParameters") ?? []).map((block) =>
    readFields(manoeuvreRules, block, context),
  );
  const spacecraft = spacecraftBlock ? readFields(spacecraftRules, spacecraftBlock, context) : null;
  if (manoeuvres.length > 0 && (spacecraft === null || spacecraft.massKg === null)) {
    remarks.add("There are manoeuvres but no MASS, which the standard then wants.");
  }
  const message: Opm = {
    version,
    header,
    metadata,
    state,
    keplerian,
    spacecraft,
    covariance: covarianceBlock ? readCovariance(covarianceBlock, metadata.refFrame, context) : null,
    manoeuvres,
    userDefined: readUserDefined(userBlock),
  };
  return { message, remarks: remarks.list };
}

/** The text of an OPM, in KVN or XML; parseOpm reads it back to an equal record. A block without any value is left out. */
export function writeOpm(opm: Opm, form: "kvn" | "xml" = "kvn"): string {
  const blocks: (PrintedBlock | null)[] = [
    printFields("header", headerRules, opm.header),
    printFields("metadata", metadataRules, opm.metadata),
    printFields("stateVector", stateRules, opm.state),
    opm.keplerian && printFields("keplerianElements", keplerianRules, opm.keplerian),
    opm.spacecraft && printFields("spacecraftParameters", spacecraftRules, opm.spacecraft),
    opm.covariance && printCovariance(opm.covariance),
    ...opm.manoeuvres.map((one) => printFields("maneuverParameters", manoeuvreRules, one)),
    opm.userDefined && printUserDefined(opm.userDefined),
  ];
  return printFlatMessage(
    "OPM",
    opm.version,
    blocks.filter((block) => block !== null),
    form,
  );
}
