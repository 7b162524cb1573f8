/** The answer of `infer` as text and as a table of one row a parameter. */
import type { Comparison } from "../inference/infer.ts";
import type { ParameterEstimate } from "../inference/posterior.ts";
import type { Prior } from "../inference/priors.ts";
import { abundanceLabel } from "../nucleosynthesis/labels.ts";
import { chiSquaredSurvival } from "../numerics/statistics.ts";
import type { Table } from "../numerics/table.ts";
import type { InferResults } from "./infer-result.ts";
import { provenanceLines, titleLine } from "./provenance-text.ts";
import type { Envelope } from "./result.ts";
import { alignColumns, formatEstimate, wrap } from "./text.ts";

const LABELS: Readonly<Record<string, string>> = {
  omegaB: "omega_b",
  eta10: "eta10",
  nEff: "N_eff",
  tauN: "tau_n [s]",
  xiE: "xi_e",
};

/** Unit of a parameter in tables. */
const UNITS: Readonly<Record<string, string>> = { tauN: "s" };

/** Figures of a number whose error is sigma: two figures of the error. */
function toError(value: number, sigma: number): string {
  const decimals = Math.max(0, 1 - Math.floor(Math.log10(sigma)));
  return value.toFixed(Math.min(12, decimals));
}

function parameterLines(parameters: InferResults["parameters"]): string[] {
  const row = (name: string, e: ParameterEstimate) => {
    const show = (x: number) => toError(x, e.sigma);
    return [
      `  ${LABELS[name] ?? name}`,
      show(e.best),
      `${show(e.lower68)} .. ${show(e.upper68)}`,
      `${show(e.lower95)} .. ${show(e.upper95)}`,
      `${show(e.mean)} ± ${toError(e.sigma, e.sigma)}`,
    ];
  };
  return [
    "Posterior of what is free",
    ...alignColumns([
      ["", "best", "68 %", "95 %", "mean"],
      ...Object.entries(parameters).map(([name, e]) => row(name, e)),
    ]),
  ];
}

/** A prior in words. */
function priorText({ key, min, max, gaussian, source }: Prior): string {
  const label = (LABELS[key] ?? key).replace(" [s]", "");
  if (gaussian === undefined) return `${label} flat from ${min} to ${max}`;
  const from = source === undefined || source === "given" ? "" : ` (${source})`;
  return `${label} ${formatEstimate(gaussian.value, gaussian.sigma)}`.replaceAll(" ", "\u00a0") + from;
}

function signed(x: number): string {
  return `${x < 0 ? "-" : "+"}${Math.abs(x).toFixed(Math.abs(x) < 9.95 ? 2 : 1)}`.replace("-0.00", "+0.00");
}

function comparisonRow(c: Comparison): string[] {
  const observed = formatEstimate(c.value, c.sigma);
  return [
    `  ${abundanceLabel(c.abundance)}`,
    `${c.kind === "upper-limit" ? "< " : ""}${observed}`,
    formatEstimate(c.predicted, Math.hypot(c.theorySigma, c.fitted ? 0 : c.posteriorSigma)),
    c.kind === "upper-limit" && c.tension === 0 ? "below" : signed(c.tension),
    c.fitted ? "fitted" : "compared",
  ];
}

function fitLines(results: InferResults): string[] {
  const { chi2, degreesOfFreedom: k, comparisons } = results;
  const judged =
    k > 0 ? `probability of a larger one ${chiSquaredSurvival(chi2, k).toPrecision(2)}` : "nothing is left to test";
  return [
    `Fit: chi2 ${chi2.toFixed(2)} for ${k} degree${Math.abs(k) === 1 ? "" : "s"} of freedom, ${judged}`,
    ...alignColumns([["", "observed", "predicted", "tension", ""], ...comparisons.map(comparisonRow)], [3]),
    ...wrap(
      "Tension: (predicted - observed)/sigma of observation and theory, at the best point; for what is only compared the " +
        "spread of the posterior counts too.",
      "  ",
    ),
  ];
}

function sourceLines(comparisons: readonly Comparison[]): string[] {
  return comparisons.flatMap((c) => {
    const basis = ["given", "read in the source"].includes(c.basis) ? "" : ` (${c.basis})`;
    return wrap(`${c.source}${basis}`, `  ${abundanceLabel(c.abundance).padEnd(8)}`, " ".repeat(10));
  });
}

function accuracyLines({ interpolation: i, posterior: p }: InferResults): string[] {
  const worst = Math.max(...Object.values(i.values));
  return [
    "Accuracy",
    ...wrap(
      `Abundances interpolated between ${i.points} runs and tried at ${i.checks} points in between: off by at most ` +
        `${worst.toExponential(1)}, ${i.inSigma.toPrecision(1)} of an observed error; theory errors by ${(100 * i.sigma).toPrecision(1)}\u00a0%. ` +
        "Nothing is extrapolated.",
      "  ",
    ),
    ...wrap(
      p.method === "grid"
        ? `Integrated on a grid (${p.evaluations} likelihoods): ends of intervals to ${p.error.toExponential(0)} sigma.`
        : `Sampled by an ensemble of walkers (${p.evaluations} likelihoods): ends of intervals to ${p.error.toPrecision(1)} sigma.`,
      "  ",
    ),
  ];
}

/** Text of an `infer` answer, at most 80 columns wide. */
export function inferText(answer: Envelope<InferResults>): string {
  const { results } = answer;
  const lines = [
    titleLine("Cosmology from observed abundances", answer.version),
    "",
    ...parameterLines(results.parameters),
    ...wrap(`Prior: ${results.priors.map(priorText).join("; ")}.`, "  ", "    "),
    "",
    ...fitLines(results),
    "",
    "Observed",
    ...sourceLines(results.comparisons),
    "",
    ...accuracyLines(results),
    "",
    "Calculation, at the best point",
    ...provenanceLines(answer),
  ];
  return `${lines.join("\n")}\n`;
}

/** One row a parameter: best, mean, sigma, ends of the central 68 % and 95 % intervals. */
export function inferTable({ parameters }: InferResults): Table {
  const numbers = ["best", "mean", "sigma", "lower68", "upper68", "lower95", "upper95"] as const;
  return {
    columns: ["parameter", "unit", ...numbers],
    units: ["", "", ...numbers.map(() => "")],
    rows: Object.entries(parameters).map(([name, e]) => [
      name,
      UNITS[name] ?? "1",
      ...numbers.map((column) => e[column]),
    ]),
  };
}

/** What the columns of {@link inferTable} mean. */
export function inferDescriptions(): Record<string, string> {
  return {
    best: "point of highest posterior",
    mean: "mean of the marginal posterior",
    sigma: "standard deviation of the marginal posterior",
    lower68: "16 % of the marginal posterior lie below",
    upper68: "84 % of the marginal posterior lie below",
    lower95: "2.5 % of the marginal posterior lie below",
    upper95: "97.5 % of the marginal posterior lie below",
  };
}

/** Fit and priors as lines for the header of CSV and ECSV. */
export function inferNotes(answer: Envelope<InferResults>): Record<string, string | readonly string[]> {
  const { chi2, degreesOfFreedom, comparisons, priors } = answer.results;
  return {
    fit: `chi2 ${chi2.toPrecision(6)} for ${degreesOfFreedom} degrees of freedom`,
    observed: comparisons.map(
      (c) =>
        `${c.abundance} ${c.kind === "upper-limit" ? "< " : ""}${c.value} +- ${c.sigma}, predicted ${c.predicted.toPrecision(6)} +- ${c.theorySigma.toPrecision(3)}, tension ${c.tension.toFixed(2)}, ${c.fitted ? "fitted" : "compared"}; ${c.source}`,
    ),
    priors: priors.map(priorText),
  };
}
