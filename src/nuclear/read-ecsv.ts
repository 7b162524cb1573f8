/** The restricted ECSV of our data files: reading its parts, each with its line; no physics. */
import { InputError } from "../numerics/check.ts";
import { linesOf } from "./csv-rows.ts";

/** A rate file that is refused. The message reads `file:line: problem`. */
export class RateFileError extends InputError {
  readonly file: string;
  readonly line: number;
  readonly problem: string;
  constructor(file: string, line: number, problem: string) {
    super("rate-file", `${file}:${line}: ${problem}`);
    this.file = file;
    this.line = line;
    this.problem = problem;
  }
}

/** Whether a header value is plain to a YAML reader, so that Astropy reads what we read. */
export function isPlainText(value: string): boolean {
  return value !== "" && !/: |:$| #|^[[\]{}&*!|>'"%@`,#]|^[-?] |[\r\n]/.test(value);
}

/** A declared column; unit empty if none is given. */
export interface Column {
  readonly name: string;
  readonly unit: string;
  readonly line: number;
}
/** One line of numbers. */
export interface Row {
  readonly line: number;
  readonly values: readonly number[];
}
/** The parts of a file, with their lines. */
export interface EcsvParts {
  readonly columns: readonly Column[];
  readonly meta: ReadonlyMap<string, { readonly value: string; readonly line: number }>;
  readonly metaLine: number;
  readonly rows: readonly Row[];
}

function readColumn(file: string, line: number, text: string): Column {
  const body = /^# - \{(.*)\}\s*$/.exec(text);
  if (!body) throw new RateFileError(file, line, `column line must read # - {name: ..., unit: ..., datatype: float64}`);
  const fields = new Map(
    body[1].split(",").map((part) => {
      const colon = part.indexOf(":");
      return [part.slice(0, colon).trim(), part.slice(colon + 1).trim()] as const;
    }),
  );
  const name = fields.get("name");
  if (!name) throw new RateFileError(file, line, "column without a name");
  if (fields.get("datatype") !== "float64")
    throw new RateFileError(file, line, `column ${name}: datatype must be float64`);
  return { name, unit: fields.get("unit") ?? "", line };
}

/**
 * Reads the parts of a file: column lines, flat `key: value` lines, rows of finite numbers. Knows nothing of physics.
 * @throws {RateFileError} where the text leaves this form
 */
export function readEcsv(file: string, text: string): EcsvParts {
  const lines = linesOf(text);
  if (text.trim() === "") throw new RateFileError(file, 1, "the file is empty");
  const expectLine = (index: number, wanted: string) => {
    if (lines[index]?.trimEnd() !== wanted)
      throw new RateFileError(
        file,
        index + 1,
        `line ${index + 1} must read \`${wanted}\`; see rates/README.md for the format`,
      );
  };
  expectLine(0, "# %ECSV 1.0");
  expectLine(1, "# ---");
  expectLine(2, "# datatype:");
  let i = 3;
  const columns: Column[] = [];
  for (; lines[i]?.startsWith("# - "); i++) columns.push(readColumn(file, i + 1, lines[i]));
  expectLine(i, "# meta:");
  const metaLine = ++i;
  const meta = new Map<string, { value: string; line: number }>();
  for (; lines[i]?.startsWith("#") && !lines[i].startsWith("# schema:"); i++) {
    const match = /^# {3}([A-Za-z]\w*): (\S.*?)\s*$/.exec(lines[i]);
    if (!match) throw new RateFileError(file, i + 1, "header lines must read `#   key: value`, one line each");
    const [, key, value] = match;
    if (meta.has(key)) throw new RateFileError(file, i + 1, `${key} is given twice`);
    if (!isPlainText(value))
      throw new RateFileError(
        file,
        i + 1,
        `${key}: plain text only: no colon or # set off by a blank, no leading quote or bracket`,
      );
    meta.set(key, { value, line: i + 1 });
  }
  expectLine(i, "# schema: astropy-2.0");
  i++;
  if (i >= lines.length || lines[i].trim() === "")
    throw new RateFileError(file, i + 1, "the file ends before its rows: truncated?");
  const names = lines[i].trim().split(/\s+/);
  if (names.join(" ") !== columns.map((c) => c.name).join(" "))
    throw new RateFileError(
      file,
      i + 1,
      `column names must be ${columns.map((c) => c.name).join(" ")}, as declared above`,
    );
  const rows: Row[] = [];
  for (i++; i < lines.length; i++) {
    if (lines[i].trim() === "") continue;
    const cells = lines[i].trim().split(/\s+/);
    if (cells.length !== columns.length)
      throw new RateFileError(
        file,
        i + 1,
        `${cells.length} values where the header declares ${columns.length} columns`,
      );
    const values = cells.map((cell, k) => {
      const value = Number(cell);
      if (!Number.isFinite(value))
        throw new RateFileError(file, i + 1, `${columns[k].name} = ${cell}: must be a finite number`);
      return value;
    });
    rows.push({ line: i + 1, values });
  }
  if (rows.length === 0) throw new RateFileError(file, lines.length, "no rows: truncated?");
  return { columns, meta, metaLine, rows };
}
