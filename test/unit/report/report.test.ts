// The report: valid HTML that loads nothing, complete, of bounded size, the same at every call.
import { HtmlValidate } from "html-validate";
import { beforeAll, describe, expect, test } from "vitest";
import { loadRates } from "../../../src/node/load-rates.ts";
import { renderReport } from "../../../src/node/render-report.ts";
import { formatReaction } from "../../../src/nuclear/reaction-name.ts";
import { html } from "../../../src/report/html.ts";
import { type ReportData, reportPage } from "../../../src/report/report.ts";
import { estimate, fixed, number, symbols } from "../../../src/report/symbols.ts";
import { computeReport } from "../../../src/requests/report.ts";

const library = loadRates();
const COMMAND = "emberline report --network twelve --out 'a&b.html'";
let data: ReportData;
let page: string;
beforeAll(async () => {
  data = { ...(await computeReport({ network: "twelve" }, library)), command: COMMAND };
  page = renderReport(data, library);
});

/** What is read: without style, markup and charts. */
function words(markup: string): string {
  return markup
    .replace(/<style>[\s\S]*?<\/style>|<svg[\s\S]*?<\/svg>/g, " ")
    .replace(/<[^>]+>/g, " ")
    .replace(/&amp;/g, "&")
    .replace(/\s+/g, " ");
}

test("it is valid HTML", async () => {
  const validator = new HtmlValidate({ root: true, extends: ["html-validate:recommended", "html-validate:document"] });
  const { results } = await validator.validateString(page);
  expect(results.flatMap(({ messages }) => messages.map((m) => `${m.line}: ${m.ruleId}: ${m.message}`))).toEqual([]);
});

test("it loads nothing and runs nothing", () => {
  expect(page).not.toMatch(/<script|<link|<iframe|<object|<img|@import|@font-face/);
  expect(page.match(/(?:src|href)="[^"#][^"]*"/g)).toBeNull();
  expect(page.match(/url\((?!#)/g)).toBeNull();
});

test("it is at most 1.5 MB, also with the largest network's citations", () => {
  // The charts make most of it and do not depend on the network; 180 citations add 40 kB.
  expect(page.length).toBeLessThan(1_300_000);
});

test("it is the same at every call", () => {
  expect(renderReport(data, library)).toBe(page);
});

test("it has every abundance, rate, citation, parameter and observation, and the command", () => {
  const text = words(page);
  for (const rate of data.abundances.provenance.rates) {
    expect(text).toContain(formatReaction(rate.reaction));
    expect(text).toContain(rate.citation);
  }
  for (const key of Object.keys(data.abundances.cosmology)) expect(page).toContain(`<code>${key}</code>`);
  for (const { source } of data.observed) expect(text).toContain(source);
  expect(text).toContain(data.density.source);
  expect(text).toContain(COMMAND);
  for (const { source } of data.recombination?.provenance.recombination ?? []) expect(text).toContain(source);
});

test("every chart has a name and a description with numbers of this cosmology", () => {
  const charts = [...page.matchAll(/<svg[\s\S]*?<\/svg>/g)].map(([chart]) => chart);
  expect(charts.length).toBe(8);
  const ids = [...page.matchAll(/\bid="([^"]+)"/g)].map(([, id]) => id);
  expect(new Set(ids).size).toBe(ids.length);
  for (const chart of charts) {
    expect(chart).toMatch(/role="img"/);
    expect(/<desc[^>]*>([^<]*)<\/desc>/.exec(chart)?.[1]).toMatch(/\d/);
  }
});

test("what is not there has no section", () => {
  const { abundances, observed, density, command } = data;
  const short = reportPage({ abundances, observed, density, command }, {});
  expect(short).not.toContain('id="budget"');
  expect(short).not.toContain("<svg");
  expect(short).toContain('id="rates"');
});

test("without errors there is no budget, and a cosmology far away has its diagram", async () => {
  const plain = await computeReport({ network: "twelve", errors: "none", eta10: 20 }, library);
  expect(plain.budget).toBeUndefined();
  expect(plain.diagram?.results.table.rows.at(-1)?.[0]).toBe(40);
  expect(renderReport({ ...plain, command: "x" }, library)).toContain('id="diagram"');
});

describe("numbers and symbols", () => {
  test.each([
    [estimate(2.439e-5, 0.036e-5), "(2.439 ± 0.036) × 10<sup>−5</sup>"],
    [estimate(0.24684, 0.00011), "0.24684 ± 0.00011"],
    [number(7.2e-15, 2), "7.2 × 10<sup>−15</sup>"],
    [number(-0.25, 2), "−0.25"],
    [symbols("Y_p and N_eff < 3He"), "Y<sub>p</sub> and N<sub>eff</sub> &lt; ³He"],
    [symbols("z_star, x_e, T_m/T_r"), "z<sub>star</sub>, x<sub>e</sub>, T<sub>m</sub>/T<sub>r</sub>"],
    [html`<p>${'a<b>&"'}</p>`, "<p>a&lt;b&gt;&amp;&quot;</p>"],
  ])("%o", ({ html: made }, wanted) => {
    expect(made).toBe(wanted);
  });

  test("no negative zero", () => {
    expect([fixed(-0.0001, 2), fixed(-0.5, 1), fixed(0, 3)]).toEqual(["0.00", "−0.5", "0.000"]);
  });
});
