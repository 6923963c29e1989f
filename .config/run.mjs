// Runs an entry of src as compiled JavaScript; compiles first when dist is missing or older than src.
// Usage: node .config/run.mjs ENTRY [ARGS]   (ENTRY: a file of src without its suffix, "main" or "demo")
import { spawnSync } from "node:child_process";
import { existsSync, readdirSync, rmSync, statSync, utimesSync, writeFileSync } from "node:fs";
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
const newest = Math.max(newestIn(join(root, "src")), ...configs.map((f) => statSync(f).mtimeMs));
if (!existsSync(stamp) || statSync(stamp).mtimeMs < newest) {
  const startedAt = new Date();
  rmSync(join(root, "dist"), { recursive: true, force: true });
  const tsc = join(root, "node_modules", "typescript", "bin", "tsc");
  // Types are checked by `npm run types`; a start only needs the JavaScript.
  const project = join(root, ".config", "tsconfig.build.json");
  const built = spawnSync(process.execPath, [tsc, "-p", project, "--noCheck"], {
    stdio: ["ignore", process.stderr, process.stderr],
  });
  if (built.status !== 0) {
    console.error("The build failed; see the messages above. Has `npm ci` been run?");
    process.exit(1);
  }
  writeFileSync(stamp, "");
  utimesSync(stamp, startedAt, startedAt);
}

const [entry, ...args] = process.argv.slice(2);
const file = join(root, "dist", `${entry}.js`);
process.argv = [process.execPath, file, ...args];
await import(pathToFileURL(file).href);
