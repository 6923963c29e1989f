import { writeFileSync } from "node:fs";
import type { Reporter, SerializedError, TestModule, TestRunEndReason } from "vitest/node";

/**
 * Ends a run with one plain line of the real counts: "N passed, N failed" and ", N skipped" when there are any. A file
 * that could not be loaded, or an error outside of every test, counts as a failure.
 */
export default class ClosingLine implements Reporter {
  onTestRunEnd(modules: readonly TestModule[], errors: readonly SerializedError[], _reason: TestRunEndReason): void {
    let passed = 0;
    let failed = errors.length;
    let skipped = 0;
    for (const module of modules) {
      failed += module.errors().length;
      for (const test of module.children.allTests()) {
        const { state } = test.result();
        if (state === "passed") passed++;
        else if (state === "failed") failed++;
        else skipped++;
      }
    }
    const line = `${passed} passed, ${failed} failed${skipped > 0 ? `, ${skipped} skipped` : ""}`;
    const file = process.env.TAULINE_COUNTS;
    if (file === undefined) process.on("exit", () => console.log(line));
    else writeFileSync(file, `${line}\n`);
  }
}
