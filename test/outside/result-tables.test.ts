/** Astropy reads our ECSV and CSV results: the same columns, units, digits and provenance. */
import { expect, test } from "vitest";
import { abundancesDescriptions, abundancesTable } from "../../src/output/abundances-output.ts";
import { toCsv } from "../../src/output/csv.ts";
import { toEcsv } from "../../src/output/ecsv.ts";
import { provenanceNotes } from "../../src/output/provenance-text.ts";
import { sampleAbundances, sampleHistory } from "../unit/output/sample-answer.ts";
import { runPython } from "./python.ts";

interface Read {
  readonly columns: readonly string[];
  readonly units: readonly string[];
  readonly descriptions: readonly string[];
  readonly rows: readonly (readonly number[])[];
  readonly meta: Record<string, unknown>;
}

test("Astropy reads a history and an abundance table as we wrote them", () => {
  const history = sampleHistory();
  const abundances = sampleAbundances();
  const row = abundancesTable(abundances.results);
  const meanings = abundancesDescriptions(abundances.results);
  const [ecsvHistory, ecsvAbundances, csvHistory] = runPython<Read[]>(
    "read_result_tables.py",
    ["astropy"],
    [
      ["ascii.ecsv", toEcsv(history.results.table, provenanceNotes(history))],
      ["ascii.ecsv", toEcsv(row, provenanceNotes(abundances), meanings)],
      ["ascii.csv", toCsv(history.results.table, ["a note, with a comma"])],
    ],
  );
  const { table } = history.results;
  expect(ecsvHistory.columns).toEqual(table.columns);
  expect(ecsvHistory.rows).toEqual(table.rows);
  expect(ecsvHistory.units.slice(0, 8)).toEqual(["s", "K", "MeV", "", "", "1 / s", "1 / s", "1 / s"]);
  expect(ecsvHistory.meta).toMatchObject({ network: "twelve", corrections: "coulomb radiative" });
  expect(csvHistory).toMatchObject({ columns: table.columns, rows: table.rows });
  expect(ecsvAbundances).toMatchObject({ columns: row.columns, rows: row.rows });
  expect(ecsvAbundances.descriptions).toEqual(row.columns.map((name) => meanings[name]));
  expect(ecsvAbundances.meta.rates).toEqual(provenanceNotes(abundances).rates);
});
