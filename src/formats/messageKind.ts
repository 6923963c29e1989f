import { commentOf, withoutMark } from "./keyValue.ts";
import { broken } from "./message.ts";
import { looksLikeJson } from "./ommJson.ts";
import { looksLikeXml, readXml } from "./xml.ts";

/** Which message a text is, and in which form. */
export interface MessageKind {
  readonly kind: "oem" | "opm" | "omm" | "tle";
  readonly form: "kvn" | "xml" | "json" | "lines";
}

const readable = ["oem", "opm", "omm"] as const;

/** Other messages of the same family, so that the refusal can say what they are. */
const others: Readonly<Record<string, string>> = {
  ocm: "an orbit comprehensive message (OCM)",
  aem: "an attitude ephemeris message (AEM)",
  apm: "an attitude parameter message (APM)",
  acm: "an attitude comprehensive message (ACM)",
  tdm: "a tracking data message (TDM)",
  cdm: "a conjunction data message (CDM)",
  rdm: "a re-entry data message (RDM)",
};

const expected = "an OEM, OPM or OMM (KVN or XML), an OMM in JSON, or two-line elements";

function kindOf(name: string, form: "kvn" | "xml", where: string): MessageKind {
  const kind = readable.find((one) => one === name);
  if (kind !== undefined) return { kind, form };
  const what = Object.hasOwn(others, name) ? others[name]! : `a message of the kind ${name.toUpperCase().slice(0, 20)}`;
  throw broken(where, name.toUpperCase(), `${expected}; this is ${what}, which is not read here`);
}

/**
 * Tells which message a text is, without reading it; null for a text that is none (for example the JSON of a trajectory).
 * Errors: invalid-message for a message of another kind, for a combined message that holds several readable ones or none,
 * and for XML that is not well formed.
 */
export function messageKind(text: string): MessageKind | null {
  const clean = withoutMark(text).trimStart();
  if (looksLikeXml(clean)) return kindOfXml(clean);
  if (looksLikeJson(clean)) return kindOfJson(clean);
  const lines = clean.split(/\r\n|\n\r|\r|\n/, 200).map((line) => line.trim());
  return kindOfLines(lines.filter((line) => line !== "" && !line.startsWith("#")));
}

function kindOfLines(lines: readonly string[]): MessageKind | null {
  // Comments before the version are a fault, which whoever reads the message names better than "no message".
  const first = lines.find((line) => commentOf(line) === null) ?? "";
  if (first.startsWith("CCSDS_")) {
    const name = first.slice(6, first.indexOf("_VERS"));
    if (first.includes("_VERS") && /^[A-Z]{2,8}$/.test(name)) return kindOf(name.toLowerCase(), "kvn", "line 1");
  }
  const pair = lines.findIndex((line) => line.startsWith("1 "));
  if ((pair === 0 || pair === 1) && lines[pair + 1]?.startsWith("2 ")) return { kind: "tle", form: "lines" };
  return null;
}

function kindOfXml(text: string): MessageKind {
  const root = readXml(text, "XML");
  if (root.name !== "ndm") return kindOf(root.name.toLowerCase(), "xml", `${root.where}, <${root.name}>`);
  const names = root.children.map(({ name }) => name).filter((name) => name !== "COMMENT" && name !== "MESSAGE_ID");
  const where = `${root.where}, <ndm>`;
  if (names.length === 1) return kindOf(names[0]!, "xml", where);
  throw broken(where, names.join(", "), `a combined message that holds one message; this holds ${names.length}`);
}

/** JSON is an OMM when it is an object, or an array that begins with one, with an epoch and a size of orbit. */
function kindOfJson(text: string): MessageKind | null {
  let value: unknown;
  try {
    value = JSON.parse(text);
  } catch {
    return null; // whoever reads it as JSON says what is wrong with it
  }
  const source: unknown = Array.isArray(value) ? value[0] : value;
  if (typeof source !== "object" || source === null) return null;
  const has = (key: string): boolean => Object.hasOwn(source, key);
  const isOmm = has("CCSDS_OMM_VERS") || (has("EPOCH") && (has("MEAN_MOTION") || has("SEMI_MAJOR_AXIS")));
  return isOmm ? { kind: "omm", form: "json" } : null;
}
