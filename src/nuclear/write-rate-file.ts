/** Rate file as text: the writer that belongs to parse-rate-file.ts. */
import { InputError } from "../numerics/check.ts";
import { type BASES, type RATE_KINDS, rateUnit, type UNCERTAINTY_BASES } from "./parse-rate-file.ts";
import { parseEquation } from "./reaction.ts";
import { isPlainText } from "./read-ecsv.ts";

/** Content of a rate file. Numbers are strings, so that printed digits survive. */
export interface RateFileContent {
  /** `t + d -> he4 + n`. */
  readonly reaction: string;
  readonly kind: (typeof RATE_KINDS)[number];
  readonly citation: string;
  readonly doi?: string;
  /** How these numbers came from the source to this file. */
  readonly origin: string;
  readonly basis: (typeof BASES)[number];
  readonly uncertaintyBasis: (typeof UNCERTAINTY_BASES)[number];
  /** Of kinds reaclib and decay. */
  readonly factorUncertainty?: string;
  readonly qValueKeV: number;
  /** [GK] */
  readonly validT9: readonly [string, string];
  readonly note?: string;
  readonly entered: string;
  readonly rows: readonly (readonly string[])[];
}

const COLUMN_TEXT: Readonly<Record<string, string>> = {
  T9: "temperature",
  f_u: "factor uncertainty exp(sigma) of a lognormal",
};

/** A value that a YAML reader takes as plain text, on one line. */
function plain(key: string, value: string): string {
  const text = value.replace(/\s+/g, " ").trim();
  if (!isPlainText(text))
    throw new InputError(
      "rate-file",
      `${key} = ${value}: plain text only, no colon or # set off by a blank, no leading quote or bracket`,
    );
  return text;
}

/**
 * The text of a rate file.
 * @throws {InputError} if a value cannot stand in the header
 */
export function formatRateFile(content: RateFileContent): string {
  const { kind, rows } = content;
  const reaction = parseEquation(content.reaction);
  const bodies = reaction.reactants.length;
  const meaning = ["decay constant", "recommended N_A<sigma v>", "recommended N_A^2<sigma v>"][bodies - 1];
  const column = (name: string, unit: string, description: string) =>
    `# - {name: ${name}, ${unit ? `unit: ${unit}, ` : ""}datatype: float64, description: ${description}}`;
  const columns = {
    table: [
      column("T9", "GK", COLUMN_TEXT.T9),
      column("rate", rateUnit(bodies), meaning),
      column("f_u", "", COLUMN_TEXT.f_u),
    ],
    decay: [column("rate", rateUnit(bodies), meaning)],
    reaclib: ["constant", "of 1/T9", "of T9^(-1/3)", "of T9^(1/3)", "of T9", "of T9^(5/3)", "of ln T9"].map((of, k) =>
      column(`a${k}`, "", `coefficient ${of} in ln rate`),
    ),
  }[kind];
  const header = { table: "T9 rate f_u", decay: "rate", reaclib: "a0 a1 a2 a3 a4 a5 a6" }[kind];
  const meta: readonly (readonly [string, string | undefined])[] = [
    ["reaction", reaction.equation],
    ["kind", kind],
    ["terms", kind === "reaclib" ? String(rows.length) : undefined],
    ["citation", content.citation],
    ["doi", content.doi],
    ["origin", content.origin],
    ["basis", content.basis],
    ["uncertainty_basis", content.uncertaintyBasis],
    ["f_u", content.factorUncertainty],
    ["q_value_keV", content.qValueKeV.toFixed(3)],
    ["table_T9", kind === "table" ? `${rows[0][0]} ${rows[rows.length - 1][0]}` : undefined],
    ["valid_T9", content.validT9.join(" ")],
    ["note", content.note],
    ["entered", content.entered],
  ];
  return [
    "# %ECSV 1.0",
    "# ---",
    "# datatype:",
    ...columns,
    "# meta:",
    ...meta.filter(([, value]) => value !== undefined).map(([key, value]) => `#   ${key}: ${plain(key, value!)}`),
    "# schema: astropy-2.0",
    header,
    ...rows.map((row) => row.join(" ")),
    "",
  ].join("\n");
}
