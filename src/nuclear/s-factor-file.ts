/** S-factor tables as files: CSV with units in the header or in a unit row, errors and narrow resonances if known. */
import { errorAt, linesOf, parseCsv, type TextFile } from "./csv-rows.ts";
import type { NarrowResonance } from "./s-factor.ts";

/** An S-factor table as read: centre-of-mass energies [MeV], S and its standard deviation [MeV b]. */
export interface SFactorData {
  readonly E: Float64Array;
  readonly S: Float64Array;
  /** One standard deviation; undefined if the file gives none. */
  readonly sigma?: Float64Array;
  readonly resonances: readonly NarrowResonance[];
}

/** Powers of ten that bring a unit to MeV. */
const PREFIX: Readonly<Record<string, number>> = { eV: 1e-6, keV: 1e-3, MeV: 1 };
const COLUMNS = { E: "energy", S: "S-factor", sigma: "error of S" } as const;
type Name = keyof typeof COLUMNS;
/** Fewest points a table may have. */
export const FEWEST_POINTS = 4;

/** What each column may be in. */
const ACCEPTED_UNITS: Readonly<Record<Name, string>> = {
  E: "eV, keV or MeV",
  S: "eV b, keV b or MeV b",
  sigma: "eV b, keV b or MeV b",
};

/** `MeV`, `keV b`, `MeV_b`, `[eV b]` -> factor to MeV (b); undefined if it is no such unit. */
function unitFactor(text: string, name: Name): number | undefined {
  const parts = text
    .replace(/[[\]()]/g, "")
    .trim()
    .split(/[ _*.-]+/);
  const factor = PREFIX[parts[0]];
  const barn = parts.length === 2 && (parts[1] === "b" || parts[1] === "barn");
  const fits = name === "E" ? parts.length === 1 : barn;
  return fits ? factor : undefined;
}

interface Column {
  readonly header: string;
  readonly name: Name;
  /** Undefined: the unit row must say. */
  readonly factor?: number;
}

/** `E_keV`, `S_MeV_b`, `sigma_MeV_b`, or bare `E`, `S`, `sigma` when a unit row follows. */
function readColumn(header: string): Column | undefined {
  const match = /^(E|S|sigma)(?:[_ ](.+))?$/.exec(header);
  if (!match) return undefined;
  const name = match[1] as Name;
  return { header, name, factor: match[2] === undefined ? undefined : unitFactor(match[2], name) };
}

/** Comment lines `# resonance: E = 0.15 MeV, omega_gamma = 2.3e-8 MeV`. */
function readResonances({ file, text }: TextFile): NarrowResonance[] {
  return linesOf(text).flatMap((raw, index) => {
    if (!/^#\s*resonance:/.test(raw)) return [];
    const match = /^#\s*resonance:\s*E\s*=\s*(\S+)\s+(\S+?),\s*omega_gamma\s*=\s*(\S+)\s+(\S+)\s*$/.exec(raw);
    const values = match && [Number(match[1]) * PREFIX[match[2]], Number(match[3]) * PREFIX[match[4]]];
    if (!values?.every((each) => each > 0 && Number.isFinite(each)))
      throw errorAt(
        file,
        index + 1,
        "write `# resonance: E = 0.15 MeV, omega_gamma = 2.3e-8 MeV`, both positive, in eV, keV or MeV",
      );
    return [{ energyMeV: values[0], strengthMeV: values[1] }];
  });
}

/**
 * Reads an S-factor table: columns E_MeV, S_MeV_b and, if known, sigma_MeV_b (one standard deviation), each also in keV or
 * eV; or columns E, S, sigma with the units in the row below the header. Energies are in the centre of mass. Narrow
 * resonances stand in comment lines `# resonance: E = ... MeV, omega_gamma = ... MeV`.
 * @param source the text and the path shown in messages
 * @throws {InputError} file:line, for a missing or unknown unit, fewer than four points, energies that do not increase or are
 *   negative, S <= 0, sigma < 0, a value that is no number
 */
export function parseSFactorFile(source: TextFile): SFactorData {
  const { file, text } = source;
  const headerLine = linesOf(text).findIndex((line) => line.trim() !== "" && !line.startsWith("#")) + 1;
  if (headerLine === 0)
    throw errorAt(file, 1, "the file is empty; expected a header such as E_MeV,S_MeV_b and at least four points");
  const rows = parseCsv(source, []);
  const columns = new Map<Name, Column>();
  for (const header of Object.keys(rows[0].cells)) {
    const column = readColumn(header);
    if (!column) throw errorAt(file, headerLine, `column ${header}: expected E_MeV, S_MeV_b and perhaps sigma_MeV_b`);
    if (column.factor === undefined && column.header !== column.name)
      throw errorAt(
        file,
        headerLine,
        `column ${header}: unknown unit; accepted are ${ACCEPTED_UNITS[column.name]}, as in ${column.name}_MeV${column.name === "E" ? "" : "_b"}`,
      );
    columns.set(column.name, column);
  }
  for (const name of ["E", "S"] as const)
    if (!columns.has(name))
      throw errorAt(file, headerLine, `no column for the ${COLUMNS[name]} (${name}_MeV${name === "S" ? "_b" : ""})`);
  const first = rows[0];
  // A row below a header without units that holds no number anywhere is one of units, right or wrong.
  const unitRow = [...columns.values()].every(
    ({ header, factor }) =>
      /[A-Za-z]V/.test(first.cells[header]) || (factor === undefined && !/\d|^$/.test(first.cells[header])),
  );
  const factors = new Map<Name, number>();
  for (const { header, name, factor } of columns.values()) {
    const below = unitRow ? unitFactor(first.cells[header], name) : factor;
    if (below === undefined)
      throw errorAt(
        file,
        unitRow ? first.line : headerLine,
        unitRow
          ? `unit of ${header}: ${first.cells[header]} is not known; accepted are ${ACCEPTED_UNITS[name]}`
          : `column ${header} has no unit: name it ${name}_MeV${name === "E" ? "" : "_b"}, or add a row of units below the header`,
      );
    if (unitRow && factor !== undefined && factor !== below)
      throw errorAt(file, first.line, `unit of ${header} is ${first.cells[header]}, which contradicts the header`);
    factors.set(name, below);
  }
  const data = unitRow ? rows.slice(1) : rows;
  if (data.length < FEWEST_POINTS)
    throw errorAt(
      file,
      data.at(-1)?.line ?? headerLine,
      `${data.length} points: an S-factor table needs at least ${FEWEST_POINTS}`,
    );
  const read = (name: Name) =>
    Float64Array.from(data, ({ line, cells }) => {
      const cell = cells[columns.get(name)!.header];
      const value = cell === "" ? Number.NaN : Number(cell);
      if (!Number.isFinite(value))
        throw errorAt(file, line, `${columns.get(name)!.header} = ${cell}: must be a number`);
      if (value < 0 || (name === "S" && value === 0))
        throw errorAt(
          file,
          line,
          `${columns.get(name)!.header} = ${cell}: must ${name === "S" ? "be positive" : "not be negative"}`,
        );
      return value * factors.get(name)!;
    });
  const E = read("E");
  for (let i = 1; i < E.length; i++)
    if (!(E[i] > E[i - 1]))
      throw errorAt(
        file,
        data[i].line,
        `energies must increase down the table, but ${E[i]} MeV follows ${E[i - 1]} MeV`,
      );
  return {
    E,
    S: read("S"),
    ...(columns.has("sigma") ? { sigma: read("sigma") } : {}),
    resonances: readResonances(source),
  };
}
