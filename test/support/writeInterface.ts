import { readFileSync, writeFileSync } from "node:fs";
import { fileURLToPath } from "node:url";
import { version } from "../../src/config.ts";
import { interfaceDocument } from "../../src/http/index.ts";

/**
 * Writes openapi/tauline.openapi.json from the schemas, or with --check proves that the committed one is fresh.
 */
const file = fileURLToPath(new URL("../../openapi/tauline.openapi.json", import.meta.url));
const generated = "Generated from the schemas in src/wire by `npm run openapi`; do not edit.";
const text = `${JSON.stringify({ "x-generated": generated, ...interfaceDocument(version) }, null, 2)}\n`;

if (process.argv.includes("--check")) {
  if (readFileSync(file, "utf8") !== text) {
    console.error("openapi/tauline.openapi.json is not what the schemas say; run: npm run openapi");
    process.exit(1);
  }
  console.log("The interface document is fresh.");
} else {
  writeFileSync(file, text);
}
