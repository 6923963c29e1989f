import { describe, expect, it } from "vitest";
import { lineChecksum, parseTle, splitElementSets, writeTle } from "../../src/formats/index.ts";
import { inventedLine1 as line1, inventedLine2 as line2, summed } from "./inventedMessages.ts";
import { expectRefusal, refusal } from "./refusal.ts";

/** The line with other characters from a column (counted from 1) on, and its checksum made good. */
function withColumns(line: string, column: number, text: string): string {
  const body = line.slice(0, 68);
  return summed(body.slice(0, column - 1) + text + body.slice(column - 1 + text.length));
}

describe("two-line elements", () => {
  const { message, remarks } = parseTle(line1, line2);

  it("are read with the texts of their columns", () => {
    expect(remarks).toEqual([]);
    expect(message.catalogueNumber).toEqual({ text: "77777", value: 77777 });
    expect(message.designator).toBe("33999Z");
    expect(message.epoch).toEqual({ text: "2033-062T12:00:00.000000", timeSystem: "UTC" });
    expect(message.bstarPerEarthRadius).toEqual({ text: "-12500-4", value: -0.125e-4 });
    expect(message.meanMotionDdotRevPerDay3).toEqual({ text: "00000+0", value: 0 });
    expect(message.eccentricity).toEqual({ text: "0025000", value: 0.0025 });
    expect(message.revolutionAtEpoch).toEqual({ text: "42", value: 42 });
  });

  it("are printed back column by column", () => {
    expect(writeTle(message)).toEqual({ line1, line2 });
  });

  it("keep the epoch exactly: a hundred-millionth of a day is 864 microseconds", () => {
    const epoch = (text: string) => parseTle(withColumns(line1, 19, text), line2).message.epoch.text;
    expect(epoch("33062.00000001")).toBe("2033-062T00:00:00.000864");
    expect(epoch("33062.99999999")).toBe("2033-062T23:59:59.999136");
    expect(epoch("33  2.5       ")).toBe("2033-002T12:00:00.000000");
  });

  it("turn the century at 57 (common practice, no source)", () => {
    const epoch = (text: string) => parseTle(withColumns(line1, 19, text), line2).message.epoch.text.slice(0, 4);
    expect(epoch("57001.50000000")).toBe("1957");
    expect(epoch("99001.50000000")).toBe("1999");
    expect(epoch("00001.50000000")).toBe("2000");
    expect(epoch("56001.50000000")).toBe("2056");
  });

  it.each([
    ["T0005", 270_005],
    ["A0000", 100_000],
    ["Z9999", 339_999],
    ["J1234", 181_234],
    ["  837", 837],
    ["00837", 837],
  ])("read the catalogue number %j as %d (alpha-5: common practice, no source)", (text, value) => {
    const first = withColumns(line1, 3, text);
    const second = withColumns(line2, 3, text);
    const read = parseTle(first, second).message;
    expect(read.catalogueNumber).toEqual({ text: text.trim(), value });
    expect(writeTle(read)).toEqual({ line1: first, line2: second });
  });

  it.each([
    [" 00000-0", 0],
    ["-11606-4", -0.11606e-4],
    [" 00000+0", 0],
    ["+28098-4", 0.28098e-4],
    [" 12345 1", 1.2345],
    ["    98-2", 0.00098e-2],
    ["-00000+0", -0],
  ])("read an implied point and power: %j as %d", (text, value) => {
    const read = parseTle(withColumns(line1, 54, text), line2).message;
    expect(read.bstarPerEarthRadius.value).toBe(value);
    expect(parseTle(writeTle(read).line1, writeTle(read).line2).message).toEqual(read);
  });

  it("may have blank columns for what SGP4 does not need, trailing blanks, CR and a byte-order mark", () => {
    const first = withColumns(withColumns(line1, 63, " "), 65, "    ");
    const read = parseTle(`\ufeff${first}  \r\n`, `${withColumns(line2, 64, "     ")}\r`).message;
    expect(read.ephemerisType).toEqual({ text: "", value: 0 });
    expect(read.elementSetNumber).toEqual({ text: "", value: 0 });
    expect(read.revolutionAtEpoch).toEqual({ text: "", value: 0 });
  });

  it("may be in small letters, with a remark", () => {
    const lower = parseTle(line1.toLowerCase(), line2);
    expect(lower.message).toEqual(message);
    expect(lower.remarks[0]).toContain("small letters");
  });
});

describe("two-line elements that are broken", () => {
  const digit = (line: string): string => String((lineChecksum(line) + 3) % 10);
  const rows: readonly (readonly [what: string, first: string, second: string, parts: readonly string[]])[] = [
    ["wrong checksum", line1.slice(0, 68) + digit(line1), line2, ["line 1", "column 69", digit(line1), line1[68]!]],
    ["wrong checksum in line 2", line1, line2.slice(0, 68) + digit(line2), ["line 2", "column 69"]],
    ["no checksum", line1.slice(0, 68), line2, ["there are 68", `it would be ${line1[68]}`]],
    ["swapped", line2, line1, ["swapped"]],
    ["line 1 twice", line1, line1, ["line 2", "begins with 2"]],
    ["another catalogue number", line1, withColumns(line2, 3, "77778"), ["line 2", "columns 3 to 7", "77777"]],
    ["a tab", line1.replace(" ", "\t"), line2, ["column 2", "tab"]],
    ["text behind column 69", `${line1} 0.0`, line2, ["69 characters"]],
    ["a shifted column", summed(`1 77777U  33999Z  ${line1.slice(19, 68)} `), line2, ["line 1"]],
    ["a letter in a number", line1, withColumns(line2, 9, " 77.x000"), ["columns 9 to 16"]],
    ["no point", line1, withColumns(line2, 9, " 7777000"), ["decimal point"]],
    ["inclination beyond 180", line1, withColumns(line2, 9, "190.0000"), ["0 to 180"]],
    ["mean motion 0", line1, withColumns(line2, 53, " 0.00000000"), ["above 0"]],
    ["day 366 of a common year", withColumns(line1, 19, "33366.5"), line2, ["1 to 365 in 2033"]],
    ["day 0", withColumns(line1, 19, "33000.5"), line2, ["1 to 365"]],
    ["the letter I in alpha-5", withColumns(line1, 3, "I0005"), withColumns(line2, 3, "I0005"), ["I and O"]],
    ["four digits in the exponent form", withColumns(line1, 54, " 1234-04"), line2, ["columns 54 to 61"]],
    ["not ASCII", line1.replace("U", "Ü"), line2, ["ASCII"]],
    ["nothing", "", "", ["begins with 1"]],
  ];

  it.each(rows)("%s", (_, first, second, parts) => {
    expectRefusal(() => parseTle(first, second), ...parts);
  });

  it("say which line, as a place in the request", () => {
    expect(refusal(() => parseTle(line1, "2")).faults[0]!.place).toEqual(["line2"]);
    expect(refusal(() => parseTle("1", line2)).faults[0]!.place).toEqual(["line1"]);
  });
});

describe("a text of two-line elements", () => {
  it("is split into objects of two or three lines", () => {
    const text = `# made up\n\n0 KITE 13\r\n${line1}\r\n${line2}\r\nBOAT\n${line1}\n${line2}\n${line1}\n${line2}\n`;
    expect(splitElementSets(text).map(({ name, lineNumber }) => [name, lineNumber])).toEqual([
      ["KITE 13", 4],
      ["BOAT", 7],
      [null, 9],
    ]);
    expect(splitElementSets(`1 KITE\n${line1}\n${line2}`)[0]!.name).toBe("1 KITE");
    expect(splitElementSets("")).toEqual([]);
  });

  it("is refused where a line belongs to no pair", () => {
    expectRefusal(() => splitElementSets(`${line1}\n`), "line 1", "line 2 after line 1");
    expectRefusal(() => splitElementSets(`${line1}\n${line2}\nBOAT`), "line 3");
    expectRefusal(() => splitElementSets(`A\nB\n${line1}\n${line2}`), "line 1");
  });
});
