import type { EpochCovariance } from "./covariance.ts";
import { type Block, type Context, type Entry, keywordsOf, readFields } from "./fields.ts";
import { headerRules } from "./flatMessage.ts";
import {
  assignment,
  commentOf,
  type Line,
  messageLines,
  remarkOnOrder,
  splitVersion,
  unknownKeyword,
} from "./keyValue.ts";
import { broken, type MessageHeader, type MessageVersion, type Remarks, type Triple, versions } from "./message.ts";
import {
  checkMetadata,
  type Oem,
  type OemMetadata,
  type OemSegment,
  type OemState,
  oemMetadataRules,
  RisingEpochs,
} from "./oemRecord.ts";
import { epochExpected, readNumber } from "./values.ts";

/**
 * The lines of an OEM. A header of assignments; then for each segment META_START, assignments, META_STOP, ephemeris lines
 * and, if there are any, covariances between COVARIANCE_START and COVARIANCE_STOP.
 * Source: CCSDS 502.0-B-3 sections 5.2, 7.4.1.
 */

const headerKeywords = keywordsOf(headerRules);
const metadataKeywords = keywordsOf(oemMetadataRules);

/** Walks through the lines, one at a time, with the comments that stand before it. */
class Walk {
  private at = 0;
  private readonly lines: readonly Line[];
  readonly remarks: Remarks;
  readonly version: MessageVersion;

  constructor(text: string, remarks: Remarks) {
    const { version, rest } = splitVersion(messageLines(text, "OEM", remarks), "OEM", versions);
    this.lines = rest;
    this.remarks = remarks;
    this.version = version as MessageVersion;
  }

  /** Comments from here to the next line that is none. */
  comments(): string[] {
    const found: string[] = [];
    for (; this.at < this.lines.length; this.at++) {
      const comment = commentOf(this.lines[this.at]!.text);
      if (comment === null) break;
      found.push(comment);
    }
    return found;
  }

  peek(): Line | undefined {
    return this.lines[this.at];
  }

  next(expected: string): Line {
    const line = this.lines[this.at++];
    if (line === undefined) throw broken("OEM, end of the text", null, expected);
    return line;
  }

  /** Comments where the standard has none: kept, with a remark. */
  straying(into: string[]): void {
    const line = this.peek();
    const found = this.comments();
    if (found.length === 0 || line === undefined) return;
    into.push(...found);
    this.remarks.add(`OEM, line ${line.number}: a comment stands inside a block; it was moved to its head.`);
  }
}

const at = (line: Line): string => `OEM, line ${line.number}`;

/** Reads an OEM in KVN. Errors: invalid-message, naming the line. */
export function readOemLines(text: string, remarks: Remarks): Oem {
  const walk = new Walk(text, remarks);
  const header: Block = { where: "OEM, header", comments: walk.comments(), entries: [] };
  assignments(walk, header, headerKeywords, "META_START", "an OEM header");
  const segments: OemSegment[] = [];
  let moved: Entry | undefined;
  for (;;) {
    const { segment, messageId } = readSegment(walk);
    segments.push(segment);
    moved ??= messageId;
    if (walk.peek() === undefined) break;
    const line = walk.next("META_START");
    if (line.text !== "META_START") throw broken(at(line), line.text, "META_START of a further segment, or the end");
  }
  if (moved !== undefined && !header.entries.some(({ keyword }) => keyword === "MESSAGE_ID")) {
    header.entries.push(moved);
    remarks.add(`${moved.where}: MESSAGE_ID belongs into the header; it was taken as if it stood there.`);
  }
  return { version: walk.version, header: readHeader(header, walk), segments };
}

const readHeader = (block: Block, { version, remarks }: Walk): MessageHeader => {
  remarkOnOrder(block, headerKeywords, remarks);
  return readFields(headerRules, block, { version, timeSystem: "UTC", remarks });
};

/** Assignments up to a mark on a line by itself, which is consumed. */
function assignments(walk: Walk, block: Block, known: readonly string[], mark: string, of: string): void {
  for (;;) {
    walk.straying(block.comments);
    const line = walk.next(mark);
    if (line.text === mark) return;
    const entry = assignment(line, "OEM");
    if (!known.includes(entry.keyword)) throw unknownKeyword(entry, [...known, mark], of);
    block.entries.push(entry);
  }
}

function readSegment(walk: Walk): { segment: OemSegment; messageId: Entry | undefined } {
  const { version, remarks } = walk;
  const where = `OEM, metadata from line ${walk.peek()?.number ?? "(end of the text)"}`;
  const block: Block = { where, comments: walk.comments(), entries: [] };
  // Writers of version 3.0 put MESSAGE_ID here as well, although table 5-2 has it in the header.
  const known = version === "3.0" ? [...metadataKeywords, "MESSAGE_ID"] : metadataKeywords;
  assignments(walk, block, known, "META_STOP", "OEM metadata");
  const messageId = block.entries.find(({ keyword }) => keyword === "MESSAGE_ID");
  const own = { ...block, entries: block.entries.filter(({ keyword }) => keyword !== "MESSAGE_ID") };
  const timeSystem = own.entries.find(({ keyword }) => keyword === "TIME_SYSTEM")?.value ?? "";
  const context: Context = { version, timeSystem, remarks };
  remarkOnOrder(own, metadataKeywords, remarks);
  const metadata = readFields(oemMetadataRules, own, context);
  checkMetadata(metadata, version, own, remarks);
  const comments = walk.comments();
  const states = readStates(walk, comments, metadata, version);
  let covariances: EpochCovariance[] = [];
  if (walk.peek()?.text === "COVARIANCE_START") covariances = readCovariances(walk, metadata);
  walk.straying(comments);
  return { segment: { metadata, comments, states, covariances }, messageId };
}

function readStates(walk: Walk, comments: string[], { timeSystem }: OemMetadata, version: MessageVersion): OemState[] {
  const states: OemState[] = [];
  const rising = new RisingEpochs();
  let width = 0;
  for (;;) {
    if (states.length > 0) walk.straying(comments);
    const line = walk.peek();
    if (line === undefined || line.text === "COVARIANCE_START" || line.text === "META_START") break;
    const words = line.text.split(/[ \t]+/);
    if (line.text.includes("="))
      throw broken(at(line), line.text, "an ephemeris line: an epoch and six or nine numbers");
    if (words.length !== 7 && words.length !== 10) {
      throw broken(at(line), line.text, `an epoch and six or nine numbers; there are ${words.length} items`);
    }
    if (width === 0) width = words.length;
    if (words.length !== width) {
      throw broken(at(line), line.text, `as many numbers as in the lines before (${width - 1})`);
    }
    if (width === 10 && version === "1.0") throw broken(at(line), line.text, "no accelerations in version 1.0");
    rising.take(words[0]!, at(line), epochExpected);
    const numbers = words.slice(1).map((word) => {
      const value = readNumber(word);
      if (value === null) throw broken(at(line), word, "a number within the range of a double");
      return value;
    });
    states.push({
      epoch: { text: words[0]!, timeSystem },
      positionKm: numbers.slice(0, 3) as unknown as Triple,
      velocityKmPerS: numbers.slice(3, 6) as unknown as Triple,
      accelerationKmPerS2: width === 10 ? (numbers.slice(6) as unknown as Triple) : null,
    });
    walk.next("an ephemeris line");
  }
  const line = walk.peek();
  if (states.length === 0) {
    throw broken(
      line === undefined ? "OEM, end of the text" : at(line),
      line?.text ?? null,
      "ephemeris lines after META_STOP",
    );
  }
  return states;
}

function readCovariances(walk: Walk, { timeSystem, refFrame }: OemMetadata): EpochCovariance[] {
  const opening = walk.next("COVARIANCE_START");
  if (walk.version === "1.0") throw broken(at(opening), opening.text, "no covariance in version 1.0: it came with 2.0");
  const found: EpochCovariance[] = [];
  const rising = new RisingEpochs();
  for (;;) {
    const comments = walk.comments();
    const line = walk.next("COVARIANCE_STOP");
    if (line.text === "COVARIANCE_STOP") {
      if (found.length === 0) throw broken(at(line), line.text, "at least one covariance before it");
      if (comments.length === 0) return found;
      walk.remarks.add(`${at(line)}: a comment stands behind the last covariance; it was moved to its head.`);
      const last = found.pop()!;
      return [...found, { ...last, comments: [...last.comments, ...comments] }];
    }
    if (!line.text.startsWith("EPOCH")) throw broken(at(line), line.text, "EPOCH of a covariance, or COVARIANCE_STOP");
    const epoch = assignment(line, "OEM");
    if (epoch.keyword !== "EPOCH") throw unknownKeyword(epoch, ["EPOCH"], "a covariance");
    rising.take(epoch.value, `${at(line)}, EPOCH`, epochExpected);
    let frame = refFrame;
    walk.straying(comments);
    const after = walk.peek();
    if (after?.text.startsWith("COV_REF_FRAME")) {
      const entry = assignment(walk.next("COV_REF_FRAME"), "OEM");
      if (entry.keyword !== "COV_REF_FRAME" || entry.value === "") {
        throw broken(entry.where, after.text, "COV_REF_FRAME = the name of a frame");
      }
      frame = entry.value;
    }
    const lowerTriangle = readTriangle(walk, comments);
    found.push({ comments, epoch: { text: epoch.value, timeSystem }, frame, lowerTriangle });
  }
}

/** Six rows of one to six numbers. */
function readTriangle(walk: Walk, comments: string[]): number[] {
  const numbers: number[] = [];
  for (let row = 1; row <= 6; row++) {
    walk.straying(comments);
    const line = walk.next(`row ${row} of a covariance`);
    const words = line.text.split(/[ \t]+/);
    if (words.length !== row || line.text.includes("=")) {
      throw broken(at(line), line.text, `row ${row} of a covariance: ${row === 1 ? "one number" : `${row} numbers`}`);
    }
    for (const word of words) {
      const value = readNumber(word);
      if (value === null) throw broken(at(line), word, `a number in row ${row} of a covariance`);
      numbers.push(value);
    }
  }
  return numbers;
}
