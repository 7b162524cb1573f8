/** The answer of `budget` as text and as a table of one row a parameter or rate. */
import { type ErrorSource, isAssumed, sortedShares } from "../model/error-budget.ts";
import { formatReaction } from "../nuclear/reaction-name.ts";
import { abundanceLabel } from "../nucleosynthesis/labels.ts";
import type { Table } from "../numerics/table.ts";
import type { BudgetResults } from "./budget-result.ts";
import { ASSUMED_MARK, provenanceLines, titleLine } from "./provenance-text.ts";
import type { Envelope } from "./result.ts";
import { alignColumns, formatEstimate, pad, wrap } from "./text.ts";

/** The abundances that the text shows; all of them stand in JSON, CSV and ECSV. */
const SHOWN = ["Yp", "dToH", "he3ToH", "li7ToH"] as const;
/** Sources below this share of the variance are summed up in the text. */
const LEAST_SHARE = 0.005;
/** Parameters whose sensitivities are all below this are counted only. */
const LEAST_SENSITIVITY = 0.005;
const PARAMETER_LABELS: Readonly<Record<string, string>> = { omegaB: "omega_b", tauN: "tau_n", nEff: "N_eff", G: "G" };

/** Printed name of a parameter or reaction. */
export function sourceLabel(name: string): string {
  return PARAMETER_LABELS[name] ?? formatReaction(name);
}

function percent(share: number): string {
  const value = 100 * share;
  return `${value >= 10 ? value.toFixed(0) : value === 0 ? "0" : value.toPrecision(2)} %`;
}

function shown(results: BudgetResults): (typeof SHOWN)[number][] {
  return SHOWN.filter((name) => results.variance[name] !== undefined);
}

function marked({ name }: ErrorSource, assumed: boolean): string {
  return `${sourceLabel(name)}${assumed ? ASSUMED_MARK : ""}`;
}

/** The answer to "what should be measured better next": theory beside observation, and the source that leads. */
function nextLines(results: BudgetResults): string[] {
  const rows = [["  ", "theory", "observed", "leading source", "share", "without it"]];
  const advice: string[] = [];
  for (const name of shown(results)) {
    const estimate = results.abundances[name]!;
    const relative = estimate.sigma / estimate.value;
    const observed = results.observed.find((each) => each.abundance === name);
    const measurement = observed?.kind === "measurement" ? observed : undefined;
    const [first] = sortedShares(results, name);
    const label = abundanceLabel(name);
    rows.push([
      `  ${label}`,
      percent(relative),
      measurement ? percent(measurement.sigma / measurement.value) : observed ? "a limit" : "-",
      marked(first.source, isAssumed(first.source)),
      percent(first.share),
      percent(relative * Math.sqrt(Math.max(0, 1 - first.share))),
    ]);
    const source = sourceLabel(first.source.name);
    const wanted = isAssumed(first.source)
      ? `the rate of ${source}, whose error is assumed,`
      : first.source.name in PARAMETER_LABELS
        ? `a better ${source}`
        : `the rate of ${source}`;
    if (measurement === undefined) advice.push(`${label}: no primordial measurement yet; in theory ${wanted} leads.`);
    else if (estimate.sigma > measurement.sigma * (estimate.value / measurement.value))
      advice.push(`${label}: theory is the less certain side; ${wanted} comes first.`);
    else advice.push(`${label}: the observed abundance itself; in theory ${wanted} leads.`);
  }
  return [
    "What to measure better next (relative errors, one standard deviation)",
    ...alignColumns(rows, [1, 2, 4, 5]),
    ...advice.flatMap((line) => wrap(line, "  ", "    ")),
  ];
}

function varianceLines(results: BudgetResults, abundance: (typeof SHOWN)[number]): string[] {
  const { value, sigma } = results.abundances[abundance]!;
  const shares = sortedShares(results, abundance);
  const leading = shares.filter(({ share }) => share >= LEAST_SHARE);
  const rest = shares.slice(leading.length);
  const head = `${abundanceLabel(abundance)} = ${formatEstimate(value, sigma)} (${percent(sigma / value)})`;
  const room = 34;
  return [
    "",
    head,
    ...leading.flatMap(({ source, share }) => {
      const start = `  ${pad(percent(share), 6, true)}  ${pad(percent(Math.sqrt(share) * (sigma / value)), 8, true)}  ${marked(source, isAssumed(source))}`;
      return wrap(source.citation, `${pad(start, room)}  `, " ".repeat(room + 2));
    }),
    `  ${pad(percent(rest.reduce((sum, { share }) => sum + share, 0)), 6, true)}  ${pad("", 8)}  ${rest.length} further sources`,
  ];
}

function sensitivityLines(results: BudgetResults): string[] {
  const names = shown(results);
  const all = Object.keys(results.sensitivities[names[0]]);
  const size = (parameter: string) =>
    Math.max(...names.map((name) => Math.abs(results.sensitivities[name][parameter])));
  const first = Object.keys(PARAMETER_LABELS);
  const rates = all.filter((name) => !first.includes(name) && size(name) >= LEAST_SENSITIVITY);
  const row = (parameter: string) => [
    `  ${sourceLabel(parameter)}`,
    ...names.map((name) => results.sensitivities[name][parameter].toFixed(3).replace(/^-(0\.0*)$/, "$1")),
  ];
  const rows = [["", ...names.map(abundanceLabel)], ...[...first, ...rates.sort((a, b) => size(b) - size(a))].map(row)];
  const hidden = all.length - first.length - rates.length;
  return [
    "Sensitivities d ln X/d ln p",
    ...alignColumns(
      rows,
      names.map((_, i) => i + 1),
    ),
    ...(hidden > 0 ? [`  ${hidden} further rates: all below ${LEAST_SENSITIVITY}`] : []),
    ...wrap(
      "omega_b (as eta), tau_n and each rate (both directions, all temperatures) by the adjoint of one run; G (at fixed " +
        "eta) by a central difference of 2\u00a0%, N_eff as 3 d ln X/d(delta-n).",
      "  ",
    ),
  ];
}

function correlationLines(results: BudgetResults): string[] {
  const names = shown(results);
  const { order, matrix } = results.correlation;
  const rows = names.map((name, i) => [
    `  ${abundanceLabel(name)}`,
    ...names.slice(0, i + 1).map((other) => matrix[order.indexOf(name)][order.indexOf(other)].toFixed(2)),
  ]);
  return [
    "Correlation of the theory errors",
    ...alignColumns(
      [["", ...names.map(abundanceLabel)], ...rows],
      names.map((_, i) => i + 1),
    ),
  ];
}

/** Text of a `budget` answer, at most 80 columns wide. */
export function budgetText(answer: Envelope<BudgetResults>): string {
  const { results } = answer;
  const lines = [
    titleLine("Error budget of the light elements", answer.version),
    "",
    ...nextLines(results),
    "",
    "Share of the variance, and the error of this source alone",
    ...shown(results)
      .flatMap((name) => varianceLines(results, name))
      .slice(1),
    ...wrap(
      `${ASSUMED_MARK} size of the error assumed (or from memory), not published: a placeholder that no measurement backs.`,
      "  ",
      "    ",
    ),
    "",
    ...sensitivityLines(results),
    "",
    ...correlationLines(results),
    "",
    ...wrap(
      `Observed: ${results.observed.map((o) => `${abundanceLabel(o.abundance)} ${o.source}`).join("; ")}`,
      "",
      "  ",
    ),
    "",
    "Calculation",
    ...provenanceLines(answer),
  ];
  return `${lines.join("\n")}\n`;
}

/**
 * One row a parameter or reaction: d ln X/d ln p of every abundance X, its share of X's variance (0 where it is no
 * source of error), where the size of its error comes from, and the paper.
 */
export function budgetTable(results: BudgetResults): Table {
  const abundances = Object.keys(results.sensitivities);
  const sources = new Map(results.sources.map((source) => [source.name, source]));
  const parameters = Object.keys(results.sensitivities[abundances[0]]);
  const columns = [
    "parameter",
    ...abundances.map((name) => `dln_${name}_dln_p`),
    ...abundances.map((name) => `${name}_variance_share`),
    "uncertainty_basis",
    "citation",
  ];
  const rows = parameters.map((parameter) => {
    const source = sources.get(parameter);
    return [
      parameter,
      ...abundances.map((name) => results.sensitivities[name][parameter]),
      ...abundances.map((name) => results.variance[name][parameter] ?? 0),
      source?.basis ?? "no source of error here",
      source?.citation ?? "",
    ];
  });
  return { columns, units: columns.map((_, i) => (i === 0 || i > 2 * abundances.length ? "" : "1")), rows };
}

/** What the columns of {@link budgetTable} mean. */
export function budgetDescriptions(results: BudgetResults): Record<string, string> {
  const meanings: Record<string, string> = {
    parameter: "omegaB (as eta), tauN, nEff (3 d/d(deltaNEff)), G (at fixed eta), n_p or reaction (both directions)",
    uncertainty_basis: "where the size of the error comes from: published, assumed, from memory, given",
    citation: "source of the recommended value",
  };
  for (const name of Object.keys(results.sensitivities)) {
    meanings[`dln_${name}_dln_p`] = `logarithmic sensitivity of ${name}`;
    meanings[`${name}_variance_share`] = `share of the variance of ln ${name}`;
  }
  return meanings;
}
