/** The lower half of every text output: cosmology, corrections, rates, cost, warnings. */
import { formatReaction, parseReactionName } from "../nuclear/reaction-name.ts";
import type { CosmologyParameters } from "../parameters/cosmology.ts";
import { NUCLEOSYNTHESIS_CORRECTIONS } from "../parameters/cosmology.ts";
import type { Envelope, RateUsed } from "./result.ts";
import { alignColumns, displayWidth, formatEstimate, formatNumber, pad, TEXT_WIDTH, wrap } from "./text.ts";

/** Evaluation name of the fits that are taken as they stand; they are listed together. */
export const COLLECTION = "reaclib";
/** Mark of an uncertainty that no publication backs: assumed, or from memory. */
export const ASSUMED_MARK = "*";

/** The mark of a rate, empty where its uncertainty is published. */
function markOf(rate: RateUsed): string {
  return rate.uncertaintyBasis === "published" ? "" : ASSUMED_MARK;
}

/** What the mark means, in full if some are from memory; nothing where all uncertainties are published. */
function markLegend(rates: readonly RateUsed[]): string {
  const count = (basis: RateUsed["uncertaintyBasis"]) => rates.filter((rate) => rate.uncertaintyBasis === basis).length;
  const parts = [
    ...(count("assumed") > 0 ? [`assumed (${count("assumed")} of ${rates.length})`] : []),
    ...(count("from memory") > 0 ? [`from memory (${count("from memory")})`] : []),
  ];
  return parts.length > 0 ? ` (${ASSUMED_MARK} uncertainty ${parts.join(" or ")}, not published)` : "";
}

/** The same text, never broken between its words. */
function held(text: string): string {
  return text.replaceAll(" ", "\u00a0");
}

/** A labelled paragraph, its label in a column of its own. */
export function entry(label: string, text: string): string[] {
  return wrap(text, `  ${pad(label, 13)}`, " ".repeat(15));
}

function measured(value: number, sigma: number): string {
  return sigma > 0 ? formatEstimate(value, sigma) : String(value);
}

/**
 * The parameters in words; those at zero or at their neutral value are named only when set, those along an axis of a
 * scan (left out of the answer's cosmology) not at all.
 */
export function cosmologyLines(
  c: Partial<CosmologyParameters> & Pick<CosmologyParameters, "expansion" | "scales">,
): string[] {
  const parts = [
    ...(c.omegaB === undefined ? [] : [`omega_b ${measured(c.omegaB, c.omegaBSigma ?? 0)}`]),
    ...(c.eta10 === undefined ? [] : [`eta10 ${formatNumber(c.eta10)}`]),
    ...(c.nEff === undefined ? [] : [`N_eff ${formatNumber(c.nEff, 4)}`]),
    ...(c.tauN === undefined ? [] : [`tau_n ${measured(c.tauN, c.tauNSigma ?? 0)} s`]),
    ...(c.tCmb === undefined ? [] : [`T_CMB ${c.tCmb} K`]),
  ];
  for (const [name, value] of [
    ["xi_e", c.xiE],
    ["xi_mu", c.xiMu],
    ["xi_tau", c.xiTau],
  ] as const)
    if (value !== undefined && value !== 0) parts.push(`${name} ${value}`);
  const lines = entry("cosmology", parts.map(held).join(", "));
  if (c.expansion.trim() !== "1") lines.push(...entry("expansion", `H(T) times ${c.expansion}`));
  const scaled = Object.entries(c.scales).map(([id, factor]) =>
    held(`${formatReaction(parseReactionName(id))} × ${factor}`),
  );
  if (scaled.length > 0) lines.push(...entry("scaled", scaled.join(", ")));
  return lines;
}

/** Rates grouped by source: evaluations of their own one by one, the collection's reactions in one paragraph. */
function rateLines(rates: readonly RateUsed[]): string[] {
  const own = rates.filter((rate) => rate.evaluation !== COLLECTION);
  const rest = rates.filter((rate) => rate.evaluation === COLLECTION);
  const heads = alignColumns(
    own.map((rate) => [`  ${formatReaction(rate.reaction)}${markOf(rate)}`, rate.evaluation, ""]),
  );
  const room = Math.max(0, ...heads.map(displayWidth)) + 2;
  const lines = own.flatMap((rate, i) => wrap(rate.citation, pad(heads[i], room), " ".repeat(room)));
  if (rest.length > 0) {
    const sources = [...new Set(rest.map((rate) => rate.citation.split(";")[0]))];
    const label = `${own.length > 0 ? "and " : ""}${rest.length} from ${COLLECTION}, ${sources.join("; ")}:`;
    const names = rest.map((rate) => held(`${formatReaction(rate.reaction)}${markOf(rate)}`)).join(", ");
    lines.push(...wrap(`${label} ${names}`, "  ", "    "));
  }
  return lines;
}

/** Network, corrections, solver, rates and warnings of an answer. */
export function provenanceLines(answer: Envelope): string[] {
  const { provenance, solver, cosmology } = answer;
  const off = NUCLEOSYNTHESIS_CORRECTIONS.filter((name) => !provenance.corrections.includes(name));
  const cost = [
    `${solver.steps} steps`,
    `${solver.rejected} rejected`,
    `${solver.rhs} right-hand sides`,
    `${solver.jacobians} Jacobians`,
    `tolerance ${solver.tolerance.toExponential()}`,
    ...(solver.wall_ms === undefined ? [] : [`${Math.round(solver.wall_ms)} ms`]),
  ];
  const lines = [
    ...cosmologyLines(cosmology),
    ...entry("corrections", provenance.corrections.length > 0 ? provenance.corrections.join(", ") : "none"),
    ...(off.length > 0 ? entry("left out", off.join(", ")) : []),
    ...entry("constants", provenance.constants),
    ...entry("solver", cost.map(held).join(", ")),
    ...entry("network", `${provenance.network}: ${provenance.rates.length} rates and n ↔ p`),
    "",
    `Rates${markLegend(provenance.rates)}`,
    ...rateLines(provenance.rates),
  ];
  if (answer.warnings.length > 0) lines.push("", "Warnings", ...answer.warnings.flatMap((w) => wrap(w, "  ", "    ")));
  return lines;
}

/** Title line: what on the left, program and version on the right. */
export function titleLine(title: string, version: string): string {
  const right = `emberline ${version}`;
  return pad(title, TEXT_WIDTH - displayWidth(right)) + right;
}

/** One line of parameters and program, for the foot of a figure. */
export function noteLine(answer: Envelope): string {
  const { cosmology: c, provenance } = answer;
  const parts = [`ω_b = ${c.omegaB}`, `N_eff = ${formatNumber(c.nEff, 4)}`, `τ_n = ${c.tauN} s`];
  return `${parts.join(", ")}; network ${provenance.network}; emberline ${answer.version}`;
}

/** `REACTION=VALUE` of what was chosen by reaction, the reactions by their ids. */
function byReaction(chosen: Readonly<Record<string, string | number>>): string {
  return Object.entries(chosen)
    .map(([name, value]) => `${parseReactionName(name)}=${value}`)
    .join(" ");
}

/** Provenance as short lines, for the comments of CSV and the meta of ECSV. */
export function provenanceNotes(answer: Envelope): Record<string, string | readonly string[]> {
  const { provenance, cosmology: c } = answer;
  const fixed: Record<string, unknown> = { ...c };
  const cosmology = Object.entries(fixed)
    .filter(([, value]) => typeof value === "number" || (typeof value === "string" && value !== ""))
    .map(([key, value]) => `${key}=${value}`);
  return {
    command: `emberline ${answer.version} ${answer.command}`,
    cosmology: cosmology.join(" "),
    corrections: provenance.corrections.length > 0 ? provenance.corrections.join(" ") : "none",
    constants: provenance.constants,
    network: provenance.network,
    ...(Object.keys(c.evaluations).length > 0 ? { evaluations: byReaction(c.evaluations) } : {}),
    ...(Object.keys(c.scales).length > 0 ? { scales: byReaction(c.scales) } : {}),
    rates: provenance.rates.map(
      (rate) =>
        `${rate.reaction}: ${rate.evaluation}${rate.scale === undefined ? "" : ` x ${rate.scale}`}; ` +
        `${rate.citation}; uncertainty ${rate.uncertaintyBasis}`,
    ),
    ...(answer.warnings.length > 0 ? { warnings: answer.warnings } : {}),
  };
}
