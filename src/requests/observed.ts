/** Measured ranges for charts and reports: the recommended abundances, and the baryon density of the CMB. */
import { DEFAULT_SET, type Observation, readObservations } from "../inference/observations.ts";
import { parseCsv } from "../nuclear/csv-rows.ts";
import type { RateLibrary } from "../nuclear/library.ts";
import { InputError } from "../numerics/check.ts";

/** The file of the baryon density that charts show. */
export const CMB_FILE = "observations/cmb/planck2018.csv";

/** A measured baryon density. */
export interface MeasuredDensity {
  readonly omegaB: number;
  readonly sigma: number;
  readonly source: string;
  readonly date: number;
}

/** Name of a source in a chart: first author, `et al.` where there are more, and year. */
export function shortSource(source: string, date: number | undefined): string {
  const [, author, more] = /^([\p{L}'’-]+)(,| &| et al)?/u.exec(source) ?? [undefined, source, undefined];
  return `${author}${more === undefined ? "" : " et al."}${date === undefined ? "" : ` ${date}`}`;
}

/** The recommended measurements of the abundances. @throws {InputError} if the file is missing or damaged */
export function recommendedObservations(library: RateLibrary): Observation[] {
  return readObservations(library.files, DEFAULT_SET);
}

/** The baryon density from the CMB. @throws {InputError} if the file is missing or damaged */
export function cmbDensity(library: RateLibrary): MeasuredDensity {
  const file = library.files.read(CMB_FILE);
  if (file === undefined) throw new InputError("library", `rates/${CMB_FILE}: missing; reinstall the package`);
  const rows = parseCsv(file, ["parameter", "value", "sigma", "source", "date"]);
  const row = rows.find(({ cells }) => cells.parameter === "omegaB")?.cells;
  const numbers = [row?.value, row?.sigma, row?.date].map(Number);
  if (row === undefined || !numbers.every((x) => Number.isFinite(x) && x > 0))
    throw new InputError("library", `${file.file}: needs a row omegaB with value, sigma and date above 0`);
  return { omegaB: numbers[0], sigma: numbers[1], source: row.source, date: numbers[2] };
}
