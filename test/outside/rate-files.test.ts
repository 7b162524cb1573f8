/** Astropy reads every rate file: same columns, units, numbers and header values as our own parser. */
import { join } from "node:path";
import { expect, test } from "vitest";
import { findRatesFolder, loadRates } from "../../src/node/load-rates.ts";
import { runPython } from "./python.ts";

interface Read {
  readonly columns: Record<string, number[]>;
  readonly units: Record<string, string>;
  readonly meta: Record<string, string>;
}

test("Astropy reads what we read", () => {
  const library = loadRates();
  const tables = library.reactions.flatMap((id) => library.evaluations(id).map((name) => library.table(id, name)));
  const paths = tables.map(({ reaction, evaluation }) => join(findRatesFolder(), reaction.id, `${evaluation}.ecsv`));
  const read = runPython<Read[]>("read_rate_files.py", ["astropy"], paths);
  expect(read.length).toBe(tables.length);
  for (const [i, table] of tables.entries()) {
    const { columns, units, meta } = read[i];
    if (table.kind === "table") {
      expect(columns).toEqual({ T9: [...table.T9], rate: [...table.rate], f_u: [...table.factorUncertainty] });
      expect(units).toEqual({ T9: "GK", rate: "cm3 / (mol s)", f_u: "" });
    } else if (table.kind === "decay") {
      expect(columns).toEqual({ rate: [...table.rate] });
      expect(units).toEqual({ rate: "1 / s" });
    } else for (let k = 0; k < 7; k++) expect(columns[`a${k}`]).toEqual(table.terms.map((term) => term[k]));
    expect(Object.keys(meta)).toEqual(Object.keys(table.meta));
    for (const key of ["reaction", "citation", "origin", "note"]) expect(meta[key]).toBe(table.meta[key]);
  }
});
