import { mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { Readable, Writable } from "node:stream";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { runCommandLine } from "../../src/cli/index.ts";
import { version } from "../../src/config.ts";
import { defaultLeapSeconds } from "../../src/time/index.ts";
import { post, type Service, startService } from "../support/service.ts";

/** `tauline convert`: the service's bytes, a table for people, refusals. */

let service: Service;
let folder: string;
beforeAll(async () => {
  service = await startService();
  folder = mkdtempSync(join(tmpdir(), "tauline-convert-"));
});
afterAll(async () => {
  rmSync(folder, { recursive: true });
  await service.close();
});

function file(name: string, content: string): string {
  writeFileSync(join(folder, name), content);
  return join(folder, name);
}

class Sink extends Writable {
  text = "";
  override _write(chunk: Buffer | string, _encoding: BufferEncoding, done: () => void): void {
    this.text += String(chunk);
    done();
  }
}

/** `input`: what stands on standard input; null: a terminal on which nobody types. */
async function run(args: readonly string[], input: string | null = null) {
  const [output, messages] = [new Sink(), new Sink()];
  const code = await runCommandLine(["convert", ...args], {
    version,
    leapSeconds: () => defaultLeapSeconds,
    serve: async () => {},
    input: Object.assign(Readable.from(input === null ? [] : [input]), { isTTY: input === null }),
    output,
    messages,
  });
  return { code, out: output.text, messages: messages.text };
}

const answered = async (body: object): Promise<string> => {
  const response = await post(service.address, "/v1/time-conversions", body);
  expect(response.status, response.text).toBe(200);
  return `${response.text}\n`;
};
const good = (out: string) => ({ code: 0, out, messages: "" });

const moment = "2006-01-15T21:24:37.5Z";
const cuc = { format: "CUC", coarseOctets: 4, fineOctets: 2, pField: true };

describe("--json gives the service's bytes and a line feed", () => {
  it("instants of several scales from --value, standard input and a file", async () => {
    const lines = [moment, "2016-12-31T23:59:60Z", "2026-03-01T00:00:37 TAI"];
    const values = [moment, "2016-12-31T23:59:60Z", { at: "2026-03-01T00:00:37", scale: "TAI" }];
    const expected = good(await answered({ values, to: ["TT", "TDB"] }));
    const options = ["--to", "TT, TDB", "--json"];
    expect(await run([...options, "--value", ...lines])).toEqual(expected);
    expect(await run(options, `# pass 12\n\n${lines.join("\r\n")}\n`)).toEqual(expected);
    expect(await run(["-", ...options], lines.join("\n"))).toEqual(expected);
    expect(await run([file("instants.txt", lines.join("\n")), ...options])).toEqual(expected);
  });

  it("codes with --from-code, to codes with --to-code and scales with --to", async () => {
    const ccs = { format: "CCS", variant: "day-of-year", subsecondOctets: 0 };
    const ascii = { format: "ASCII-B", digits: 3 };
    const body = { values: [{ timeCode: "1e5a5d1c368000", format: cuc }], to: ["UTC", ccs, ascii] };
    const options = ["--from-code", JSON.stringify(cuc), "--to-code", JSON.stringify(ccs), JSON.stringify(ascii)];
    const ran = await run([...options, "--to", "UTC", "--json"], "1e5a5d1c368000\n");
    expect(ran).toEqual(good(await answered(body)));
  });

  it("a whole request, and --out", async () => {
    const body = { values: [moment], to: ["GLONASS"] };
    const expected = await answered(body);
    expect(await run(["--request", file("request.json", JSON.stringify(body)), "--json"])).toEqual(good(expected));
    expect(await run(["--request", "-", "--json"], JSON.stringify(body))).toEqual(good(expected));
    const out = join(folder, "answer.json");
    expect(await run(["--to", "GLONASS", "--value", moment, "--json", "--out", out])).toEqual(good(""));
    expect(readFileSync(out, "utf8")).toBe(expected);
  });
});

it("the table: a row an instant, a column a target, flags, what was lost, notices and the leap-second table", async () => {
  const whole = JSON.stringify({ format: "CUC", coarseOctets: 4, fineOctets: 0 });
  const values = ["2016-12-31T23:59:60.25Z", "2031-01-01T00:00:00 TAI"];
  const { code, out, messages } = await run(["--to", "GLONASS", "--to-code", whole, "--value", ...values]);
  expect({ code, messages }).toEqual({ code: 0, messages: "" });
  const lines = out.split("\n");
  expect(lines[0]).toMatch(/input +GLONASS +CUC +flags/);
  // 1958-01-01 to 2016-12-31 are 21 549 days, and 86 400 + 36 s more: 1 861 920 036 s (IERS Bulletin C 52).
  expect(lines[1]).toMatch(/23:59:60\.25Z +2017-01-01T02:59:60\.250000000000 +6efaa524 +leap-second$/);
  expect(lines[2]).toMatch(/TAI +2031-01-01T02:59:23\.000000000000 +894f6a80 +leap-table-expired$/);
  expect(out).toContain("250000000000 ps");
  expect(out).toContain("notice realised-scale");
  expect(out).toContain("IERS leap-second list");
  expect(out).not.toMatch(/undefined|NaN/);
});

describe("wrong use and bad input: exit 1, words on standard error, nothing on standard output", () => {
  it.each<[string, readonly string[], string | null, RegExp]>([
    ["no target", ["--value", moment], null, /--to SCALES or --to-code FORMAT/],
    ["a terminal and nothing to work on", ["--to", "TAI"], null, /pipe lines in|--value/],
    ["no lines", ["--to", "TAI"], "# none\n", /no lines/],
    ["a file that is not there", ["nowhere.txt", "--to", "TAI"], null, /nowhere\.txt cannot be read/],
    ["a file and values", ["instants.txt", "--to", "TAI", "--value", moment], null, /not both/],
    [
      "a format that is no JSON",
      ["--to-code", "CUC", "--value", moment],
      null,
      /--to-code takes a JSON object.*found CUC/,
    ],
    [
      "a format that is none",
      ["--from-code", '{"format":"CUC"}', "--to", "TAI", "--value", "00"],
      null,
      /\/values\/0\/format\/coarseOctets/,
    ],
    ["an unknown scale", ["--to", "TAI,CET", "--value", moment], null, /\/to\/1.*"CET".*time scale/],
    [
      "an unknown scale of a line",
      ["--to", "TAI", "--value", "2026-03-01T00:00:00 CET"],
      null,
      /\/values\/0\/scale.*GLONASS/,
    ],
    ["an unreadable instant", ["--to", "TAI"], `${moment}\nnoon\n`, /invalid-instant[\s\S]*\/values\/1.*"noon"/],
    [
      "an unreadable code",
      ["--from-code", JSON.stringify(cuc), "--to", "TAI", "--value", "1e5a"],
      null,
      /invalid-time-code[\s\S]*7 octets/,
    ],
    ["a request and a target", ["--request", "-", "--to", "TAI"], "{}", /leave out --to/],
  ])("%s", async (_name, args, input, says) => {
    const { code, out, messages } = await run(args, input);
    expect(messages).toMatch(says);
    expect({ code, out }).toEqual({ code: 1, out: "" });
  });
});
