/** The answer of `scan` as text: a short table; every row goes to CSV, ECSV and JSON. */
import { formatReaction } from "../nuclear/reaction-name.ts";
import { abundanceLabel } from "../nucleosynthesis/labels.ts";
import { type CosmologyParameters, RANGES } from "../parameters/cosmology.ts";
import { provenanceLines, provenanceNotes, titleLine } from "./provenance-text.ts";
import type { Envelope } from "./result.ts";
import type { AxisResult, ScanResults } from "./sweep-result.ts";
import { alignColumns, formatConcise, formatNumber, wrap } from "./text.ts";

/** Rows of the short table. */
const SHORT_ROWS = 15;
/** The abundances that fit the width of a page. */
const SHOWN: readonly string[] = ["Yp", "dToH", "he3ToH", "li7ToH"];

/** Numbers of at most `most` rows, evenly spread, first and last included. */
function spread(rows: number, most: number): number[] {
  if (rows <= most) return Array.from({ length: rows }, (_, i) => i);
  return Array.from({ length: most }, (_, i) => Math.round((i * (rows - 1)) / (most - 1)));
}

/** An axis in words: what it is, its unit, how many values. */
export function axisLabel(axis: AxisResult): string {
  if (axis.key.startsWith("scale:")) return `factor on the rate of ${formatReaction(axis.key.slice("scale:".length))}`;
  const { meaning, unit } = RANGES[axis.key];
  return `${meaning.replace(/, instead of .*/, "")}${unit === "" ? "" : ` [${unit}]`}`;
}

/** Lines of the axes and of a short table. */
export function sweepLines(results: ScanResults): string[] {
  const { table, axes } = results;
  const shown = SHOWN.filter((name) => table.columns.includes(name));
  const withErrors = table.columns.includes(`${shown[0]}_sigma`);
  const cell = (row: readonly (number | string)[], name: string) => {
    const value = row[table.columns.indexOf(name)] as number;
    return withErrors
      ? formatConcise(value, row[table.columns.indexOf(`${name}_sigma`)] as number)
      : formatNumber(value);
  };
  const head = [...axes.map((axis) => axis.key), ...shown.map(abundanceLabel)];
  const numbers = spread(table.rows.length, SHORT_ROWS);
  const body = numbers.map((i) => {
    const row = table.rows[i];
    return [...axes.map((_, a) => formatNumber(row[a] as number)), ...shown.map((name) => cell(row, name))];
  });
  const rest = table.rows.length - numbers.length;
  const note =
    rest > 0
      ? `${numbers.length} of ${table.rows.length} rows; all, with every abundance, with --format csv, ecsv or json.`
      : `${withErrors ? "Errors in brackets are those of the last digits. " : ""}Every abundance with --format csv, ecsv or json.`;

  return [
    ...axes.map(
      (axis) =>
        `  ${axis.key}: ${axisLabel(axis)}, ${axis.count} values${axis.log ? " evenly spread in the logarithm" : ""}`,
    ),
    "",
    ...alignColumns(
      [head, ...body],
      head.map((_, i) => i),
    ).map((line) => `  ${line}`),
    "",
    ...wrap(note, "  "),
  ];
}

/** Text of a `scan` answer. */
export function scanText(answer: Envelope<ScanResults>): string {
  const lines = [
    titleLine("Abundances along parameters", answer.version),
    "",
    ...sweepLines(answer.results),
    "",
    "Calculation",
    ...provenanceLines(answer),
  ];
  return `${lines.join("\n")}\n`;
}

/** Keys that follow from one another: with one of them along an axis, none has a fixed value. */
const TOGETHER: readonly (readonly string[])[] = [
  ["omegaB", "omegaBSigma", "eta10"],
  ["nEff", "deltaNEff"],
  ["tauN", "tauNSigma"],
];

/** The cosmology of a scan or grid: only what is the same in every row. */
export function fixedCosmology(
  parameters: CosmologyParameters,
  axes: readonly { readonly key: string }[],
): CosmologyParameters {
  const varying = axes.flatMap(({ key }) => TOGETHER.find((keys) => keys.includes(key)) ?? [key]);
  return Object.fromEntries(
    Object.entries(parameters).filter(
      ([key]) => !varying.includes(key) || (key === "tauNSigma" && parameters.errors !== "none"),
    ),
  ) as unknown as CosmologyParameters;
}

/** Header of CSV and ECSV: provenance with the axes, and only such parameters that are the same in every row. */
export function sweepNotes(answer: Envelope<ScanResults>): Record<string, string | readonly string[]> {
  const { command, cosmology, ...rest } = provenanceNotes(answer);
  const varying = answer.results.axes.flatMap(({ key }) => TOGETHER.find((keys) => keys.includes(key)) ?? [key]);
  const fixed = (cosmology as string)
    .split(" ")
    .filter((item) => !varying.includes(item.split("=")[0]) || item.startsWith("tauNSigma="));
  const axes = answer.results.axes.map(
    (axis) => `${axis.key}: ${axisLabel(axis)}; ${axis.count} values${axis.log ? ", even in the logarithm" : ""}`,
  );
  return { command, axes, cosmology: fixed.join(" "), ...rest };
}

/** One line at the foot of a figure: the parameters that do not vary, and the program. */
export function sweepNote(answer: Envelope<ScanResults>): string {
  const { cosmology: c, provenance, results } = answer;
  const withErrors = results.table.columns.some((name) => name.endsWith("_sigma"));
  const varying = new Set(results.axes.map(({ key }) => key));
  const parts = [
    ...(varying.has("omegaB") || varying.has("eta10") ? [] : [`ω_b = ${c.omegaB}`]),
    ...(varying.has("nEff") || varying.has("deltaNEff") ? [] : [`N_eff = ${formatNumber(c.nEff, 4)}`]),
    ...(varying.has("tauN") ? [] : [`τ_n = ${c.tauN} s`]),
  ];
  return `${parts.join(", ")}; ${provenance.network}${withErrors ? "; bands ±1σ" : ""}; emberline ${answer.version}`;
}

/** What the columns of a scan or grid mean, for the header of ECSV. */
export function sweepDescriptions(results: ScanResults, definitions: Readonly<Record<string, string>>) {
  const meanings: Record<string, string> = {};
  for (const axis of results.axes) meanings[axis.key] = axisLabel(axis);
  for (const name of results.table.columns) {
    if (definitions[name] !== undefined) meanings[name] = definitions[name];
    const of = name.replace(/_sigma$/, "");
    if (of !== name) meanings[name] = `theory error of ${of}, one standard deviation`;
  }
  return meanings;
}
