/** One cell of a CSV or ECSV table: shortest digits that read back the same, words quoted when they must be. */
import { CalculationError } from "../numerics/check.ts";
import type { Table } from "../numerics/table.ts";

/** @throws {CalculationError} if the number is not finite */
function cell(value: number | string, delimiter: string, where: string): string {
  if (typeof value === "number") {
    if (!Number.isFinite(value)) throw new CalculationError("not-finite", `${where} = ${value}: not a finite number`);
    return String(value);
  }
  const mustQuote = value === "" || /["#\s]/.test(value) || value.includes(delimiter);
  return mustQuote ? `"${value.replaceAll('"', '""')}"` : value;
}

/**
 * Header line and rows of a table, joined by the delimiter.
 * @throws {CalculationError} naming row and column of a number that is not finite, or a ragged row
 */
export function delimitedLines(table: Table, delimiter: string): string[] {
  const body = table.rows.map((row, line) => {
    if (row.length !== table.columns.length)
      throw new CalculationError(
        "ragged-table",
        `row ${line + 1}: ${row.length} cells for ${table.columns.length} columns`,
      );
    return row.map((value, i) => cell(value, delimiter, `row ${line + 1}, ${table.columns[i]}`)).join(delimiter);
  });
  return [table.columns.join(delimiter), ...body];
}
