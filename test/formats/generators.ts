import fc from "fast-check";
import type {
  Covariance,
  MessageEpoch,
  MessageHeader,
  Oem,
  OemSegment,
  Omm,
  Opm,
  SpacecraftParameters,
  Tle,
  UserDefined,
} from "../../src/formats/index.ts";
import { lineChecksum, parseTle } from "../../src/formats/index.ts";

/** Records as a parser may give them, for fast-check. */

const number = fc.double({ noNaN: true, noDefaultInfinity: true });
const perhaps = <T>(one: fc.Arbitrary<T>): fc.Arbitrary<T | null> => fc.option(one, { nil: null });

/** A value of text: something printable, without blanks at its ends. */
const text = fc
  .string({ minLength: 1, maxLength: 24, unit: "grapheme-ascii" })
  .map((one) => one.trim())
  .filter((one) => one !== "");
const comments = fc.array(
  fc.string({ maxLength: 30, unit: "grapheme-ascii" }).map((one) => one.trimEnd()),
  { maxLength: 3 },
);

/** Epochs by their second since 2020-01-01, with up to fifteen decimals. */
function epochText(second: number, decimals: string, ordinal: boolean, z: boolean): string {
  const iso = new Date(Date.UTC(2020, 0, 1) + second * 1000).toISOString();
  const day = Math.floor((Date.parse(iso.slice(0, 10)) - Date.parse(`${iso.slice(0, 4)}-01-01`)) / 86_400_000) + 1;
  const date = ordinal ? `${iso.slice(0, 5)}${String(day).padStart(3, "0")}` : iso.slice(0, 10);
  return `${date}${iso.slice(10, 19)}${decimals === "" ? "" : `.${decimals}`}${z ? "Z" : ""}`;
}

const decimals = fc.string({ maxLength: 15, unit: fc.constantFrom(..."0123456789") });
const epochAt = (second: number): fc.Arbitrary<string> =>
  fc.tuple(decimals, fc.boolean(), fc.boolean()).map(([d, o, z]) => epochText(second, d, o, z));
const epochString = fc.integer({ min: 0, max: 1e9 }).chain(epochAt);
const epoch = (timeSystem: string): fc.Arbitrary<MessageEpoch> => epochString.map((one) => ({ text: one, timeSystem }));

const timeSystem = fc.constantFrom("UTC", "TAI", "GPS", "UT1", "SCLK", "tt");

const header: fc.Arbitrary<MessageHeader> = fc.record({
  comments,
  classification: perhaps(text),
  creationDate: perhaps(epoch("UTC")),
  originator: perhaps(text),
  messageId: perhaps(text),
});

const covariance: fc.Arbitrary<Covariance> = fc.record({
  comments,
  frame: text,
  lowerTriangle: fc.array(number, { minLength: 21, maxLength: 21 }),
});

const anyValue = (record: object): boolean =>
  Object.entries(record).some(([field, value]) => field !== "comments" && value !== null);

const spacecraft: fc.Arbitrary<SpacecraftParameters> = fc
  .record({
    comments,
    massKg: perhaps(number),
    solarRadiationAreaM2: perhaps(number),
    solarRadiationCoefficient: perhaps(number),
    dragAreaM2: perhaps(number),
    dragCoefficient: perhaps(number),
  })
  .filter(anyValue);

const userDefined: fc.Arbitrary<UserDefined> = fc.record({
  comments,
  parameters: fc
    .uniqueArray(fc.stringMatching(/^[A-Z][A-Z0-9_]{0,9}$/), { minLength: 1, maxLength: 4 })
    .chain((names) =>
      fc.tuple(...names.map((name) => fc.oneof(text, fc.constant("")).map((value) => ({ name, value })))),
    ),
});

const objectMetadata = { comments, objectName: text, objectId: text, centerName: text, refFrame: text };

export const opms: fc.Arbitrary<Opm> = timeSystem.chain((system) =>
  fc.record<Opm>({
    version: fc.constant("3.0"),
    header,
    metadata: fc.record({
      ...objectMetadata,
      refFrameEpoch: perhaps(epoch(system)),
      timeSystem: fc.constant(system),
    }),
    state: fc.record({
      comments,
      epoch: epoch(system),
      xKm: number,
      yKm: number,
      zKm: number,
      xKmPerS: number,
      yKmPerS: number,
      zKmPerS: number,
    }),
    keplerian: perhaps(
      fc
        .record({
          comments,
          semiMajorAxisKm: number,
          eccentricity: number.map(Math.abs),
          inclinationDeg: number,
          ascendingNodeDeg: number,
          pericentreArgumentDeg: number,
          anomaly: number,
          isTrue: fc.boolean(),
          gmKm3PerS2: number,
        })
        .map(({ anomaly, isTrue, ...rest }) => ({
          ...rest,
          trueAnomalyDeg: isTrue ? anomaly : null,
          meanAnomalyDeg: isTrue ? null : anomaly,
        })),
    ),
    spacecraft: perhaps(spacecraft),
    covariance: perhaps(covariance),
    manoeuvres: fc.array(
      fc.record({
        comments,
        ignition: epoch(system),
        durationS: number.map(Math.abs),
        deltaMassKg: number,
        refFrame: text,
        dv1KmPerS: number,
        dv2KmPerS: number,
        dv3KmPerS: number,
      }),
      { maxLength: 3 },
    ),
    userDefined: perhaps(userDefined),
  }),
);

const whole = fc.integer({ min: 0, max: 999_999_999 });

export const omms: fc.Arbitrary<Omm> = timeSystem.chain((system) =>
  fc.record<Omm>({
    version: fc.constantFrom("3.0"),
    header,
    metadata: fc.record({
      ...objectMetadata,
      refFrameEpoch: perhaps(epoch(system)),
      timeSystem: fc.constant(system),
      meanElementTheory: fc.constantFrom("DSST", "USM", "KITE"),
    }),
    elements: fc
      .record({
        comments,
        epoch: epoch(system),
        size: number.map(Math.abs).filter((one) => one > 0),
        isMotion: fc.boolean(),
        eccentricity: fc.double({ min: 0, max: 1, maxExcluded: true, noNaN: true }),
        inclinationDeg: fc.double({ min: 0, max: 180, noNaN: true }),
        ascendingNodeDeg: number,
        pericentreArgumentDeg: number,
        meanAnomalyDeg: number,
        gmKm3PerS2: perhaps(number.map(Math.abs).filter((one) => one > 0)),
      })
      .map(({ size, isMotion, ...rest }) => ({
        ...rest,
        semiMajorAxisKm: isMotion ? null : size,
        meanMotionRevPerDay: isMotion ? size : null,
      })),
    spacecraft: perhaps(spacecraft),
    tle: perhaps(
      fc
        .record({
          comments,
          ephemerisType: perhaps(whole),
          classificationType: perhaps(fc.constantFrom("U", "C", "S")),
          catalogueNumber: perhaps(whole),
          elementSetNumber: perhaps(whole),
          revolutionAtEpoch: perhaps(whole),
          bstarPerEarthRadius: perhaps(number),
          btermM2PerKg: fc.constant(null),
          meanMotionDotRevPerDay2: perhaps(number),
          meanMotionDdotRevPerDay3: fc.constant(null),
          agomM2PerKg: perhaps(number),
        })
        .filter(anyValue),
    ),
    covariance: perhaps(covariance),
    userDefined: perhaps(userDefined),
  }),
);

/** A segment that begins at a second and lasts below a hundred thousand. */
function segment(system: string, objectId: string, begin: number): fc.Arbitrary<OemSegment> {
  const rising = fc
    .uniqueArray(fc.integer({ min: begin, max: begin + 90_000 }), { minLength: 1, maxLength: 6 })
    .map((seconds) => [...seconds].sort((a, b) => a - b));
  const epochs = rising.chain((seconds) => fc.tuple(...seconds.map(epochAt)));
  const at = (second: number) => epochAt(second).map((one) => ({ text: one, timeSystem: system }));
  const triple = fc.tuple(number, number, number);
  return fc
    .record({
      useable: fc.boolean(),
      degree: perhaps(fc.integer({ min: 1, max: 20 })),
      refFrameEpoch: perhaps(epoch(system)),
      start: at(begin),
      useableStart: at(begin + 1),
      useableStop: at(begin + 99_998),
      stop: at(begin + 99_999),
      names: fc.record({ ...objectMetadata, interpolation: text }),
      comments,
      accelerated: fc.boolean(),
      states: epochs.chain((list) =>
        fc.tuple(...list.map((one) => fc.tuple(fc.constant(one), triple, triple, triple))),
      ),
      covariances: fc
        .oneof(fc.constant([]), epochs)
        .chain((list) =>
          fc.tuple(
            ...(list as string[]).map((one) =>
              covariance.map((rest) => ({ ...rest, epoch: { text: one, timeSystem: system } })),
            ),
          ),
        ),
    })
    .map((r) => ({
      metadata: {
        ...r.names,
        objectId,
        refFrameEpoch: r.refFrameEpoch,
        timeSystem: system,
        startTime: r.start,
        useableStartTime: r.useable ? r.useableStart : null,
        useableStopTime: r.useable ? r.useableStop : null,
        stopTime: r.stop,
        interpolation: r.degree === null ? null : r.names.interpolation,
        interpolationDegree: r.degree,
      },
      comments: r.comments,
      states: r.states.map(([one, position, velocity, acceleration]) => ({
        epoch: { text: one, timeSystem: system },
        positionKm: position,
        velocityKmPerS: velocity,
        accelerationKmPerS2: r.accelerated ? acceleration : null,
      })),
      covariances: r.covariances,
    }));
}

export const oems: fc.Arbitrary<Oem> = fc
  .tuple(timeSystem, text, fc.integer({ min: 1, max: 3 }))
  .chain(([system, objectId, count]) =>
    fc.record<Oem>({
      version: fc.constant("3.0"),
      header,
      segments: fc.tuple(...Array.from({ length: count }, (_, i) => segment(system, objectId, i * 100_000))),
    }),
  );

const digits = (count: number): fc.Arbitrary<string> =>
  fc.string({ minLength: count, maxLength: count, unit: fc.constantFrom(..."0123456789") });
const angle = (most: number): fc.Arbitrary<string> =>
  fc.integer({ min: 0, max: most * 10_000 }).map((n) => (n / 10_000).toFixed(4).padStart(8));
const exponential = fc
  .tuple(fc.constantFrom(" ", "-", "+"), digits(5), fc.constantFrom("+", "-", " "), digits(1))
  .map((parts) => parts.join(""));

/** Two lines, column by column, with their checksums. */
export const elementLines: fc.Arbitrary<{ line1: string; line2: string }> = fc
  .record({
    catalogue: fc.oneof(
      fc
        .integer({ min: 0, max: 99_999 })
        .chain((n) => fc.constantFrom(String(n).padStart(5), String(n).padStart(5, "0"))),
      fc.tuple(fc.constantFrom(..."ABCDEFGHJKLMNPQRSTUVWXYZ"), digits(4)).map((parts) => parts.join("")),
    ),
    classification: fc.constantFrom("U", "C", "S", " "),
    designator: fc.constantFrom("98067A  ", "33999ZZZ", "        "),
    epoch: fc
      .tuple(digits(2), fc.integer({ min: 1, max: 365 }), digits(8))
      .map(([year, day, rest]) => `${year}${String(day).padStart(3, "0")}.${rest}`),
    dot: fc.tuple(fc.constantFrom(" ", "-"), digits(8)).map(([sign, rest]) => `${sign}.${rest}`),
    ddot: exponential,
    bstar: exponential,
    type: fc.constantFrom("0", " ", "2"),
    set: fc.integer({ min: 0, max: 9999 }).map((n) => String(n).padStart(4)),
    inclination: angle(180),
    node: angle(360),
    eccentricity: digits(7),
    pericentre: angle(360),
    anomaly: angle(360),
    motion: fc.integer({ min: 1, max: 1_700_000_000 }).map((n) => (n / 1e8).toFixed(8).padStart(11)),
    revolution: fc.oneof(
      fc.integer({ min: 0, max: 99_999 }).map((n) => String(n).padStart(5)),
      fc.constant("     "),
    ),
  })
  .map((f) => {
    const line1 = `1 ${f.catalogue}${f.classification} ${f.designator} ${f.epoch} ${f.dot} ${f.ddot} ${f.bstar} ${f.type} ${f.set}`;
    const line2 = `2 ${f.catalogue} ${f.inclination} ${f.node} ${f.eccentricity} ${f.pericentre} ${f.anomaly} ${f.motion}${f.revolution}`;
    return { line1: `${line1}${lineChecksum(line1)}`, line2: `${line2}${lineChecksum(line2)}` };
  });

export const tles: fc.Arbitrary<Tle> = elementLines.map(({ line1, line2 }) => parseTle(line1, line2).message);
