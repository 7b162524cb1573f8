/** The answer of `abundances` as text and as a table of one row. */

import { type AbundanceName, DEFINITIONS } from "../nucleosynthesis/abundances.ts";
import { abundanceLabel } from "../nucleosynthesis/labels.ts";
import type { Table } from "../numerics/table.ts";
import { provenanceLines, titleLine } from "./provenance-text.ts";
import type { AbundanceResults, Envelope, Estimate } from "./result.ts";
import { alignColumns, formatEstimate, formatNumber } from "./text.ts";

/** The abundances that are observed: their correlations are printed. */
const OBSERVED: readonly string[] = ["Yp", "dToH", "he3ToH", "li7ToH"];

function estimates(results: AbundanceResults): [AbundanceName, Estimate][] {
  return Object.entries(results.abundances) as [AbundanceName, Estimate][];
}

/** One line an abundance; those of nuclides that the network does not hold are 0 and stay out. */
function estimateLines(results: AbundanceResults): string[] {
  const present = estimates(results).filter(([, estimate]) => estimate.value !== 0);
  const rows = present.map(([name, estimate]) => [
    `  ${abundanceLabel(name)}`,
    formatEstimate(estimate.value, estimate.sigma),
    DEFINITIONS[name],
  ]);
  rows.push(["  N_eff", formatNumber(results.nEffComputed), "effective neutrino number that results"]);
  return alignColumns(rows);
}

function correlationLines(correlation: AbundanceResults["correlation"]): string[] {
  if (correlation === undefined) return [];
  const { order, matrix } = correlation;
  const shown = OBSERVED.filter((name) => order.includes(name));
  const head = ["", ...shown.map(abundanceLabel)];
  const rows = shown.map((name, i) => [
    `  ${abundanceLabel(name)}`,
    ...shown.slice(0, i + 1).map((other) => matrix[order.indexOf(name)][order.indexOf(other)].toFixed(2)),
  ]);
  const columns = head.map((_, i) => i).slice(1);
  return ["", "Correlation of the theory errors", ...alignColumns([head, ...rows], columns)];
}

function quantileLines(quantiles: AbundanceResults["quantiles"]): string[] {
  if (quantiles === undefined) return [];
  const levels = Object.keys(Object.values(quantiles)[0] ?? {});
  const head = ["", ...levels.map((level) => `${Number(level) * 100} %`)];
  const rows = Object.entries(quantiles).map(([name, byLevel]) => [
    `  ${abundanceLabel(name)}`,
    ...levels.map((level) => formatNumber(byLevel[level])),
  ]);
  const columns = head.map((_, i) => i).slice(1);
  return ["", "Quantiles of the samples", ...alignColumns([head, ...rows], columns)];
}

/** Text of an `abundances` answer, at most 80 columns wide. */
export function abundancesText(answer: Envelope<AbundanceResults>): string {
  const lines = [
    titleLine("Light-element abundances", answer.version),
    "",
    ...estimateLines(answer.results),
    ...correlationLines(answer.results.correlation),
    ...quantileLines(answer.results.quantiles),
    "",
    "Calculation",
    ...provenanceLines(answer),
  ];
  return `${lines.join("\n")}\n`;
}

/** One row: every abundance, its error as NAME_sigma beside it, and nEffComputed. All are pure numbers. */
export function abundancesTable(results: AbundanceResults): Table {
  const columns: string[] = [];
  const row: number[] = [];
  for (const [name, { value, sigma }] of estimates(results)) {
    columns.push(name);
    row.push(value);
    if (sigma !== undefined) {
      columns.push(`${name}_sigma`);
      row.push(sigma);
    }
  }
  columns.push("nEffComputed");
  row.push(results.nEffComputed);
  return { columns, units: columns.map(() => "1"), rows: [row] };
}

/** What the columns of {@link abundancesTable} mean. */
export function abundancesDescriptions(results: AbundanceResults): Record<string, string> {
  const meanings: Record<string, string> = { nEffComputed: "effective neutrino number that results" };
  for (const [name] of estimates(results)) {
    meanings[name] = DEFINITIONS[name];
    meanings[`${name}_sigma`] = `theory error of ${name}, one standard deviation`;
  }
  return meanings;
}
