/** Rows of our own CSV data files (nuclides, networks): comment lines start with `#`, every row keeps its line number. */
import { InputError } from "../numerics/check.ts";

/** A text file of the library as it is named in messages. */
export interface TextFile {
  /** Path shown in messages, e.g. `rates/nuclides.csv`. */
  readonly file: string;
  readonly text: string;
}

/** A row: its cells by column name, and its line in the file (from 1). */
export interface CsvRow {
  readonly line: number;
  readonly cells: Readonly<Record<string, string>>;
}

/** Lines of a text without end-of-line marks and byte-order mark. */
export function linesOf(text: string): string[] {
  return text.replace(/^\uFEFF/, "").split(/\r\n|\n|\r/);
}

/** An input error at a line of a file: `file:line: problem`. */
export function errorAt(file: string, line: number, problem: string): InputError {
  return new InputError("data-file", `${file}:${line}: ${problem}`);
}

function splitCells(line: string): string[] {
  const cells: string[] = [];
  let cell = "";
  let quoted = false;
  for (let i = 0; i < line.length; i++) {
    const c = line[i];
    if (quoted && c === '"' && line[i + 1] === '"') cell += line[++i];
    else if (c === '"') quoted = !quoted;
    else if (c === "," && !quoted) {
      cells.push(cell.trim());
      cell = "";
    } else cell += c;
  }
  cells.push(cell.trim());
  return cells;
}

/**
 * Rows of a CSV file whose first line that is no comment names the columns.
 * @param required columns that must be there; further columns are kept
 * @throws {InputError} file:line, for a missing column, a ragged row or an empty file
 */
export function parseCsv({ file, text }: TextFile, required: readonly string[]): CsvRow[] {
  const rows: CsvRow[] = [];
  let header: string[] | undefined;
  for (const [index, raw] of linesOf(text).entries()) {
    if (raw.trim() === "" || raw.startsWith("#")) continue;
    const cells = splitCells(raw);
    if (!header) {
      header = cells;
      const missing = required.filter((name) => !cells.includes(name));
      if (missing.length > 0)
        throw errorAt(
          file,
          index + 1,
          `column ${missing.join(", ")} missing; the header must name ${required.join(",")}`,
        );
      continue;
    }
    if (cells.length !== header.length)
      throw errorAt(file, index + 1, `${cells.length} cells where the header names ${header.length} columns`);
    rows.push({ line: index + 1, cells: Object.fromEntries(header.map((name, i) => [name, cells[i]])) });
  }
  if (!header || rows.length === 0)
    throw errorAt(
      file,
      1,
      required.length > 0 ? `no rows; expected columns ${required.join(",")} and data` : "no rows below the header",
    );
  return rows;
}
