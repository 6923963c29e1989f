import { existsSync } from "node:fs";
import { createRequire } from "node:module";

/**
 * A real browser for the tests of the pages. The types of its driver and of the accessibility checker need those of the
 * DOM, which neither src nor test has; so the few parts that are used are described here.
 */

export interface Page {
  on(event: "console", listen: (message: { type(): string; text(): string }) => void): void;
  on(event: "request", listen: (request: { url(): string }) => void): void;
  on(event: "pageerror", listen: (error: Error) => void): void;
  goto(url: string): Promise<{ status(): number } | null>;
  /** Value of an expression in the page. The driver evaluates it beside the page's own policy. */
  evaluate(expression: string): Promise<unknown>;
  close(): Promise<void>;
}

export interface Browser {
  newPage(options: { viewport: { width: number; height: number }; colorScheme?: "light" | "dark" }): Promise<Page>;
  close(): Promise<void>;
}

interface Driver {
  readonly chromium: { launch(options: { executablePath: string; args: readonly string[] }): Promise<Browser> };
}

const require = createRequire(import.meta.url);

const namedPath = process.env.TAULINE_CHROMIUM || "/usr/bin/chromium";

/** Where the browser is: what TAULINE_CHROMIUM names, else where Debian puts it; undefined when there is none. */
export const chromiumPath: string | undefined = existsSync(namedPath) ? namedPath : undefined;

/** Starts the browser with a profile of its own that is thrown away. */
export const startBrowser = (executablePath: string): Promise<Browser> =>
  (require("playwright-core") as Driver).chromium.launch({
    executablePath,
    args: [
      "--headless",
      "--no-sandbox",
      "--disable-gpu",
      "--disable-quic",
      "--no-first-run",
      "--disable-background-networking",
      "--disable-component-update",
      "--disable-sync",
    ],
  });

export interface Violation {
  readonly id: string;
  readonly help: string;
  readonly nodes: readonly { readonly html: string; readonly failureSummary?: string }[];
}

const checkerSource = (require("axe-core") as { readonly source: string }).source;

/** What breaks WCAG 2.0 to 2.2, levels A and AA, or the checker's own good practice. */
export async function violationsOf(page: Page): Promise<readonly Violation[]> {
  const tags = ["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22aa", "best-practice"];
  await page.evaluate(checkerSource);
  const answer = await page.evaluate(
    `axe.run(document, { runOnly: { type: "tag", values: ${JSON.stringify(tags)} } })`,
  );
  const { violations, passes } = answer as { violations: readonly Violation[]; passes: readonly unknown[] };
  if (passes.length === 0) throw new Error("The accessibility checker checked nothing.");
  return violations;
}
