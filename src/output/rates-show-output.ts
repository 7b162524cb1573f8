/** The answer of `rates show` as text: the fields of the file, what detailed balance makes of it, a table. */
import { formatReaction } from "../nuclear/reaction-name.ts";
import { ASSUMED_MARK, titleLine } from "./provenance-text.ts";
import type { RatesShowResults } from "./rates-result.ts";
import type { Envelope } from "./result.ts";
import { alignColumns, counted, formatNumber, pad, wrap } from "./text.ts";

/** Mark of a temperature outside the range that the source claims. */
const BEYOND_MARK = "!";

/** A labelled paragraph, its label in a column of its own. */
function field(label: string, text: string | undefined): string[] {
  return text === undefined ? [] : wrap(text, `  ${pad(label, 13)}`, " ".repeat(15));
}

/** Units as they are written in text: `cm3/(mol s)`, `1/s`. */
export function unitText(unit: string): string {
  return unit.replaceAll(" / ", "/");
}

function claimText({ validT9: [low, high], tableT9, tableRows, kind }: RatesShowResults): string {
  const claim = `T9 = ${low} to ${high} claimed by the source`;
  if (tableT9 === undefined) return kind === "decay" ? "at all temperatures" : `${claim}; held above T9 = 10`;
  const [first, last] = tableT9;
  const beyond = [...(first < low ? [`below ${low}`] : []), ...(last > high ? [`above ${high}`] : [])];
  return (
    `${claim}; ${tableRows} rows from ${first} to ${last}, zero below and held above` +
    (beyond.length > 0
      ? `: rows ${beyond.join(" and ")} are used beyond the claim (marked ${BEYOND_MARK} in the table)`
      : "")
  );
}

function balanceText({ detailedBalance, halfLife_s, equation }: RatesShowResults): string {
  if (halfLife_s !== undefined) return `none: ${equation} is weak; half-life ${formatNumber(halfLife_s)} s`;
  if (detailedBalance === undefined) return "none: more than three products hardly ever meet";
  const { lnConstant, power, qOverK_GK } = detailedBalance;
  const factor = Math.exp(lnConstant);
  const temperature = power === 0 ? "" : ` T9^${power}`;
  return (
    `rate times ${formatNumber(factor)}${temperature} exp(${formatNumber(-qOverK_GK)}/T9), from masses and spins; ` +
    "counts pairs as the rate does, without 1/(1 + delta)"
  );
}

function networksText({ networks, usedBy, evaluation }: RatesShowResults): string {
  if (networks.length === 0) return "none holds this reaction";
  if (usedBy.length === 0) return `none uses ${evaluation}; the reaction is in ${networks.join(", ")}`;
  const rest = networks.filter((name) => !usedBy.includes(name));
  return usedBy.join(", ") + (rest.length > 0 ? `; with another evaluation in ${rest.join(", ")}` : "");
}

function tableLines({ table }: RatesShowResults): string[] {
  const reversible = table.columns.includes("reverse_rate");
  const claim = table.columns.indexOf("claim");
  const unit = (name: string) => unitText(table.units[table.columns.indexOf(name)]);
  const heads = [
    ["T9", "rate", "f_u", ...(reversible ? ["reverse rate", "ln(reverse/rate)"] : []), ""],
    ["[GK]", `[${unit("rate")}]`, "", ...(reversible ? [`[${unit("reverse_rate")}]`, ""] : []), ""],
  ];
  const rows = table.rows.map((row) => [
    String(row[0]),
    formatNumber(row[1] as number),
    (row[2] as number).toFixed(4),
    ...(reversible ? [formatNumber(row[3] as number), formatNumber(row[4] as number)] : []),
    row[claim] === "inside" ? "" : BEYOND_MARK,
  ]);
  return alignColumns([...heads, ...rows], reversible ? [0, 1, 2, 3, 4] : [0, 1, 2]).map((line) => `  ${line}`);
}

/** Text of a `rates show` answer, at most 80 columns wide. */
export function ratesShowText(answer: Envelope<RatesShowResults>): string {
  const { results } = answer;
  const q = results.qValueFromMasses_keV;
  const assumed = results.uncertaintyBasis !== "published";
  const others = results.evaluations.filter((name) => name !== results.evaluation);
  const lines = [
    titleLine(`Rate of ${formatReaction(results.reaction)}: ${results.evaluation}`, answer.version),
    "",
    ...field("reaction", `${results.equation} (${results.reaction})`),
    ...field("used by", networksText(results)),
    ...field("others", others.length > 0 ? others.join(", ") : "no other evaluation in the library"),
    ...field("citation", results.citation),
    ...field("doi", results.doi),
    ...field("origin", results.origin),
    ...field("basis", results.basis),
    ...field(
      "uncertainty",
      `${results.uncertaintyBasis}${assumed ? ASSUMED_MARK : ""}, typical f_u ${results.factorUncertainty.toFixed(4)} (mean over T9 0.1 to 1)`,
    ),
    ...field("kind", results.terms ? `reaclib, ${counted(results.terms.length, "term")}` : results.kind),
    ...field("validity", claimText(results)),
    ...field(
      "Q-value",
      `${q.toFixed(3)} ± ${formatNumber(results.qValueSigma_keV, 2)} keV from the mass table; the file says ${results.qValue_keV} keV`,
    ),
    ...field("reverse rate", balanceText(results)),
    ...field("note", results.note),
    ...field("entered", results.entered),
    ...field("file", results.file),
    "",
    ...tableLines(results),
    ...(assumed ? ["", ...wrap(`${ASSUMED_MARK} uncertainty ${results.uncertaintyBasis}, not published`, "  ")] : []),
  ];
  return `${lines.join("\n")}\n`;
}

/** What the columns of the table are. */
export function ratesShowDescriptions(): Record<string, string> {
  return {
    T9: "temperature",
    rate: "forward rate N_A^(k-1)<sigma v> of k reactants, without 1/(1 + delta)",
    f_u: "factor uncertainty exp(sigma) of a lognormal",
    reverse_rate: "by detailed balance from masses and spins; per nucleus where one product breaks up",
    ln_reverse_over_forward: "natural logarithm of reverse over forward rate",
    claim: "whether the temperature is inside, below or above the range that the source claims",
  };
}

/** Header of CSV and ECSV: what the table is of. */
export function ratesShowNotes({ version, results }: Envelope<RatesShowResults>): Record<string, string> {
  return {
    command: `emberline ${version} rates show`,
    reaction: results.equation,
    evaluation: results.evaluation,
    citation: results.citation,
    origin: results.origin,
    uncertainty_basis: results.uncertaintyBasis,
    valid_T9: results.validT9.join(" "),
    ...(results.note ? { note: results.note } : {}),
  };
}
