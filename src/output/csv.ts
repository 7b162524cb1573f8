/** Result table -> CSV: comment lines with units and provenance, one header line, rows. */
import type { Table } from "../numerics/table.ts";
import { delimitedLines } from "./cell.ts";

/**
 * CSV text. Comment lines start with `# `: the notes, then the unit of every column that has one.
 * @param notes provenance, one line each
 * @throws {CalculationError} if a number is not finite or a row is ragged
 */
export function toCsv(table: Table, notes: readonly string[] = []): string {
  const units = table.columns.flatMap((name, i) =>
    ["", "1"].includes(table.units[i]) ? [] : [`${name} [${table.units[i]}]`],
  );
  const comments = [...notes, ...(units.length > 0 ? [`units: ${units.join(", ")}`] : [])];
  return `${[...comments.map((note) => `# ${note}`), ...delimitedLines(table, ",")].join("\n")}\n`;
}
