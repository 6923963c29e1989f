import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { type Service, startService } from "../support/service.ts";
import { type Browser, chromiumPath, type Page, startBrowser, violationsOf } from "./browser.ts";

/**
 * The pages in a real browser: accessible, quiet, asking nobody else, readable on a narrow window.
 * Source: WCAG 2.2, levels A and AA (1.4.10 for 320 CSS px), as far as a machine can check them.
 */

if (chromiumPath === undefined) {
  console.log("The pages are not looked at: there is no Chromium (TAULINE_CHROMIUM or /usr/bin/chromium).");
}

const paths = ["/docs", "/problems", "/problems/outside-span"];
const looks = [
  { width: 1280, colorScheme: "light" },
  { width: 320, colorScheme: "dark" },
] as const;

describe.skipIf(chromiumPath === undefined)("in a browser", () => {
  let service: Service;
  let browser: Browser;
  let page: Page;
  const heard: string[] = [];
  const asked: string[] = [];

  beforeAll(async () => {
    service = await startService();
    browser = await startBrowser(chromiumPath!);
  });
  afterAll(async () => {
    await browser?.close();
    await service?.close();
  });

  async function open(path: string, width = 1280, colorScheme: "light" | "dark" = "light"): Promise<void> {
    heard.length = 0;
    asked.length = 0;
    page = await browser.newPage({ viewport: { width, height: 900 }, colorScheme });
    page.on("console", (message) => heard.push(`${message.type()}: ${message.text()}`));
    page.on("pageerror", (error) => heard.push(error.message));
    page.on("request", (request) => asked.push(request.url()));
    const response = await page.goto(`${service.address}${path}`);
    expect(response?.status()).toBe(200);
  }

  describe.each(paths)("%s", (path) => {
    it.each(looks)(
      "breaks no rule of accessibility at $width px, $colorScheme",
      async ({ width, colorScheme }) => {
        await open(path, width, colorScheme);
        expect(await page.evaluate("matchMedia('(prefers-color-scheme: dark)').matches")).toBe(colorScheme === "dark");
        expect(await violationsOf(page)).toEqual([]);
        await page.close();
      },
      180_000,
    );

    it("is quiet, and asks nobody for anything but itself", async () => {
      await open(path);
      expect(heard).toEqual([]);
      expect(asked).toEqual([`${service.address}${path}`]);
      await page.close();
    });

    it("wears its sheet, so the policy lets it in", async () => {
      await open(path);
      expect(await page.evaluate("getComputedStyle(document.body).marginTop")).toBe("0px");
      await page.close();
    });

    // 1280 px at 200 % zoom are 640 CSS px.
    it.each([320, 640, 1280])("needs no scrolling sideways at %s px", async (width) => {
      await open(path, width);
      expect(await page.evaluate("document.documentElement.scrollWidth")).toBeLessThanOrEqual(width);
      // Nothing may be cut off either: what sticks out of its box would be lost.
      const cut = `[...document.querySelectorAll("main *")]
        .filter((part) => part.getBoundingClientRect().right > ${width} && getComputedStyle(part.closest("thead") ?? part).position !== "absolute")
        .map((part) => part.outerHTML.slice(0, 200))`;
      expect(await page.evaluate(cut)).toEqual([]);
      await page.close();
    });

    it("has one h1 and headings without a rank left out", async () => {
      await open(path);
      const ranks = (await page.evaluate(
        `[...document.querySelectorAll("h1, h2, h3, h4, h5, h6")].map((heading) => Number(heading.tagName[1]))`,
      )) as number[];
      expect(ranks[0]).toBe(1);
      expect(ranks.filter((rank) => rank === 1)).toHaveLength(1);
      for (const [i, rank] of ranks.slice(1).entries()) expect(rank - ranks[i]!).toBeLessThanOrEqual(1);
      await page.close();
    });

    it("has only links that lead somewhere", async () => {
      await open(path);
      const broken = await page.evaluate(
        `[...document.querySelectorAll("a[href^='#']")].map((link) => link.getAttribute("href").slice(1))
          .filter((id) => document.getElementById(decodeURIComponent(id)) === null)`,
      );
      expect(broken).toEqual([]);
      const away = (await page.evaluate(
        `[...new Set([...document.querySelectorAll("a:not([href^='#'])")].map((link) => link.href))]`,
      )) as string[];
      for (const address of away) {
        expect(address.startsWith(service.address), address).toBe(true);
        expect((await fetch(address)).status, address).toBe(200);
      }
      await page.close();
    });
  });
});
