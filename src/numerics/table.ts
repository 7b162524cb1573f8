/** A table of results: named columns, their units, and rows of finite numbers or words. */

/** A table as it stands in results, CSV and ECSV. Every row has one cell a column. */
export interface Table {
  readonly columns: readonly string[];
  /** Unit of each column in astropy notation; "1" for a pure number, "" for a word. */
  readonly units: readonly string[];
  readonly rows: readonly (readonly (number | string)[])[];
}

/**
 * One numeric column of a table.
 * @throws {RangeError} if there is no such column, or a cell is not a number
 */
export function numericColumn(table: Table, name: string): number[] {
  const index = table.columns.indexOf(name);
  if (index < 0) throw new RangeError(`column ${name}: not among ${table.columns.join(", ")}`);
  return table.rows.map((row, line) => {
    const cell = row[index];
    if (typeof cell !== "number") throw new RangeError(`column ${name}, row ${line + 1}: ${cell} is not a number`);
    return cell;
  });
}
