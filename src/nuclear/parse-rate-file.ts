/** Rate file text -> RateTable, or RateFileError naming file, line and problem: a strict reader of our restricted ECSV. */
import { InputError } from "../numerics/check.ts";
import type { TextFile } from "./csv-rows.ts";
import type { NuclideTable } from "./nuclide.ts";
import { parseEquation, parseReactionId, qValueMeV, type Reaction } from "./reaction.ts";
import { RateFileError, type Row, readEcsv } from "./read-ecsv.ts";

export { RateFileError } from "./read-ecsv.ts";

export const RATE_KINDS = ["table", "reaclib", "decay"] as const;
export const BASES = ["experiment", "evaluation", "theory", "fit", "estimate"] as const;
export const UNCERTAINTY_BASES = ["published", "assumed", "from memory"] as const;
/** Largest difference between a file's q_value_keV and the mass table [keV]: beyond it the reaction is mistyped. */
export const Q_TOLERANCE_KEV = 5;

/** One reaction in one evaluation, as its file gives it. Rates are N_A<sigma v> without 1/(1 + delta). */
export interface RateTable {
  readonly reaction: Reaction;
  /** firstauthorYEAR: the file's name without ending. */
  readonly evaluation: string;
  /** Path as shown in messages. */
  readonly file: string;
  readonly kind: (typeof RATE_KINDS)[number];
  readonly citation: string;
  readonly doi?: string;
  readonly origin: string;
  readonly basis?: (typeof BASES)[number];
  readonly uncertaintyBasis: (typeof UNCERTAINTY_BASES)[number];
  readonly qValueKeV: number;
  /** Where the table has rows [GK]; tables only. */
  readonly tableT9?: readonly [number, number];
  /** What the source claims [GK]. */
  readonly validT9: readonly [number, number];
  readonly note?: string;
  readonly entered?: string;
  /** kind table: temperatures [GK], increasing; else empty. */
  readonly T9: Float64Array;
  /** kind table: N_A^(k-1)<sigma v> of k reactants [cm^(3(k-1)) mol^(1-k) s^-1]; kind decay: one value [s^-1]. */
  readonly rate: Float64Array;
  /** Factor uncertainty exp(sigma): one per row of a table, else one. */
  readonly factorUncertainty: Float64Array;
  /** kind reaclib: seven coefficients a0 ... a6 per term. */
  readonly terms: readonly (readonly number[])[];
  /** All key: value lines of the header. */
  readonly meta: Readonly<Record<string, string>>;
}

/** Unit of the rate of k reactants, in Astropy's notation. */
export function rateUnit(reactantCount: number): string {
  return ["1 / s", "cm3 / (mol s)", "cm6 / (mol2 s)"][reactantCount - 1];
}

/** What the folder and file name say: `.../t-d_n-he4/desouza2019.ecsv`. */
function namesFromPath(file: string): { folder: string; evaluation: string } {
  const match = /([^/\\]+)[/\\]([^/\\]+)\.ecsv$/.exec(file);
  if (!match) throw new RateFileError(file, 1, "a rate file lies in its reaction's folder and ends in .ecsv");
  if (!/^[a-z0-9]+(-[a-z0-9]+)*$/.test(match[2]))
    throw new RateFileError(
      file,
      1,
      `evaluation name ${match[2]}: use lower-case letters, digits and single dashes (firstauthorYEAR)`,
    );
  return { folder: match[1], evaluation: match[2] };
}

const COLUMNS = {
  table: ["T9", "rate", "f_u"],
  reaclib: ["a0", "a1", "a2", "a3", "a4", "a5", "a6"],
  decay: ["rate"],
} as const;

/**
 * Parses and checks one rate file.
 * @param text content of the file
 * @param file its path; the last folder must be the reaction's id, the name the evaluation
 * @param nuclides the mass table
 * @throws {RateFileError} for everything STYLE of the format forbids: unknown nuclide, A or Z not conserved, reaction that
 *   does not belong in this folder, Q off the mass table by more than 5 keV, missing key, wrong column or unit, ragged or
 *   non-numeric row, T9 not increasing, rate <= 0, f_u < 1, rows that do not span table_T9
 */
export function parseRateFile({ text, file }: TextFile, nuclides: NuclideTable): RateTable {
  const { folder, evaluation } = namesFromPath(file);
  const { columns, meta, metaLine, rows } = readEcsv(file, text);
  const fail = (line: number, problem: string): never => {
    throw new RateFileError(file, line, problem);
  };
  const lineOf = (key: string) => meta.get(key)?.line ?? metaLine;
  const need = (key: string): string => meta.get(key)?.value ?? fail(metaLine, `${key} is missing from the header`);
  const choice = <T extends string>(key: string, allowed: readonly T[]): T => {
    const value = need(key);
    return allowed.includes(value as T)
      ? (value as T)
      : fail(lineOf(key), `${key} = ${value}: accepted are ${allowed.join(", ")}`);
  };
  const number = (key: string): number => {
    const value = Number(need(key));
    return Number.isFinite(value) ? value : fail(lineOf(key), `${key} = ${need(key)}: must be a number`);
  };
  const range = (key: string): readonly [number, number] => {
    const parts = need(key).split(/\s+/).map(Number);
    const ok = parts.length === 2 && parts.every(Number.isFinite) && parts[0] >= 0 && parts[1] > parts[0];
    return ok
      ? [parts[0], parts[1]]
      : fail(lineOf(key), `${key} = ${need(key)}: must be two increasing temperatures in GK`);
  };

  const kind = choice("kind", RATE_KINDS);
  const reaction = readReaction(file, lineOf("reaction"), need("reaction"), folder, nuclides);
  if ((kind === "decay") !== reaction.isDecay)
    fail(lineOf("kind"), `kind = ${kind}: ${reaction.equation} is ${reaction.isDecay ? "a decay" : "no decay"}`);
  if (reaction.reactants.length > 3) fail(lineOf("reaction"), "more than three reactants are not supported");
  const citation = need("citation");
  const origin = need("origin");
  const uncertaintyBasis = choice("uncertainty_basis", UNCERTAINTY_BASES);
  const basis = meta.has("basis") ? choice("basis", BASES) : undefined;
  const validT9 = range("valid_T9");
  const qValueKeV = number("q_value_keV");
  const qFromMasses = 1000 * qValueMeV(reaction, nuclides);
  if (Math.abs(qValueKeV - qFromMasses) > Q_TOLERANCE_KEV)
    fail(
      lineOf("q_value_keV"),
      `q_value_keV = ${qValueKeV}: the mass table gives ${qFromMasses.toFixed(2)} keV for ${reaction.equation}; check reaction and Q`,
    );

  const wanted: readonly string[] = COLUMNS[kind];
  if (columns.map((c) => c.name).join(" ") !== wanted.join(" "))
    fail(4, `columns are ${columns.map((c) => c.name).join(" ")}; kind ${kind} has ${wanted.join(" ")}`);
  for (const column of columns) {
    const unit = { T9: "GK", rate: rateUnit(reaction.reactants.length) }[column.name] ?? "";
    if (column.unit !== unit) fail(column.line, `unit of ${column.name} is \`${column.unit}\`; must be \`${unit}\``);
  }
  const common = { reaction, evaluation, file, kind, citation, origin, basis, uncertaintyBasis, qValueKeV, validT9 };
  const optional = { doi: meta.get("doi")?.value, note: meta.get("note")?.value, entered: meta.get("entered")?.value };
  const plainMeta = Object.fromEntries([...meta].map(([key, { value }]) => [key, value]));
  if (kind === "table") {
    const tableT9 = range("table_T9");
    checkTableRows(file, rows, tableT9, lineOf("table_T9"));
    const column = (k: number) => Float64Array.from(rows, (row) => row.values[k]);
    return {
      ...common,
      ...optional,
      tableT9,
      T9: column(0),
      rate: column(1),
      factorUncertainty: column(2),
      terms: [],
      meta: plainMeta,
    };
  }
  const fU = number("f_u");
  if (fU < 1) fail(lineOf("f_u"), `f_u = ${fU}: a factor uncertainty is at least 1`);
  const factorUncertainty = Float64Array.of(fU);
  const empty = new Float64Array(0);
  if (kind === "decay") {
    if (rows.length !== 1) fail(rows[1].line, "a decay has one row");
    if (!(rows[0].values[0] > 0)) fail(rows[0].line, `rate = ${rows[0].values[0]}: must be positive`);
    return {
      ...common,
      ...optional,
      T9: empty,
      rate: Float64Array.from(rows[0].values),
      factorUncertainty,
      terms: [],
      meta: plainMeta,
    };
  }
  if (meta.has("terms") && number("terms") !== rows.length)
    fail(lineOf("terms"), `terms = ${need("terms")}, but ${rows.length} rows follow: truncated?`);
  return {
    ...common,
    ...optional,
    T9: empty,
    rate: empty,
    factorUncertainty,
    terms: rows.map((row) => row.values),
    meta: plainMeta,
  };
}

function readReaction(file: string, line: number, text: string, folder: string, nuclides: NuclideTable): Reaction {
  let reaction: Reaction;
  try {
    reaction = parseEquation(text);
    for (const id of [...reaction.reactants, ...reaction.products])
      if (!nuclides.has(id)) throw new InputError("nuclide", `${text}: unknown nuclide ${id}: not in nuclides.csv`);
  } catch (error) {
    throw error instanceof InputError ? new RateFileError(file, line, `reaction: ${error.message}`) : error;
  }
  if (reaction.id !== folder) {
    let named = "";
    try {
      named = parseReactionId(folder).id === reaction.id ? `; name the folder ${reaction.id}` : "";
    } catch {}
    throw new RateFileError(
      file,
      line,
      `reaction ${text} is ${reaction.id}, but the file lies in folder ${folder}${named}`,
    );
  }
  return reaction;
}

function checkTableRows(file: string, rows: readonly Row[], tableT9: readonly [number, number], line: number): void {
  let previous = 0;
  for (const { line: at, values } of rows) {
    const [T9, rate, fU] = values;
    if (!(T9 > previous))
      throw new RateFileError(
        file,
        at,
        previous === 0
          ? `T9 = ${T9}: must be positive`
          : `T9 must increase down the table, but ${T9} follows ${previous}; reorder or correct this row`,
      );
    if (!(rate > 0))
      throw new RateFileError(file, at, `rate = ${rate}: must be positive; start the table where the rate is`);
    if (!(fU >= 1)) throw new RateFileError(file, at, `f_u = ${fU}: a factor uncertainty is at least 1`);
    previous = T9;
  }
  const [first, last] = [rows[0].values[0], rows[rows.length - 1].values[0]];
  if (first !== tableT9[0] || last !== tableT9[1])
    throw new RateFileError(
      file,
      line,
      `table_T9 = ${tableT9.join(" ")}, but the rows span ${first} to ${last}: truncated?`,
    );
  if (rows.length < 4) throw new RateFileError(file, rows[0].line, `${rows.length} rows: a table needs at least 4`);
}
