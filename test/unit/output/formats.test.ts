// JSON, CSV and ECSV: digits survive, nothing that is not a number gets out, units and provenance travel along.
import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { CalculationError } from "../../../src/numerics/check.ts";
import type { Table } from "../../../src/numerics/table.ts";
import { abundancesDescriptions, abundancesTable } from "../../../src/output/abundances-output.ts";
import { toCsv } from "../../../src/output/csv.ts";
import { toEcsv } from "../../../src/output/ecsv.ts";
import { toJson } from "../../../src/output/json.ts";
import { provenanceNotes } from "../../../src/output/provenance-text.ts";
import { sampleAbundances } from "./sample-answer.ts";

const table: Table = {
  columns: ["t_s", "name"],
  units: ["s", ""],
  rows: [
    [0.1, "plain"],
    [1e-300, 'with "quotes", a comma'],
  ],
};

test("JSON reads back to the same object, what is not set left out", () => {
  const answer = sampleAbundances();
  expect(JSON.parse(toJson(answer))).toEqual(JSON.parse(JSON.stringify(answer)));
  expect(toJson({ a: undefined, b: [] })).toBe('{\n  "b": []\n}\n');
});

test("JSON of any object without gaps agrees with the platform's own reader", () => {
  const value = fc.letrec((tie) => ({
    any: fc.oneof(
      { maxDepth: 3 },
      fc.double({ noNaN: true, noDefaultInfinity: true }).map((x) => (Object.is(x, -0) ? 0 : x)),
      fc.string(),
      fc.boolean(),
      fc.array(tie("any"), { maxLength: 4 }),
      fc.dictionary(
        fc.string().filter((key) => key !== "__proto__"),
        tie("any"),
        { maxKeys: 4, noNullPrototype: true },
      ),
    ),
  })).any;
  fc.assert(
    fc.property(value, (x) => {
      expect(JSON.parse(toJson({ x }))).toEqual({ x });
    }),
    { seed: 20260101, numRuns: 200 },
  );
});

describe("numbers that are not finite are refused with their place", () => {
  for (const bad of [Number.NaN, Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY]) {
    test(String(bad), () => {
      const broken: Table = {
        columns: ["z", "xe"],
        units: ["1", "1"],
        rows: [
          [1, 2],
          [3, bad],
        ],
      };
      expect(() => toJson({ results: { list: [1, bad] } })).toThrow(`results.list[1] = ${bad}`);
      expect(() => toCsv(broken)).toThrow(`row 2, xe = ${bad}`);
      expect(() => toEcsv(broken)).toThrow(CalculationError);
    });
  }
  test("null", () => {
    expect(() => toJson({ results: { a: null } })).toThrow("results.a = null");
  });
});

test("a ragged table is refused", () => {
  expect(() => toCsv({ columns: ["a", "b"], units: ["", ""], rows: [[1]] })).toThrow("row 1: 1 cells for 2 columns");
});

test("CSV: notes and units as comments, words quoted when they must be", () => {
  expect(toCsv(table, ["made for a test"])).toBe(
    '# made for a test\n# units: t_s [s]\nt_s,name\n0.1,plain\n1e-300,"with ""quotes"", a comma"\n',
  );
});

test("ECSV: units, descriptions and provenance in the header that Astropy reads", () => {
  expect(toEcsv(table, { command: 'a "b": c', rates: ["one", "two"] }, { t_s: "time" })).toBe(
    [
      "# %ECSV 1.0",
      "# ---",
      "# delimiter: ','",
      "# datatype:",
      '# - {name: "t_s", unit: "s", datatype: float64, description: "time"}',
      '# - {name: "name", datatype: string}',
      "# meta:",
      '#   command: "a \\"b\\": c"',
      "#   rates:",
      '#   - "one"',
      '#   - "two"',
      "# schema: astropy-2.0",
      "t_s,name",
      "0.1,plain",
      '1e-300,"with ""quotes"", a comma"',
      "",
    ].join("\n"),
  );
});

test("abundances as a table: one row, each error beside its value, every column described", () => {
  const { results } = sampleAbundances();
  const one = abundancesTable(results);
  expect(one.columns.slice(0, 4)).toEqual(["Yp", "Yp_sigma", "dToH", "dToH_sigma"]);
  expect(one.rows).toHaveLength(1);
  expect(one.rows[0].slice(0, 4)).toEqual([0.25, 0.0002, 2.5e-5, 3e-7]);
  expect(one.units).toHaveLength(one.columns.length);
  const meanings = abundancesDescriptions(results);
  for (const column of one.columns) expect(meanings[column], column).toMatch(/\w/);
});

test("an uncertainty that is not published is marked in notes and column descriptions", () => {
  const answer = sampleAbundances();
  expect(provenanceNotes(answer).rates).toContain(
    "t_he3: reaclib; Collection 2010, J. 1, 2; label; uncertainty assumed",
  );
  const meanings = abundancesDescriptions(answer.results);
  expect(meanings.li7ToH_sigma).toContain("70 per cent of its variance from assumed uncertainties");
  expect(meanings.dToH_sigma).not.toContain("assumed");
});

test("provenance notes name network, corrections and every rate with its scale", () => {
  const notes = provenanceNotes(sampleAbundances());
  expect(notes.network).toBe("twelve");
  expect(notes.rates).toContain(
    "d-p_gamma-he3: someone2016 x 1.02; Someone et al. 2016, J. 3, 4; uncertainty published",
  );
  expect(notes.cosmology).toContain("omegaB=0.0224");
  expect(notes.warnings).toEqual(["a warning that says why"]);
});
