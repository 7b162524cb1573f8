/** Rate files: what a good one gives, and every refusal with its line. */
import { describe, expect, test } from "vitest";
import { loadRates } from "../../../src/node/load-rates.ts";
import { parseRateFile, RateFileError } from "../../../src/nuclear/parse-rate-file.ts";
import { formatRateFile, type RateFileContent } from "../../../src/nuclear/write-rate-file.ts";

const nuclides = loadRates().nuclides;
const file = "rates/t-d_n-he4/desouza2019.ecsv";
const good = `# %ECSV 1.0
# ---
# datatype:
# - {name: T9, unit: GK, datatype: float64, description: temperature}
# - {name: rate, unit: cm3 / (mol s), datatype: float64, description: recommended N_A<sigma v>}
# - {name: f_u, datatype: float64, description: factor uncertainty exp(sigma) of a lognormal}
# meta:
#   reaction: t + d -> he4 + n
#   kind: table
#   citation: de Souza, Boston, Coc, Iliadis 2019, Phys. Rev. C 99, 014619
#   origin: numerical table released by the authors
#   basis: experiment
#   uncertainty_basis: published
#   q_value_keV: 17589.30
#   table_T9: 0.001 10
#   valid_T9: 0.001 1
# schema: astropy-2.0
T9 rate f_u
0.001 1.99783e-07 1.0059
0.1 4.53649e+07 1.0035
1 5.05051e+08 1.0028
10 1.15334e+08 1.0050
`;
const fit = `# %ECSV 1.0
# ---
# datatype:
${[0, 1, 2, 3, 4, 5, 6].map((k) => `# - {name: a${k}, datatype: float64}\n`).join("")}# meta:
#   reaction: n + d -> t
#   kind: reaclib
#   terms: 2
#   citation: Nagai et al. 2006
#   origin: as it stands
#   uncertainty_basis: assumed
#   f_u: 1.3
#   q_value_keV: 6257.23
#   valid_T9: 0.01 10
# schema: astropy-2.0
a0 a1 a2 a3 a4 a5 a6
5.36598 0 0 0 0 0 0.075
6.60935 0 0 0 0 0 1
`;
const fitFile = "rates/d-n_gamma-t/reaclib.ecsv";
const decay = `# %ECSV 1.0
# ---
# datatype:
# - {name: rate, unit: 1 / s, datatype: float64}
# meta:
#   reaction: t -> he3
#   kind: decay
#   citation: Nuclear Wallet Cards
#   origin: exp(-20.1456)
#   uncertainty_basis: assumed
#   f_u: 1.02
#   q_value_keV: 18.59
#   valid_T9: 0 10
# schema: astropy-2.0
rate
1.782e-9
`;

test("a table file gives its numbers and its provenance", () => {
  const table = parseRateFile({ file, text: good }, nuclides);
  expect(table.reaction.id).toBe("t-d_n-he4");
  expect(table).toMatchObject({
    evaluation: "desouza2019",
    kind: "table",
    uncertaintyBasis: "published",
    basis: "experiment",
  });
  expect(table.tableT9).toEqual([0.001, 10]);
  expect(table.validT9).toEqual([0.001, 1]);
  expect([...table.T9]).toEqual([0.001, 0.1, 1, 10]);
  expect(table.rate[1]).toBe(4.53649e7);
  expect(table.factorUncertainty[3]).toBe(1.005);
  expect(table.meta.origin).toBe("numerical table released by the authors");
});

test("line ends of any system and a byte-order mark do no harm", () => {
  const table = parseRateFile({ file, text: good }, nuclides);
  expect(parseRateFile({ file, text: `\uFEFF${good.replaceAll("\n", "\r\n")}` }, nuclides)).toEqual(table);
  expect(parseRateFile({ file, text: good.trimEnd() }, nuclides)).toEqual(table);
});

test("fits and decays have terms or one constant, and one factor uncertainty", () => {
  const parsed = parseRateFile({ file: fitFile, text: fit }, nuclides);
  expect(parsed.terms).toEqual([
    [5.36598, 0, 0, 0, 0, 0, 0.075],
    [6.60935, 0, 0, 0, 0, 0, 1],
  ]);
  expect([...parsed.factorUncertainty]).toEqual([1.3]);
  expect([...parseRateFile({ file: "rates/t_he3/x.ecsv", text: decay }, nuclides).rate]).toEqual([1.782e-9]);
});

test("what is written is read back, digit for digit", () => {
  const content: RateFileContent = {
    reaction: "t + d -> he4 + n",
    kind: "table",
    citation: "A, B 2026",
    doi: "10.1/x",
    origin: "own",
    basis: "theory",
    uncertaintyBasis: "from memory",
    qValueKeV: 17589.3,
    validT9: ["0.001", "1"],
    note: "two words",
    entered: "2026-12-01; by hand",
    rows: [
      ["0.001", "1.99783e-07", "1.0059"],
      ["0.01", "1e-3", "1"],
      ["0.1", "4.53649e+07", "1.0035"],
      ["10", "1.15334e+08", "1.0050"],
    ],
  };
  const text = formatRateFile(content);
  expect(text).toContain("\n0.1 4.53649e+07 1.0035\n");
  const table = parseRateFile({ file, text }, nuclides);
  expect(table).toMatchObject({
    citation: "A, B 2026",
    doi: "10.1/x",
    note: "two words",
    uncertaintyBasis: "from memory",
  });
  expect([...table.rate]).toEqual([1.99783e-7, 1e-3, 4.53649e7, 1.15334e8]);
  expect(() => formatRateFile({ ...content, note: "a: b" })).toThrow(/note = a: b: plain text only/);
});

const change = (from: string | RegExp, to: string) => good.replace(from, to);
const without = (key: string) => good.replace(new RegExp(`#   ${key}: .*\n`), "");
describe("a table file is refused, with its line, for", () => {
  test.each<[string, string, number, RegExp]>([
    [
      "T9 not increasing",
      change("\n1 5.05051e+08", "\n0.01 5.05051e+08"),
      21,
      /^T9 must increase down the table, but 0\.01 follows 0\.1; reorder or correct this row$/,
    ],
    ["T9 repeated", change("\n1 5.05051e+08", "\n0.1 5.05051e+08"), 21, /0\.1 follows 0\.1/],
    ["T9 = 0", change("0.001 1.99783e-07", "0 1.99783e-07"), 19, /T9 = 0: must be positive/],
    ["a rate of zero", change("1.99783e-07", "0"), 19, /rate = 0: must be positive/],
    ["a negative rate", change("4.53649e+07", "-4.53649e+07"), 20, /rate = -45364900: must be positive/],
    ["f_u below 1", change("1.0028", "0.9978"), 21, /f_u = 0\.9978: a factor uncertainty is at least 1/],
    ["NaN", change("4.53649e+07", "NaN"), 20, /rate = NaN: must be a finite number/],
    ["infinity", change("4.53649e+07", "Infinity"), 20, /must be a finite number/],
    ["a word", change("4.53649e+07", "4.5x"), 20, /rate = 4\.5x: must be a finite number/],
    [
      "a short row",
      change("0.1 4.53649e+07 1.0035", "0.1 4.53649e+07"),
      20,
      /2 values where the header declares 3 columns/,
    ],
    ["a long row", change("1.0035", "1.0035 1"), 20, /4 values/],
    [
      "a truncated table",
      change(/\n10 .*\n/, "\n"),
      15,
      /table_T9 = 0\.001 10, but the rows span 0\.001 to 1: truncated\?/,
    ],
    ["no rows", good.slice(0, good.indexOf("0.001 1.99")), 19, /no rows: truncated\?/],
    ["an end before the column names", good.slice(0, good.indexOf("T9 rate")), 18, /ends before its rows/],
    ["an end in the header", good.slice(0, good.indexOf("#   basis")), 12, /must read `# schema: astropy-2\.0`/],
    ["no content", "", 1, /the file is empty/],
    ["another format", `T9,rate\n0.1,2\n`, 1, /line 1 must read `# %ECSV 1\.0`/],
    ["two rows only", change(/\n0\.1 .*\n1 .*\n/, "\n"), 19, /2 rows: a table needs at least 4/],
    ["no citation", without("citation"), 7, /citation is missing from the header/],
    ["no origin", without("origin"), 7, /origin is missing/],
    ["no valid_T9", without("valid_T9"), 7, /valid_T9 is missing/],
    ["no table_T9", without("table_T9"), 7, /table_T9 is missing/],
    ["no uncertainty_basis", without("uncertainty_basis"), 7, /uncertainty_basis is missing/],
    ["no Q-value", without("q_value_keV"), 7, /q_value_keV is missing/],
    ["no reaction", without("reaction"), 7, /reaction is missing/],
    ["no kind", without("kind"), 7, /kind is missing/],
    ["an empty citation", change(/citation: .*/, "citation:"), 10, /header lines must read/],
    ["another kind", change("kind: table", "kind: chart"), 9, /kind = chart: accepted are table, reaclib, decay/],
    ["another basis", change("basis: experiment", "basis: guess"), 12, /basis = guess: accepted are experiment/],
    [
      "another uncertainty basis",
      change("basis: published", "basis: sure"),
      13,
      /uncertainty_basis = sure: accepted are published, assumed, from memory/,
    ],
    ["an unknown nuclide", change("t + d -> he4 + n", "t + d -> he4 + x"), 8, /unknown nuclide x/],
    [
      "a nuclide without mass",
      change("t + d -> he4 + n", "n + ne20 -> ne21"),
      8,
      /unknown nuclide ne21: not in nuclides\.csv/,
    ],
    ["A not conserved", change("t + d -> he4 + n", "t + d -> he4"), 8, /A is not conserved: 5 -> 4/],
    ["Z not conserved", change("t + d -> he4 + n", "t + d -> he4 + p"), 8, /Z is not conserved: 2 -> 3/],
    [
      "the wrong folder",
      change("t + d -> he4 + n", "t + p -> he3 + n"),
      8,
      /is t-p_n-he3, but the file lies in folder t-d_n-he4/,
    ],
    [
      "a Q-value off by 6 keV",
      change("17589.30", "17595.31"),
      14,
      /q_value_keV = 17595\.31: the mass table gives 17589\.30 keV/,
    ],
    ["a Q-value that is none", change("17589.30", "big"), 14, /q_value_keV = big: must be a number/],
    ["a range backwards", change("valid_T9: 0.001 1", "valid_T9: 1 0.001"), 16, /must be two increasing temperatures/],
    [
      "one temperature as a range",
      change("valid_T9: 0.001 1", "valid_T9: 1"),
      16,
      /must be two increasing temperatures/,
    ],
    [
      "another unit",
      change("cm3 / (mol s)", "m3 / (mol s)"),
      5,
      /unit of rate is `m3 \/ \(mol s\)`; must be `cm3 \/ \(mol s\)`/,
    ],
    ["kelvin", change("GK", "K"), 4, /unit of T9 is `K`; must be `GK`/],
    [
      "another type",
      change("datatype: float64, description: temp", "datatype: int32, description: temp"),
      4,
      /datatype must be float64/,
    ],
    [
      "other columns",
      change(/# - \{name: f_u.*\n/, "")
        .replace("T9 rate f_u", "T9 rate")
        .replaceAll(/ 1\.00\d\d\n/g, "\n"),
      4,
      /columns are T9 rate; kind table has T9 rate f_u/,
    ],
    ["other column names below", change("T9 rate f_u", "T9 f_u rate"), 18, /column names must be T9 rate f_u/],
    ["a key given twice", change("#   kind: table", "#   kind: table\n#   kind: table"), 10, /kind is given twice/],
    ["a colon that YAML would split at", change("numerical table", "note: numerical table"), 11, /plain text only/],
  ])("%s", (_, text, line, problem) => {
    let caught: unknown;
    try {
      parseRateFile({ file, text }, nuclides);
    } catch (error) {
      caught = error;
    }
    expect(caught).toBeInstanceOf(RateFileError);
    const error = caught as RateFileError;
    expect(error.problem).toMatch(problem);
    expect(error.line).toBe(line);
    expect(error.message).toBe(`${file}:${line}: ${error.problem}`);
    expect(error.exitCode).toBe(2);
  });
});

describe("fits, decays and names are refused for", () => {
  test.each<[string, string, string, RegExp]>([
    ["a missing term", fitFile, fit.replace(/6\.60935.*\n/, ""), /:14: terms = 2, but 1 rows follow: truncated\?/],
    ["f_u below 1", fitFile, fit.replace("f_u: 1.3", "f_u: 0.3"), /f_u = 0\.3: a factor uncertainty/],
    ["no f_u", fitFile, fit.replace(/# {3}f_u.*\n/, ""), /f_u is missing/],
    [
      "a table's columns",
      fitFile,
      good
        .replace("kind: table", "kind: reaclib")
        .replace("t + d -> he4 + n", "n + d -> t")
        .replace("17589.30", "6257.2"),
      /kind reaclib has a0 a1/,
    ],
    ["two decay constants", "rates/t_he3/x.ecsv", decay.replace("1.782e-9", "1.782e-9\n2"), /:17: a decay has one row/],
    [
      "a negative decay constant",
      "rates/t_he3/x.ecsv",
      decay.replace("1.782e-9", "-1.782e-9"),
      /:16: rate = -1\.782e-9: must be positive/,
    ],
    [
      "a decay called a table",
      "rates/t_he3/x.ecsv",
      decay.replace("kind: decay", "kind: table"),
      /kind = table: t -> he3 is a decay/,
    ],
    ["a reaction called a decay", fitFile, fit.replace("kind: reaclib", "kind: decay"), /is no decay/],
    ["a folder in another order", "rates/d-t_n-he4/desouza2019.ecsv", good, /name the folder t-d_n-he4/],
    ["an evaluation in capitals", "rates/t-d_n-he4/DeSouza.ecsv", good, /evaluation name DeSouza: use lower-case/],
    ["no folder", "desouza2019.ecsv", good, /lies in its reaction's folder/],
  ])("%s", (_, path, text, message) => {
    expect(() => parseRateFile({ file: path, text }, nuclides)).toThrow(message);
  });
});
