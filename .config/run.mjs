// Runs an entry of src as compiled JavaScript; compiles first when dist is missing or older than src.
// Usage: node .config/run.mjs ENTRY [ARGS]   (ENTRY: a file of src without its suffix, "main" or "demo")
import { spawnSync } from "node:child_process";
import { existsSync, mkdirSync, readdirSync, rmSync, statSync, utimesSync, writeFileSync } from "node:fs";
import { dirname, join } from "node:path";
import { fileURLToPath, pathToFileURL } from "node:url";

const root = dirname(dirname(fileURLToPath(import.meta.url)));
const stamp = join(root, "dist", ".built");

function newestIn(folder) {
  let newest = 0;
  for (const entry of readdirSync(folder, { withFileTypes: true, recursive: true })) {
    if (entry.isFile()) newest = Math.max(newest, statSync(join(entry.parentPath, entry.name)).mtimeMs);
  }
  return newest;
}

const configs = ["package.json", "tsconfig.json", ".config/tsconfig.build.json"].map((f) => join(root, f));

function isFresh() {
  const newest = Math.max(newestIn(join(root, "src")), ...configs.map((f) => statSync(f).mtimeMs));
  return existsSync(stamp) && statSync(stamp).mtimeMs >= newest;
}

function build() {
  const startedAt = new Date();
  rmSync(join(root, "dist"), { recursive: true, force: true });
  const tsc = join(root, "node_modules", "typescript", "bin", "tsc");
  // Types are checked by `npm run types`; a start only needs the JavaScript.
  const project = join(root, ".config", "tsconfig.build.json");
  const built = spawnSync(process.execPath, [tsc, "-p", project, "--noCheck"], {
    stdio: ["ignore", process.stderr, process.stderr],
  });
  if (built.status !== 0) throw new Error("The build failed; see the messages above. Has `npm ci` been run?");
  writeFileSync(stamp, "");
  utimesSync(stamp, startedAt, startedAt);
}

/** One build at a time: who comes second waits and takes what the first one made. */
async function buildWhenNeeded() {
  if (isFresh()) return;
  const lock = join(root, "node_modules", ".tauline-build");
  for (;;) {
    try {
      mkdirSync(lock);
      break;
    } catch (error) {
      if (error.code !== "EEXIST") throw error;
      if (Date.now() - statSync(lock, { throwIfNoEntry: false })?.mtimeMs > 60_000)
        rmSync(lock, { recursive: true, force: true });
      await new Promise((resolve) => setTimeout(resolve, 50));
    }
  }
  try {
    if (!isFresh()) build();
  } finally {
    rmSync(lock, { recursive: true, force: true });
  }
}

try {
  await buildWhenNeeded();
} catch (error) {
  console.error(error.message);
  process.exit(1);
}

const [entry, ...args] = process.argv.slice(2);
const file = join(root, "dist", `${entry}.js`);
process.argv = [process.execPath, file, ...args];
await import(pathToFileURL(file).href);
