// report from the shell: the written page in a browser, without a network, by the rules of accessibility, wide and narrow.
import { existsSync, readFileSync } from "node:fs";
import { createRequire } from "node:module";
import { join } from "node:path";
import { type Browser, chromium } from "playwright-core";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { emberline, workFolder } from "./built-command.ts";

const folder = workFolder();
const path = join(folder, "report.html");
let written: Awaited<ReturnType<typeof emberline>>;
beforeAll(async () => {
  written = await emberline(folder, ["report", "--network", "twelve", "--omega-b", "0.0224", "--out", "report.html"]);
});

test("it writes one file that names its command", () => {
  expect(written).toMatchObject({ status: 0, out: "", err: "" });
  const page = readFileSync(path, "utf8");
  expect(page).toContain("<code>emberline report --network twelve --omega-b 0.0224 --out report.html</code>");
  expect(page.length).toBeLessThan(1_500_000);
});

test("without --out the page goes to standard output, the same bytes but for the command", async () => {
  const { out } = await emberline(folder, ["report", "--network", "twelve", "--omega-b", "0.0224"]);
  const page = readFileSync(path, "utf8");
  expect(out).toBe(page.replace(" --out report.html</code>", "</code>"));
});

test("what cannot be is refused with one line", async () => {
  for (const args of [
    ["--omega-b", "-1"],
    ["--format", "json"],
    ["--out", "/nonexistent/x.html"],
    ["--network", "x"],
  ]) {
    const { status, err, out } = await emberline(folder, ["report", ...args]);
    expect([status, out, err.trim().split("\n").length], err).toEqual([2, "", 1]);
  }
});

const BROWSER = ["/usr/bin/chromium", "/usr/bin/chromium-browser", "/usr/bin/google-chrome"].find((file) =>
  existsSync(file),
);
/** On the machine that checks every change the browser must be there. */
const needed = process.env.CI !== undefined;

describe.skipIf(BROWSER === undefined && !needed)("in a browser (Chromium)", () => {
  let browser: Browser;
  beforeAll(async () => {
    browser = await chromium.launch({
      executablePath: BROWSER ?? "/usr/bin/chromium",
      args: ["--no-sandbox", "--disable-gpu", "--disable-quic", "--no-first-run", "--disable-background-networking"],
    });
  });
  afterAll(() => browser?.close());

  test.each([
    ["wide", 1280],
    ["narrow", 360],
  ])("no rule of accessibility is broken, nothing is asked of a network, nothing sticks out: %s", async (_, width) => {
    const context = await browser.newContext({ viewport: { width, height: 900 }, offline: true });
    const page = await context.newPage();
    const asked: string[] = [];
    const said: string[] = [];
    page.on("request", (request) => asked.push(request.url()));
    page.on("console", (message) => said.push(message.text()));
    await page.goto(`file://${path}`);
    await page.addScriptTag({ path: createRequire(import.meta.url).resolve("axe-core/axe.min.js") });
    const { violations, passes } = (await page.evaluate(
      "axe.run(document).then(({ violations, passes }) => ({ passes: passes.length, violations: violations.map((v) => v.id + ': ' + v.nodes[0].html) }))",
    )) as { violations: string[]; passes: number };
    expect(violations).toEqual([]);
    expect(passes).toBeGreaterThan(20);
    expect(asked).toEqual([`file://${path}`]);
    expect(said).toEqual([]);
    expect(await page.evaluate("document.documentElement.scrollWidth")).toBeLessThanOrEqual(width);
    await context.close();
  });

  test("it prints on a few sheets, with its charts", async () => {
    const page = await browser.newPage();
    await page.goto(`file://${path}`);
    const pdf = (await page.pdf({ format: "A4" })).toString("latin1");
    const sheets = pdf.match(/\/Type\s*\/Page\b/g)?.length ?? 0;
    expect(sheets).toBeGreaterThan(4);
    expect(sheets).toBeLessThan(16);
    await page.close();
  });
});
