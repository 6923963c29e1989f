import { mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { Readable, Writable } from "node:stream";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { runCommandLine } from "../../src/cli/index.ts";
import { version } from "../../src/config.ts";
import { defaultLeapSeconds } from "../../src/time/index.ts";
import { caution } from "../../src/wire/index.ts";
import { start } from "../support/process.ts";
import {
  type Body,
  correction,
  epoch,
  flight,
  lowOrbit,
  millisecondClock,
  moment,
  mountain,
  prediction,
} from "../support/requests.ts";
import { post, type Service, startService } from "../support/service.ts";

/** The command line, in process with streams of its own, and a few times for real. */

let service: Service;
let folder: string;
beforeAll(async () => {
  service = await startService();
  folder = mkdtempSync(join(tmpdir(), "tauline-commands-"));
  file("clock.json", millisecondClock());
  file("narrow.json", { counter: { ticksPerSecond: 1000, widthBits: 20 }, anchor: { reading: 1000, at: epoch } });
  file("mountain.json", mountain());
  file("flight.json", flight());
  file("orbit.json", lowOrbit());
});
afterAll(async () => {
  rmSync(folder, { recursive: true });
  await service.close();
});

const path = (name: string): string => join(folder, name);

/** Writes a file of the test's folder: text as it is, anything else as JSON. */
function file(name: string, content: unknown): string {
  writeFileSync(
    path(name),
    typeof content === "string" || content instanceof Uint8Array ? content : JSON.stringify(content),
  );
  return path(name);
}

class Sink extends Writable {
  text = "";
  override _write(chunk: Buffer | string, _encoding: BufferEncoding, done: () => void): void {
    this.text += String(chunk);
    done();
  }
}

interface Ran {
  readonly code: number;
  readonly out: string;
  readonly messages: string;
  readonly served: number;
}

/** Runs a command line with `input` on its standard input; null: a terminal on which nobody types. */
async function run(args: readonly string[], input: string | null = null): Promise<Ran> {
  const stdin = Object.assign(Readable.from(input === null ? [] : [input]), { isTTY: input === null });
  const [output, messages] = [new Sink(), new Sink()];
  let served = 0;
  const code = await runCommandLine(args, {
    version,
    leapSeconds: () => defaultLeapSeconds,
    serve: async () => {
      served++;
    },
    input: stdin,
    output,
    messages,
  });
  return { code, out: output.text, messages: messages.text, served };
}

const on = (trajectory: string, clock = "clock.json"): string[] => [
  "--clock",
  path(clock),
  "--trajectory",
  path(trajectory),
];

function expectGood(ran: Ran): string {
  expect(ran.messages).toBe("");
  expect(ran.code).toBe(0);
  expect(ran.out).toMatch(/\n$/);
  return ran.out;
}

function expectRefused(ran: Ran, says: RegExp): void {
  expect(ran.messages).toMatch(says);
  expect(ran.messages).not.toMatch(/\n\s+at \S+ \(|node:internal|undefined|\[object/);
  expect(ran.out).toBe("");
  expect(ran.code).toBe(1);
}

const answered = async (call: string, body: Body): Promise<string> => {
  const response = await post(service.address, call, body);
  expect(response.status, response.text).toBe(200);
  return `${response.text}\n`;
};

describe("correct --json gives the service's bytes and a line feed", () => {
  const readings = [{ reading: "3600000" }, { reading: "7200000" }];
  const body = (changes: Body = {}): Body => correction({ trajectory: lowOrbit(), readings, ...changes });
  const lines = "3600000\n7200000\n";

  it("readings from standard input", async () => {
    const expected = await answered("/v1/corrections", body());
    expect(expectGood(await run(["correct", ...on("orbit.json"), "--json"], lines))).toBe(expected);
    expect(expectGood(await run(["correct", "-", ...on("orbit.json"), "--json"], lines))).toBe(expected);
  });

  it("readings from a file with comments, blanks, CRLF and a byte order mark", async () => {
    const log = file("log.txt", "\ufeff# pass 12\r\n\r\n  3600000  \r\n7200000");
    const ran = await run(["correct", log, ...on("orbit.json"), "--json"]);
    expect(expectGood(ran)).toBe(await answered("/v1/corrections", body()));
  });

  it("readings with --value", async () => {
    const ran = await run(["correct", ...on("orbit.json"), "--json", "--value", "3600000", "7200000"]);
    expect(expectGood(ran)).toBe(await answered("/v1/corrections", body()));
  });

  it("--scale, --terms", async () => {
    const ran = await run(
      ["correct", ...on("orbit.json"), "--json", "--scale", "GPS", "--terms", "velocity, earth-monopole"],
      lines,
    );
    const changes = { scale: "GPS", terms: ["velocity", "earth-monopole"] };
    expect(expectGood(ran)).toBe(await answered("/v1/corrections", body(changes)));
  });

  it("--near for readings that bring none of their own", async () => {
    const near = moment(1040);
    const own = moment(2090);
    const ran = await run(
      ["correct", ...on("flight.json", "narrow.json"), "--json", "--near", near],
      `900\n900,${own}\n 900 , \n`,
    );
    const clock = { counter: { ticksPerSecond: 1000, widthBits: 20 }, anchor: { reading: 1000, at: epoch } };
    const list = [near, own, near].map((at) => ({ reading: "900", near: at }));
    expect(expectGood(ran)).toBe(
      await answered("/v1/corrections", correction({ clock, trajectory: flight(), readings: list })),
    );
  });

  it("--unwrap", async () => {
    const ran = await run(["correct", ...on("mountain.json", "narrow.json"), "--json", "--unwrap", "after"], "900\n");
    expect(JSON.parse(expectGood(ran)).results[0].flags).toEqual(["rollover"]);
  });

  it("a whole request from a file and from standard input", async () => {
    const whole = body({ readings: [{ id: "first", reading: 5 }] });
    const expected = await answered("/v1/corrections", whole);
    const ran = await run(["correct", "--json", "--request", file("request.json", whole)]);
    expect(expectGood(ran)).toBe(expected);
    expect(expectGood(await run(["correct", "--json", "--request", "-"], JSON.stringify(whole)))).toBe(expected);
  });

  it("--out writes the same to a file and nothing to standard output", async () => {
    const out = path("answer.json");
    const ran = await run(["correct", ...on("orbit.json"), "--json", "--out", out], lines);
    expect(ran).toEqual({ code: 0, out: "", messages: "", served: 0 });
    expect(readFileSync(out, "utf8")).toBe(await answered("/v1/corrections", body()));
  });
});

describe("predict --json gives the service's bytes and a line feed", () => {
  it("instants from standard input, a file and --value", async () => {
    const instants = [moment(60), "2026-060T01:00:00.25Z"];
    const expected = await answered("/v1/predicted-readings", prediction({ trajectory: mountain(), instants }));
    const options = ["predict", ...on("mountain.json"), "--json"];
    expect(expectGood(await run(options, `${instants.join("\n")}\n`))).toBe(expected);
    expect(expectGood(await run([...options, file("instants.txt", instants.join("\r\n"))]))).toBe(expected);
    expect(expectGood(await run([...options, "--value", ...instants]))).toBe(expected);
  });

  it("a whole request", async () => {
    const whole = prediction({ trajectory: lowOrbit(), scale: "TT" });
    const ran = await run(["predict", "--json", "--request", file("predict.json", whole)]);
    expect(expectGood(ran)).toBe(await answered("/v1/predicted-readings", whole));
  });
});

describe("the table for people", () => {
  it("correct: every reading, every term, the sum, notices and evidence", async () => {
    const options = ["correct", ...on("orbit.json"), "--value", "3600000", "7200000"];
    const { results, notices, evidence } = JSON.parse(expectGood(await run([...options, "--json"])));
    const text = expectGood(await run(options));
    for (const { corrected, reading, terms } of results) {
      expect(text).toContain(corrected);
      expect(text).toContain(reading);
      for (const { term, label } of terms) {
        expect(text).toContain(term);
        expect(text).toContain(label);
      }
    }
    for (const notice of notices) expect(text).toContain(notice.code);
    expect(text).toContain("sum");
    expect(text).toContain(evidence.inputsSha256.slice(0, 16));
    expect(text).not.toMatch(/undefined|NaN/);
    expect(text).not.toContain("\u001b");
  });

  it("correct: more readings than stand side by side say so, and flags are shown", async () => {
    const values = ["900", "800", "700", "600", "500"];
    const options = ["correct", ...on("mountain.json", "narrow.json"), "--unwrap", "after"];
    const text = expectGood(await run(options, values.join("\n")));
    expect(text.match(/rollover/g)).toHaveLength(5);
    expect(text).toContain("--json gives all");
  });

  it("predict: instant, reading and flags", async () => {
    const text = expectGood(await run(["predict", ...on("mountain.json", "narrow.json"), "--value", moment(1050)]));
    // 1050 s after reading 1000 of 2^20: 1 051 000 - 1 048 576 = 2424, less what relativity has not yet moved.
    expect(text).toMatch(/\b2424\b/);
    expect(text).toContain("rollover");
    expect(text).toContain("2026-03-01T00:17:30.000000000000Z");
  });

  it("--out takes the table as well", async () => {
    const out = path("table.txt");
    const options = ["correct", ...on("mountain.json"), "--value", "1000"];
    const text = expectGood(await run(options));
    expect(await run([...options, "--out", out])).toMatchObject({ code: 0, out: "", messages: "" });
    expect(readFileSync(out, "utf8")).toBe(text);
  });
});

describe("help and version go to standard output", () => {
  it("--help shows the commands, the environment and the caution", async () => {
    const { code, out, messages } = await run(["--help"]);
    expect({ code, messages }).toEqual({ code: 0, messages: "" });
    for (const word of ["serve", "correct", "predict", "LEAP_SECONDS_FILE"]) expect(out).toContain(word);
    expect(out.replaceAll(/\s+/g, " ")).toContain(caution);
  });

  it.each(["correct", "predict"])("%s --help names its options", async (command) => {
    const { code, out } = await run([command, "--help"]);
    expect(code).toBe(0);
    for (const option of ["--clock", "--trajectory", "--request", "--value", "--out", "--json"])
      expect(out).toContain(option);
  });

  it("--version", async () => {
    expect(await run(["--version"])).toEqual({ code: 0, out: `${version}\n`, messages: "", served: 0 });
  });

  it("serve starts the service and prints nothing itself", async () => {
    expect(await run(["serve"])).toEqual({ code: 0, out: "", messages: "", served: 1 });
  });
});

describe("wrong use and bad input: exit 1, a sentence on standard error, nothing on standard output", () => {
  const refused: readonly { name: string; args: () => string[]; input?: string; says: RegExp }[] = [
    { name: "no command", args: () => [], says: /correct[\s\S]*predict/ },
    { name: "an unknown command", args: () => ["divine"], says: /unknown command 'divine'[\s\S]*--help/ },
    { name: "an unknown option", args: () => ["correct", "--speed"], says: /unknown option '--speed'/ },
    { name: "an option without its value", args: () => ["correct", "--clock"], says: /--clock/ },
    { name: "too many files", args: () => ["correct", "a", "b"], says: /too many arguments/i },
    { name: "an unknown unwrap", args: () => ["correct", "--unwrap", "sideways"], says: /after, before, nearest/ },
    {
      name: "no clock",
      args: () => ["correct", "--trajectory", path("orbit.json")],
      says: /--clock FILE and --trajectory FILE/,
    },
    {
      name: "no trajectory",
      args: () => ["predict", "--clock", path("clock.json")],
      says: /--clock FILE and --trajectory FILE/,
    },
    {
      name: "a terminal and nothing to work on",
      args: () => ["correct", ...on("orbit.json")],
      says: /pipe lines in|--value/,
    },
    { name: "empty standard input", args: () => ["correct", ...on("orbit.json")], input: "", says: /no lines/ },
    { name: "comments only", args: () => ["predict", ...on("orbit.json")], input: "# none\n\n", says: /no lines/ },
    {
      name: "a missing clock file",
      args: () => ["correct", ...on("orbit.json", "nowhere.json"), "--value", "1"],
      says: /clock .*nowhere\.json cannot be read/,
    },
    {
      name: "a missing trajectory file",
      args: () => ["correct", ...on("nowhere.json"), "--value", "1"],
      says: /trajectory .*nowhere\.json cannot be read/,
    },
    {
      name: "a folder for a file",
      args: () => ["correct", "--clock", folder, "--trajectory", path("orbit.json"), "--value", "1"],
      says: /cannot be read/,
    },
    {
      name: "a missing file of readings",
      args: () => ["correct", path("nowhere.txt"), ...on("orbit.json")],
      says: /nowhere\.txt cannot be read/,
    },
    {
      name: "a missing request",
      args: () => ["correct", "--request", path("nowhere.json")],
      says: /request .*nowhere\.json cannot be read/,
    },
    {
      name: "broken JSON in a file",
      args: () => ["correct", ...on("orbit.json", "broken.json"), "--value", "1"],
      says: /clock .*broken\.json.*JSON/,
    },
    {
      name: "an empty JSON file",
      args: () => ["correct", ...on("empty.json"), "--value", "1"],
      says: /trajectory .*empty\.json.*JSON/,
    },
    { name: "broken JSON on standard input", args: () => ["correct", "--request", "-"], input: "{", says: /JSON/ },
    {
      name: "a request and a clock",
      args: () => ["correct", "--request", path("request.json"), "--clock", path("clock.json")],
      says: /--request brings everything/,
    },
    {
      name: "a request and readings",
      args: () => ["correct", "--request", path("request.json"), "--value", "1"],
      says: /--request brings everything/,
    },
    {
      name: "a request and a scale",
      args: () => ["correct", "--request", file("whole.json", correction()), "--scale", "TAI"],
      says: /--request brings everything|--scale/,
    },
    {
      name: "a request and a rough time",
      args: () => ["correct", "--request", file("whole.json", correction()), "--near", epoch],
      says: /--request brings everything|--near/,
    },
    {
      name: "a request and terms",
      args: () => ["correct", "--request", file("whole.json", correction()), "--terms", "velocity"],
      says: /--request brings everything|--terms/,
    },
    {
      name: "a reading that is none",
      args: () => ["correct", ...on("orbit.json")],
      input: "1\n12:30\n",
      says: /invalid-request[\s\S]*\/readings\/1\/reading[\s\S]*12:30/,
    },
    {
      name: "a reading outside the span",
      args: () => ["correct", ...on("flight.json"), "--value", "-5"],
      says: /outside-span[\s\S]*2026-03-01T04:00:00/,
    },
    {
      name: "an unreadable near",
      args: () => ["correct", ...on("flight.json"), "--value", "5", "--near", "noon"],
      says: /invalid-instant[\s\S]*\/readings\/0\/near/,
    },
    {
      name: "an unreadable instant",
      args: () => ["predict", ...on("flight.json"), "--value", "2026-03-01"],
      says: /invalid-instant[\s\S]*\/instants\/0[\s\S]*time of day/,
    },
    {
      name: "an unknown scale",
      args: () => ["predict", ...on("flight.json"), "--value", epoch, "--scale", "CET"],
      says: /UTC.*TAI.*TT.*GPS/,
    },
    {
      name: "unknown terms",
      args: () => ["predict", ...on("flight.json"), "--value", epoch, "--terms", "ether"],
      says: /\/terms\/0/,
    },
    {
      name: "an ambiguous rollover",
      args: () => ["correct", ...on("flight.json", "narrow.json"), "--value", "900"],
      says: /ambiguous-rollover[\s\S]*near/,
    },
    {
      name: "a file that cannot be written",
      args: () => ["correct", ...on("orbit.json"), "--value", "1", "--out", path("no/such/folder/out.json")],
      says: /out\.json cannot be written/,
    },
  ];
  it.each(refused)("$name", async ({ args, input, says }) => {
    file("broken.json", '{ "counter": ');
    file("empty.json", "");
    expectRefused(await run(args(), input ?? null), says);
  });

  it("a problem is told as over HTTP: detail, pointers, what was found and what to do", async () => {
    const ran = await run(["correct", ...on("flight.json"), "--value", "-5", "20000000", "1"]);
    const response = await post(
      service.address,
      "/v1/corrections",
      correction({ trajectory: flight(), readings: ["-5", "20000000", "1"].map((reading) => ({ reading })) }),
    );
    expectRefused(ran, /outside-span/);
    expect(ran.messages).toContain(response.body.detail);
    for (const { pointer, received, expected } of response.body.faults) {
      expect(ran.messages).toContain(`${pointer}: found ${JSON.stringify(received)}, expected ${expected}`);
    }
  });
});

describe("an output that is closed early", () => {
  it("in process: the command ends with 0 and no message", async () => {
    const broken = new Writable({
      write: (_chunk, _encoding, done) => done(Object.assign(new Error("write EPIPE"), { code: "EPIPE" })),
    });
    const messages = new Sink();
    const code = await runCommandLine(["correct", ...on("mountain.json"), "--value", "1"], {
      version,
      leapSeconds: () => defaultLeapSeconds,
      serve: async () => {},
      input: Readable.from([]),
      output: broken,
      messages,
    });
    expect({ code, messages: messages.text }).toEqual({ code: 0, messages: "" });
  });

  it.each(["table", "JSON"])("for real, through `| head -1`: %s", async (form) => {
    const readings = file("many.txt", Array.from({ length: 2000 }, (_, i) => String(i)).join("\n"));
    const command = `node --import tsx src/main.ts correct "$READINGS" --clock "$CLOCK" --trajectory "$TRAJECTORY" ${form === "JSON" ? "--json" : ""} | head -c 100; echo "/\${PIPESTATUS[0]}"`;
    const process = start("bash", ["-c", command], {
      READINGS: readings,
      CLOCK: path("clock.json"),
      TRAJECTORY: path("mountain.json"),
    });
    expect((await process.ended).code).toBe(0);
    expect(process.messages()).toBe("");
    expect(process.out()).toMatch(/^[\s\S]{100}\/0\n$/);
  });
});

describe("the real command", () => {
  const command = (...args: string[]) => start(process.execPath, ["--import", "tsx", "src/main.ts", ...args]);

  it("reads standard input, writes the service's bytes, exits 0", async () => {
    const correct = command("correct", ...on("orbit.json"), "--json");
    correct.child.stdin!.end("3600000\n");
    expect(await correct.ended).toEqual({ code: 0, signal: null });
    expect(correct.messages()).toBe("");
    const body = correction({ trajectory: lowOrbit(), readings: [{ reading: "3600000" }] });
    expect(correct.out()).toBe(await answered("/v1/corrections", body));
  });

  it("exits 1 with the reason on standard error", async () => {
    const correct = command("correct", ...on("flight.json"), "--value", "-5");
    expect((await correct.ended).code).toBe(1);
    expect(correct.out()).toBe("");
    expect(correct.messages()).toMatch(/^tauline: The reading lies .*outside-span/);
  });
});
