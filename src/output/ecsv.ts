/** Result table -> ECSV 1.0, the table format of Astropy: units and provenance travel with the numbers. */
import type { Table } from "../numerics/table.ts";
import { delimitedLines } from "./cell.ts";

/** A YAML scalar: JSON strings are YAML's double-quoted style. */
function scalar(value: string): string {
  return JSON.stringify(value);
}

/**
 * ECSV text, comma-separated.
 * @param meta     flat provenance, in the order given; a list becomes a YAML list
 * @param describe sentence about a column, if there is one
 * @throws {CalculationError} if a number is not finite or a row is ragged
 * @see Astropy Proposal for Enhancement 6, doi:10.5281/zenodo.4792325
 */
export function toEcsv(
  table: Table,
  meta: Readonly<Record<string, string | number | readonly string[]>> = {},
  describe: Readonly<Record<string, string>> = {},
): string {
  const columns = table.columns.map((name, i) => {
    const datatype = typeof table.rows[0]?.[i] === "string" ? "string" : "float64";
    const unit = ["", "1"].includes(table.units[i]) ? "" : `, unit: ${scalar(table.units[i])}`;
    const description = describe[name] === undefined ? "" : `, description: ${scalar(describe[name])}`;
    return `# - {name: ${scalar(name)}${unit}, datatype: ${datatype}${description}}`;
  });
  const entries = Object.entries(meta).flatMap(([key, value]) => {
    if (typeof value === "string") return [`#   ${key}: ${scalar(value)}`];
    if (typeof value === "number") return [`#   ${key}: ${value}`];
    return [`#   ${key}:`, ...value.map((item) => `#   - ${scalar(item)}`)];
  });
  const header = [
    "# %ECSV 1.0",
    "# ---",
    "# delimiter: ','",
    "# datatype:",
    ...columns,
    ...(entries.length > 0 ? ["# meta:", ...entries] : []),
    "# schema: astropy-2.0",
  ];
  return `${[...header, ...delimitedLines(table, ",")].join("\n")}\n`;
}
