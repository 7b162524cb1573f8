/** The answer of `abundances` as text and as a table of one row. */

import { type AbundanceName, DEFINITIONS, ORDER_OF_MAGNITUDE } from "../nucleosynthesis/abundances.ts";
import { abundanceLabel } from "../nucleosynthesis/labels.ts";
import type { Table } from "../numerics/table.ts";
import { ASSUMED_MARK, provenanceLines, titleLine } from "./provenance-text.ts";
import type { AbundanceResults, Envelope, Estimate } from "./result.ts";
import { alignColumns, formatEstimate, formatNumber, wrap } from "./text.ts";

/** Mark of a value that is an order of magnitude only. */
const ROUGH_MARK = "~";
/** Share of the variance from assumed uncertainties above which an error is marked. */
const MARKED_SHARE = 0.5;
/** The abundances that are observed: their correlations are printed. */
const OBSERVED: readonly string[] = ["Yp", "dToH", "he3ToH", "li7ToH"];

function estimates(results: AbundanceResults): [AbundanceName, Estimate][] {
  return Object.entries(results.abundances) as [AbundanceName, Estimate][];
}

/** One line an abundance; those of nuclides that the network does not hold are 0 and stay out. */
function estimateLines(results: AbundanceResults): string[] {
  const present = estimates(results).filter(([, estimate]) => estimate.value !== 0);
  const share = (name: AbundanceName) => results.assumedVarianceShare?.[name] ?? 0;
  const assumed = present.some(([name]) => share(name) > MARKED_SHARE);
  const rough = present.some(([name]) => ORDER_OF_MAGNITUDE.includes(name));
  const rows = present.map(([name, estimate]) => [
    `  ${abundanceLabel(name)}`,
    `${ORDER_OF_MAGNITUDE.includes(name) ? ROUGH_MARK : rough ? " " : ""}${formatEstimate(estimate.value, estimate.sigma)}` +
      (share(name) > MARKED_SHARE ? ASSUMED_MARK : ""),
    DEFINITIONS[name],
  ]);
  const plain = formatNumber(results.nEffComputed);
  rows.push(["  N_eff", rough ? ` ${plain}` : plain, "effective neutrino number that results"]);
  return [
    ...alignColumns(rows),
    ...(assumed
      ? wrap(
          `${ASSUMED_MARK} most of this error is due to rates whose uncertainty is assumed, not published`,
          "  ",
          "    ",
        )
      : []),
    ...(rough ? wrap(`${ROUGH_MARK} order of magnitude only`, "  ") : []),
  ];
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

/** How well samples know the errors that are quoted. */
function samplingLines({ sampling, abundances }: AbundanceResults): string[] {
  if (sampling === undefined) return [];
  const known = OBSERVED.flatMap((name) => {
    const { sigma } = abundances[name as AbundanceName] ?? {};
    if (sigma === undefined || !(sigma > 0)) return [];
    const share = (100 * sampling.sigmaError[name]) / sigma;
    return [`${abundanceLabel(name)}\u00a0${share.toPrecision(1)}\u00a0%`];
  });
  return wrap(`${sampling.samples} samples know the errors quoted to ${known.join(", ")}.`, "  ");
}

/** Text of an `abundances` answer, at most 80 columns wide. */
export function abundancesText(answer: Envelope<AbundanceResults>): string {
  const lines = [
    titleLine("Light-element abundances", answer.version),
    "",
    ...estimateLines(answer.results),
    ...correlationLines(answer.results.correlation),
    ...quantileLines(answer.results.quantiles),
    ...samplingLines(answer.results),
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
    meanings[name] = `${DEFINITIONS[name]}${ORDER_OF_MAGNITUDE.includes(name) ? "; order of magnitude only" : ""}`;
    const share = results.assumedVarianceShare?.[name] ?? 0;
    meanings[`${name}_sigma`] =
      `theory error of ${name}, one standard deviation` +
      (share > MARKED_SHARE ? `, ${(100 * share).toFixed(0)} per cent of its variance from assumed uncertainties` : "");
  }
  return meanings;
}
