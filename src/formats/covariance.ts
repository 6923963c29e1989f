import { type Block, type Context, type PrintedBlock, readQuantity } from "./fields.ts";
import { broken, type MessageEpoch } from "./message.ts";
import { epochExpected, numberText, readEpoch } from "./values.ts";

/**
 * Covariance of position (km) and velocity (km/s) at an epoch: 21 numbers, row by row from [1,1] to [6,6] of the lower
 * triangle, axes X, Y, Z, X_DOT, Y_DOT, Z_DOT of `frame`; units km2, km2/s, km2/s2.
 * Source: CCSDS 502.0-B-3 tables 3-3 and 4-3, sections 3.2.4.10, 4.2.4.5, 5.2.5.4.
 */
export interface Covariance {
  readonly comments: readonly string[];
  /** COV_REF_FRAME, or REF_FRAME of the metadata where the message gives none. */
  readonly frame: string;
  readonly lowerTriangle: readonly number[];
}

export interface EpochCovariance extends Covariance {
  readonly epoch: MessageEpoch;
}

const axes = ["X", "Y", "Z", "X_DOT", "Y_DOT", "Z_DOT"];

const elements = axes.flatMap((row, i) =>
  axes.slice(0, i + 1).map((column, j) => ({
    keyword: `C${row}_${column}`,
    unit: i < 3 ? "km**2" : j < 3 ? "km**2/s" : "km**2/s**2",
  })),
);

export const covarianceKeywords: readonly string[] = ["COV_REF_FRAME", ...elements.map(({ keyword }) => keyword)];

/**
 * Reads the block of 21 keywords. Errors: invalid-message when one is missing (none or all must be given), twice there, or
 * no number in its unit.
 */
export function readCovariance(block: Block, frameOfMetadata: string, context: Context): Covariance {
  if (context.version === "1.0") {
    throw broken(block.where, null, "no covariance in version 1.0: it came with 2.0");
  }
  const found = new Map(block.entries.map((entry) => [entry.keyword, entry]));
  const twice = block.entries.find((entry) => found.get(entry.keyword) !== entry);
  if (twice) throw broken(`${twice.where}, ${twice.keyword}`, twice.value, "this keyword once");
  const lowerTriangle = elements.map(({ keyword, unit }) => {
    const entry = found.get(keyword);
    if (entry === undefined)
      throw broken(block.where, null, `all 21 elements of the covariance or none; ${keyword} is missing`);
    return readQuantity(entry, { kind: "number", unit });
  });
  const frame = found.get("COV_REF_FRAME");
  if (frame?.value === "") throw broken(`${frame.where}, COV_REF_FRAME`, "", "the name of a frame, or no such line");
  return { comments: block.comments, frame: frame?.value ?? frameOfMetadata, lowerTriangle };
}

/** The same with the keyword EPOCH, as the XML form of an OEM has it. */
export function readEpochCovariance(block: Block, frameOfMetadata: string, context: Context): EpochCovariance {
  const epochs = block.entries.filter(({ keyword }) => keyword === "EPOCH");
  const first = epochs[0];
  if (first === undefined) throw broken(block.where, null, "the keyword EPOCH, which must be given");
  if (epochs.length > 1) throw broken(`${epochs[1]!.where}, EPOCH`, epochs[1]!.value, "this keyword once");
  if (readEpoch(first.value) === null) throw broken(`${first.where}, EPOCH`, first.value, epochExpected);
  const rest = { ...block, entries: block.entries.filter(({ keyword }) => keyword !== "EPOCH") };
  const epoch = { text: first.value, timeSystem: context.timeSystem };
  return { ...readCovariance(rest, frameOfMetadata, context), epoch };
}

export const printCovariance = (record: Covariance): PrintedBlock => ({
  element: "covarianceMatrix",
  comments: record.comments,
  entries: [
    ["COV_REF_FRAME", record.frame],
    ...elements.map(({ keyword }, i) => [keyword, numberText(record.lowerTriangle[i]!)] as const),
  ],
});

/** The whole symmetric matrix: six rows of six, from the 21 numbers of the lower triangle. */
export function fullCovariance(lowerTriangle: readonly number[]): number[][] {
  return axes.map((_, i) =>
    axes.map((_, j) => lowerTriangle[(Math.max(i, j) * (Math.max(i, j) + 1)) / 2 + Math.min(i, j)]!),
  );
}
