import { describe, expect, it } from "vitest";
import { fullCovariance, parseOem, writeOem } from "../../src/formats/index.ts";
import { changed, inventedOem } from "./inventedMessages.ts";
import { expectRefusal } from "./refusal.ts";

const read = (what: string, by: string) => parseOem(changed(inventedOem, what, by));

describe("an OEM in lines", () => {
  const { message, remarks } = parseOem(inventedOem);

  it("is read into segments, states and covariances", () => {
    expect(remarks).toEqual([]);
    expect(message.version).toBe("3.0");
    expect(message.header).toEqual({
      comments: [" Folded on a rainy Sunday"],
      classification: "TOY",
      creationDate: { text: "2033-03-03T03:03:03", timeSystem: "UTC" },
      originator: "NOBODY",
      messageId: "BOAT-1",
    });
    const [first, second] = message.segments;
    expect(first!.metadata.interpolationDegree).toBe(3);
    expect(first!.metadata.useableStopTime).toEqual({ text: "2033-03-03T00:02:00", timeSystem: "TAI" });
    expect(first!.states).toHaveLength(4);
    expect(first!.states[2]).toEqual({
      epoch: { text: "2033-062T00:02:00.5", timeSystem: "TAI" },
      positionKm: [7002.5, 3, -4],
      velocityKmPerS: [0.25, 7.5, -0.5],
      accelerationKmPerS2: null,
    });
    expect(second!.states[1]!.accelerationKmPerS2).toEqual([1e-3, -2e-3, 0.3]);
    expect(second!.metadata.interpolation).toBeNull();
  });

  it("gives a covariance the frame of the states when it names none (CCSDS 502.0-B-3, 5.2.5.4)", () => {
    const [own, inherited] = message.segments[0]!.covariances;
    expect(own!.frame).toBe("RTN");
    expect(own!.comments).toEqual(["Damp"]);
    expect(inherited!.frame).toBe("GCRF");
    const full = fullCovariance(inherited!.lowerTriangle);
    expect(full[5]![3]).toBe(19);
    expect(full[3]![5]).toBe(19);
    expect(full[0]).toEqual([1, 2, 4, 7, 11, 16]);
  });

  it("is printed back to an equal record, in lines and in XML", () => {
    expect(parseOem(writeOem(message)).message).toEqual(message);
    expect(parseOem(writeOem(message, "xml")).message).toEqual(message);
  });

  it("may have a byte-order mark, CR LF or CR line ends, tabs and blanks around", () => {
    expect(parseOem(`\ufeff${inventedOem.replaceAll("\n", "\r\n")}`).message).toEqual(message);
    expect(parseOem(inventedOem.replaceAll("\n", " \r")).message).toEqual(message);
    expect(parseOem(inventedOem.replaceAll(" = ", "\t=\t")).message).toEqual(message);
  });

  it("may have empty header fields, with a remark", () => {
    const bare = read("ORIGINATOR = NOBODY", "ORIGINATOR =");
    expect(bare.message.header.originator).toBeNull();
    expect(bare.remarks).toEqual(["ORIGINATOR is empty."]);
    expect(parseOem(writeOem(bare.message)).message).toEqual(bare.message);
  });

  it("takes comments in odd places and keywords in another order, with a remark", () => {
    const comment = read("REF_FRAME = GCRF", "COMMENT odd\nREF_FRAME = GCRF");
    expect(comment.message.segments[0]!.metadata.comments).toEqual(["A paper boat", "odd"]);
    expect(comment.remarks[0]).toContain("line 13");
    const order = read("CENTER_NAME = EARTH\nREF_FRAME = GCRF", "REF_FRAME = GCRF\nCENTER_NAME = EARTH");
    expect(order.message).toEqual(message);
    expect(order.remarks[0]).toContain("CENTER_NAME");
  });

  it("takes characters beyond ASCII in texts, with one remark", () => {
    const odd = read("= NOBODY", "= NIEMAND ÄÖÜ").message;
    expect(odd.header.originator).toBe("NIEMAND ÄÖÜ");
    expect(parseOem(inventedOem.replaceAll("PAPER BOAT 7", "PAPIERBÖÖTCHEN")).remarks).toEqual([
      "OEM, line 10: there are characters beyond ASCII; the standard has none.",
    ]);
    expect(parseOem(writeOem(odd, "xml")).message).toEqual(odd);
  });

  it("names what cannot be used near the Earth without refusing it", () => {
    const odd = parseOem(
      inventedOem
        .replaceAll("= EARTH", "= MARS BARYCENTER")
        .replaceAll("= GCRF", "= MARSFIXED")
        .replaceAll("= TAI", "= UT1"),
    ).message.segments[0]!;
    expect(odd.metadata.centerName).toBe("MARS BARYCENTER");
    expect(odd.metadata.refFrame).toBe("MARSFIXED");
    expect(odd.states[0]!.epoch.timeSystem).toBe("UT1");
  });
});

describe("an OEM that is broken", () => {
  const rows: readonly (readonly [what: string, by: string, parts: readonly string[]])[] = [
    ["CCSDS_OEM_VERS = 3.0", "CCSDS_OEM_VERS = 4.0", ["line 1", "CCSDS_OEM_VERS", '"4.0"', '"3.0"']],
    ["CCSDS_OEM_VERS = 3.0", "CCSDS_AEM_VERS = 1.0", ["another kind of message"]],
    ["CCSDS_OEM_VERS = 3.0\n", "", ["line 1", "first line"]],
    ["REF_FRAME = GCRF", "REF_FRAM = GCRF", ["line 13", '"REF_FRAM"', "perhaps REF_FRAME was meant"]],
    ["OBJECT_ID = 2033-999Z\n", "", ["OBJECT_ID", "must be given"]],
    ["OBJECT_ID = 2033-999Z", "OBJECT_ID =", ["line 11", "OBJECT_ID", "a value"]],
    ["ORIGINATOR = NOBODY", "ORIGINATOR = A\nORIGINATOR = B", ["line 6", "ORIGINATOR", "once", "line 5"]],
    ["INTERPOLATION_DEGREE = 3", "INTERPOLATION_DEGREE = 0", ["line 20", "at least 1"]],
    ["INTERPOLATION_DEGREE = 3\n", "", ["line 19", "INTERPOLATION_DEGREE"]],
    ["START_TIME = 2033-03-03T00:00:00", "START_TIME = 2033-02-30T00:00:00", ["START_TIME", "an epoch such as"]],
    ["STOP_TIME = 2033-03-03T00:03:00", "STOP_TIME = 2033-03-02T00:03:00", ["line 18", "STOP_TIME", "not before"]],
    ["7000.5", "7000.5x", ["line 24", '"7000.5x"', "a number"]],
    ["7000.5", "NaN", ["line 24", '"NaN"']],
    ["7000.5", "1e999", ["line 24", '"1e999"', "range of a double"]],
    ["7001.5 2", "7001.5", ["line 25", "there are 6 items"]],
    ["7001.5 2", "7001.5 2 3 4 5", ["line 25", "as many numbers"]],
    ["2033-03-03T00:01:00 7001.5", "2033-03-02T00:01:00 7001.5", ["line 25", "after the one before"]],
    ["2033-03-03T00:01:00 7001.5", "2033-03-03T00:00:00.000 7001.5", ["line 25", "after the one before"]],
    ["2033-03-03T00:01:00 7001.5", "X = 7001.5", ["line 25", "an ephemeris line"]],
    ["4 5 6\n", "4 5\n", ["line 35", "row 3"]],
    ["EPOCH = 2033-03-03T00:02:00", "EPOCH = 2033-03-03T00:01:00", ["EPOCH", "after the one before"]],
    ["COVARIANCE_STOP\n", "", ["line 47", "COVARIANCE_STOP"]],
    [
      "TIME_SYSTEM = TAI\nSTART_TIME = 2033-03-03T00:02:00",
      "TIME_SYSTEM = GPS\nSTART_TIME = 2033-03-03T00:02:00",
      ["segment 2", "fixed"],
    ],
    ["START_TIME = 2033-03-03T00:02:00", "START_TIME = 2033-03-03T00:01:30", ["segment 2", "useable stop"]],
    ["MESSAGE_ID = BOAT-1", "MESSAGE_ID \u0007", ["printable"]],
  ];

  it.each(rows)("%j as %j", (what, by, parts) => {
    expectRefusal(() => read(what, by), ...parts);
  });

  it("is refused when it ends early, without a line at all, or as another text", () => {
    expectRefusal(
      () => parseOem(inventedOem.slice(0, inventedOem.indexOf("META_STOP"))),
      "end of the text",
      "META_STOP",
    );
    expectRefusal(() => parseOem(inventedOem.slice(0, inventedOem.indexOf("COMMENT It"))), "ephemeris lines");
    expectRefusal(() => parseOem(""), "the text is empty");
    expectRefusal(() => parseOem("once upon a time"), "CCSDS_OEM_VERS");
  });
});
