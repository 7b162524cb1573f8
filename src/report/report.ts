/** The report: results of one cosmology and their charts -> one page of HTML that needs nothing else. */
import type { Observation } from "../inference/observations.ts";
import type { RecombinationResults } from "../model/recombination.ts";
import type { BudgetResults } from "../output/budget-result.ts";
import type { AbundanceResults, Envelope, HistoryResults } from "../output/result.ts";
import type { ScanResults } from "../output/sweep-result.ts";
import { formatNumber } from "../output/text.ts";
import { abundanceSection, diagramSection } from "./abundance-sections.ts";
import { budgetSection } from "./budget-section.ts";
import { calculationSection, parameterSection, ratesSection, sourcesSection } from "./calculation-sections.ts";
import { historySection } from "./history-section.ts";
import { html, type Markup, markup, NOTHING, type Section, sectionMarkup } from "./html.ts";
import { PAGE_STYLE } from "./page-style.ts";
import { recombinationSection } from "./recombination-section.ts";
import { symbols } from "./symbols.ts";

/** Measured baryon density beside the abundances. */
export interface ReportDensity {
  readonly omegaB: number;
  readonly sigma: number;
  readonly source: string;
}

/** What a report is made of. What is left out has no section. */
export interface ReportData {
  readonly abundances: Envelope<AbundanceResults>;
  readonly history?: Envelope<HistoryResults>;
  readonly budget?: Envelope<BudgetResults>;
  readonly diagram?: Envelope<ScanResults>;
  readonly recombination?: Envelope<RecombinationResults>;
  readonly observed: readonly Observation[];
  readonly density: ReportDensity;
  /** The command line that makes this report again. */
  readonly command: string;
}

/** Charts as svg files, by name; a section shows those it is given. */
export type ReportCharts = Readonly<Record<string, string>>;

/** Names of the charts that a report shows, by section. */
export const REPORT_CHARTS = {
  diagram: ["diagram"],
  history: ["temperature", "weak", "nuclides"],
  budget: ["budget"],
  recombination: ["ionisation", "visibility", "matter"],
} as const;

/**
 * The page. It loads nothing, so that it opens from a disk or an e-mail, prints, and can be read aloud.
 * @param charts svg files by name, see {@link REPORT_CHARTS}
 * @throws {RangeError} if a chart is no svg file
 */
export function reportPage(data: ReportData, charts: ReportCharts): string {
  const { abundances, command } = data;
  const { cosmology: c, version, provenance } = abundances;
  const sections: Section[] = [
    abundanceSection(data),
    ...(data.diagram === undefined ? [] : [diagramSection(data.diagram, data, charts)]),
    ...(data.history === undefined ? [] : [historySection(data.history, charts)]),
    ...(data.budget === undefined ? [] : [budgetSection(data.budget, charts)]),
    ...(data.recombination === undefined ? [] : [recombinationSection(data.recombination, charts)]),
    parameterSection(c),
    ratesSection(provenance),
    sourcesSection(data.observed, data.density),
    calculationSection(data),
  ];
  const title = `Light elements at ω_b = ${formatNumber(c.omegaB, 4)}`;
  const introduction =
    `Big Bang nucleosynthesis and recombination of one cosmology: η₁₀ = ${formatNumber(c.eta10)}, ` +
    `N_eff = ${formatNumber(c.nEff, 4)}, τ_n = ${c.tauN} s, network ${provenance.network}. Made by emberline ${version} with:`;
  const contents = sections.map(({ id, title: name }) => html`<li><a href="#${id}">${name}</a></li>\n`);
  const page = html`<!DOCTYPE html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta name="generator" content="emberline ${version}">
<title>${title}</title>
<style>
${PAGE_STYLE}</style>
</head>
<body>
<header>
<h1>${symbols(title)}</h1>
<p>${symbols(introduction)}</p>
<pre><code>${command}</code></pre>
</header>
<nav aria-label="Contents">
<ul>
${contents}</ul>
</nav>
<main>
${warningBox(data)}${sections.map(sectionMarkup)}</main>
<footer>
<p>All numbers on this page come from the calculation it describes. Errors are one standard deviation.</p>
</footer>
</body>
</html>
`;
  return markup(page);
}

function warningBox(data: ReportData): Markup {
  const answers = [data.abundances, data.history, data.budget, data.recombination];
  const warnings = [...new Set(answers.flatMap((answer) => answer?.warnings ?? []))];
  if (warnings.length === 0) return NOTHING;
  return html`<aside aria-labelledby="warnings-title">
<h2 id="warnings-title">Warnings</h2>
<ul>
${warnings.map((text) => html`<li>${text}</li>\n`)}</ul>
</aside>
`;
}
