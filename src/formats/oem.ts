import { printCovariance } from "./covariance.ts";
import { printFields } from "./fields.ts";
import { headerRules } from "./flatMessage.ts";
import { printLines } from "./keyValue.ts";
import { type ReadMessage, Remarks } from "./message.ts";
import { readOemLines } from "./oemLines.ts";
import { checkSegments, type Oem, type OemSegment, type OemState, oemMetadataRules } from "./oemRecord.ts";
import { oemFromXml } from "./oemXml.ts";
import { numberText } from "./values.ts";
import { blockElement, looksLikeXml, type PrintedElement, printXml } from "./xml.ts";

/**
 * Reads an OEM in KVN or XML (also as the only OEM of a combined message), versions 1.0, 2.0 and 3.0. A centre, frame or
 * time system that cannot be used here is no fault of the message: the record names it.
 * Errors: invalid-message, naming line and keyword, what was found and what would be right.
 * Source: CCSDS 502.0-B-3 section 5.
 */
export function parseOem(text: string): ReadMessage<Oem> {
  const remarks = new Remarks();
  const message = looksLikeXml(text) ? oemFromXml(text, remarks) : readOemLines(text, remarks);
  checkSegments(message, remarks);
  return { message, remarks: remarks.list };
}

/** The text of an OEM, in KVN or XML; parseOem reads it back to an equal record. */
export function writeOem(oem: Oem, form: "kvn" | "xml" = "kvn"): string {
  const header = printFields("header", headerRules, oem.header);
  if (form === "xml") {
    const body = { name: "body", content: oem.segments.map(segmentElement) };
    return printXml("OEM", oem.version, [blockElement(header), body]);
  }
  const lines = [`CCSDS_OEM_VERS = ${oem.version}`, ...printLines(header)];
  for (const segment of oem.segments) lines.push("", ...segmentLines(segment));
  return `${lines.join("\n")}\n`;
}

function segmentLines({ metadata, comments, states, covariances }: OemSegment): string[] {
  const lines = ["META_START", ...printLines(printFields("metadata", oemMetadataRules, metadata)), "META_STOP", ""];
  lines.push(...printLines({ element: "data", comments, entries: [] }));
  for (const state of states) lines.push([state.epoch.text, ...numbersOf(state).map(numberText)].join(" "));
  if (covariances.length === 0) return lines;
  lines.push("", "COVARIANCE_START");
  for (const { comments: own, epoch, frame, lowerTriangle } of covariances) {
    lines.push(
      ...printLines({
        element: "",
        comments: own,
        entries: [
          ["EPOCH", epoch.text],
          ["COV_REF_FRAME", frame],
        ],
      }),
    );
    for (let row = 0, at = 0; row < 6; row++, at += row) {
      lines.push(
        lowerTriangle
          .slice(at, at + row + 1)
          .map(numberText)
          .join(" "),
      );
    }
  }
  lines.push("COVARIANCE_STOP");
  return lines;
}

const numbersOf = ({ positionKm, velocityKmPerS, accelerationKmPerS2 }: OemState): number[] => [
  ...positionKm,
  ...velocityKmPerS,
  ...(accelerationKmPerS2 ?? []),
];

const names = ["X", "Y", "Z", "X_DOT", "Y_DOT", "Z_DOT", "X_DDOT", "Y_DDOT", "Z_DDOT"];

function segmentElement({ metadata, comments, states, covariances }: OemSegment): PrintedElement {
  const data: PrintedElement[] = comments.map((content) => ({ name: "COMMENT", content }));
  for (const state of states) {
    const numbers = numbersOf(state).map((value, i) => ({ name: names[i]!, content: numberText(value) }));
    data.push({ name: "stateVector", content: [{ name: "EPOCH", content: state.epoch.text }, ...numbers] });
  }
  for (const covariance of covariances) {
    const printed = printCovariance(covariance);
    data.push(blockElement({ ...printed, entries: [["EPOCH", covariance.epoch.text], ...printed.entries] }));
  }
  const head = blockElement(printFields("metadata", oemMetadataRules, metadata));
  return { name: "segment", content: [head, { name: "data", content: data }] };
}
