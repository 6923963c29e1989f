import { existsSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { describe, expect, it } from "vitest";

/** What can be said of the image without an engine that builds it: its files exist, its versions and addresses agree. */

const root = fileURLToPath(new URL("../..", import.meta.url));
const read = (file: string): string => readFileSync(join(root, file), "utf8");

/** Lines without comments, continued ones joined. */
const lines = read("docker/Dockerfile")
  .replaceAll("\\\n", " ")
  .split("\n")
  .map((line) => line.trim())
  .filter((line) => line !== "" && !line.startsWith("#"));
const instructions = (name: string): string[] =>
  lines.filter((line) => line.startsWith(`${name} `)).map((line) => line.slice(name.length).trim());

/** Files that the build takes from the checkout. */
const sources = instructions("COPY")
  .filter((copy) => !copy.startsWith("--from="))
  .flatMap((copy) => copy.split(/\s+/).slice(0, -1));
const manifest = JSON.parse(read("package.json")) as {
  engines: { node: string };
  scripts: Record<string, string>;
  bin: Record<string, string>;
};
const compose = read("docker/compose.yaml");

describe("the image", () => {
  it("copies only what exists, and its list of visible files is exactly that", () => {
    expect(sources.length).toBeGreaterThan(5);
    for (const source of sources) expect(existsSync(join(root, source)), source).toBe(true);
    const visible = read("docker/Dockerfile.dockerignore")
      .split("\n")
      .filter((line) => line.startsWith("!"))
      .map((line) => line.slice(1));
    expect([...new Set(sources)].sort()).toEqual(visible.sort());
  });

  it("names stages that it has, and one base image by its full version, which the package takes", () => {
    const stages = instructions("FROM").flatMap((from) => from.split(" AS ").slice(1));
    const used = instructions("COPY").flatMap((copy) => copy.match(/^--from=(\S+)/)?.slice(1) ?? []);
    expect(new Set(used)).toEqual(new Set(stages));
    expect(new Set(instructions("FROM").map((from) => from.split(" AS ")[0]))).toEqual(new Set(["${NODE_IMAGE}"]));
    const [, major] = /^NODE_IMAGE=node:(\d+)\.\d+\.\d+-\w+-slim$/.exec(instructions("ARG")[0]!)!;
    const [, least] = /^>=(\d+)\./.exec(manifest.engines.node)!;
    expect(Number(major)).toBeGreaterThanOrEqual(Number(least));
  });

  it("runs scripts that the package has, and what the build makes", () => {
    for (const [, script] of instructions("RUN")
      .join("\n")
      .matchAll(/npm run (\S+)/g)) {
      expect(manifest.scripts[script!]).toBeDefined();
    }
    expect(JSON.parse(instructions("ENTRYPOINT")[0]!)).toEqual(["node", manifest.bin.tauline]);
  });

  it("ends as a user without rights, whose health is asked at the port that it opens", () => {
    const last = lines.slice(lines.findLastIndex((line) => line.startsWith("FROM ")));
    expect(last).toContain("USER node");
    expect(last.indexOf("USER node")).toBeLessThan(last.findIndex((line) => line.startsWith("ENTRYPOINT")));
    const port = /\bPORT=(\d+)/.exec(instructions("ENV")[0]!)?.[1];
    expect(instructions("EXPOSE")).toEqual([port]);
    expect(compose).toContain(`:${port}"`);
    const health = JSON.parse(/CMD (\[.*\])$/.exec(instructions("HEALTHCHECK")[0]!)![1]!) as string[];
    expect(health.slice(0, 2)).toEqual(["node", "-e"]);
    // The text compiles; it is not run here.
    expect(() => new Function(health[2]!)).not.toThrow();
  });
});

describe("the compose file", () => {
  it("keeps the service to the loopback address, on a read-only root, without rights to gain", () => {
    const published = compose.match(/^\s+- ".*:\d+"$/gm) ?? [];
    expect(published).toHaveLength(1);
    expect(published[0]).toContain('"127.0.0.1:');
    for (const line of ["read_only: true", "- ALL", "- no-new-privileges:true", "dockerfile: docker/Dockerfile"]) {
      expect(compose.split("\n").map((text) => text.trim())).toContain(line);
    }
    expect(compose).toMatch(/mem_limit: \d+[mg]/);
    expect(compose).toContain(`- data:${/DATA_DIR=(\S+)/.exec(instructions("ENV")[0]!)![1]}`);
  });
});
