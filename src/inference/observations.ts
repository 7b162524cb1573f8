/** Measured abundances: the named sets of rates/observations/, and values given as text. */
import { errorAt, parseCsv } from "../nuclear/csv-rows.ts";
import type { LibraryFiles } from "../nuclear/library.ts";
import { suggestNearest } from "../nuclear/reaction-name.ts";
import type { AbundanceName } from "../nucleosynthesis/abundances.ts";
import { InputError } from "../numerics/check.ts";
import { parseMeasured, parseNumber } from "../parameters/measured.ts";

/** Printed name of an abundance that may be observed -> its key. */
export const OBSERVABLES = {
  "D/H": "dToH",
  Yp: "Yp",
  "3He/H": "he3ToH",
  "7Li/H": "li7ToH",
  "6Li/H": "li6ToH",
} as const satisfies Readonly<Record<string, AbundanceName>>;

export type ObservableName = keyof typeof OBSERVABLES;
export type ObservedAbundance = (typeof OBSERVABLES)[ObservableName];

/** A measured abundance with its standard deviation. By number relative to hydrogen; Yp = 4 n_He4/n_b. */
export interface Observation {
  readonly abundance: ObservedAbundance;
  readonly value: number;
  readonly sigma: number;
  /** `upper-limit`: value and sigma of the limit; a prediction below it is in no tension. */
  readonly kind: "measurement" | "upper-limit";
  readonly source: string;
  /** Year of publication; left out where it was given by the user. */
  readonly date?: number;
  /** How the number came here: read in the source, from memory, given. */
  readonly basis: string;
  readonly note?: string;
  /** Name within a catalogue, e.g. cooke2018. */
  readonly name?: string;
}

/** The set that is compared with when nothing else is asked for. */
export const DEFAULT_SET = "recommended";
/** Of a named set these make the likelihood; the others are compared only. */
export const FITTED_BY_DEFAULT: readonly ObservedAbundance[] = ["dToH", "Yp"];
/** File whose rows carry names of their own and repeat abundances. */
const CATALOGUE = "catalogue";
const FOLDER = "observations";

const COLUMNS = ["abundance", "value", "sigma", "kind", "source", "date", "basis", "note"] as const;
const KINDS: readonly string[] = ["measurement", "upper-limit"];

/** Key of an abundance by its printed name or its key. @throws {InputError} naming the nearest and all known */
export function observedAbundance(text: string, what: string): ObservedAbundance {
  const name = text.trim();
  if (Object.hasOwn(OBSERVABLES, name)) return OBSERVABLES[name as ObservableName];
  const keys = Object.values(OBSERVABLES) as ObservedAbundance[];
  if (keys.includes(name as ObservedAbundance)) return name as ObservedAbundance;
  const known = [...Object.keys(OBSERVABLES), ...keys.filter((key) => key !== "Yp")];
  const nearest = suggestNearest(name, known);
  throw new InputError(
    "choice",
    `${what}: ${name === "" ? "no abundance named" : `${name} is no abundance that is observed`}; ${
      nearest === undefined ? "" : `did you mean ${nearest}? `
    }known are ${known.join(", ")}`,
  );
}

/** Printed name of an observed abundance: dToH -> D/H. */
export function observableName(abundance: ObservedAbundance): ObservableName {
  return (Object.keys(OBSERVABLES) as ObservableName[]).find(
    (name) => OBSERVABLES[name] === abundance,
  ) as ObservableName;
}

/** Names of the sets in a library. */
export function observationSetNames(files: LibraryFiles): string[] {
  return files
    .list(FOLDER)
    .filter((name) => name.endsWith(".csv"))
    .map((name) => name.slice(0, -".csv".length));
}

/**
 * One set of measured abundances.
 * @param name of a file in rates/observations/, e.g. recommended
 * @throws {InputError} for an unknown set (nearest named), or file:line for a damaged row
 */
export function readObservations(files: LibraryFiles, name: string): Observation[] {
  const found = /^[\w-]+$/.test(name) ? files.read(`${FOLDER}/${name}.csv`) : undefined;
  if (!found) {
    const names = observationSetNames(files);
    const nearest = suggestNearest(name, names);
    throw new InputError(
      "choice",
      `observed = ${name}: no such set of observations; ${nearest === undefined ? "" : `did you mean ${nearest}? `}sets are ${names.join(", ")}; or give NAME=VALUE±SIGMA, e.g. D/H=2.527e-5±0.030e-5`,
    );
  }
  const seen = new Set<string>();
  return parseCsv(found, COLUMNS).map(({ line, cells }) => {
    try {
      const row = readRow(cells);
      const key = `${cells.abundance} ${row.name ?? ""}`.trim();
      if (seen.has(key)) throw new InputError("conflict", `${key} is listed twice`);
      seen.add(key);
      return row;
    } catch (error) {
      throw error instanceof InputError ? errorAt(found.file, line, error.message) : error;
    }
  });
}

function readRow(cells: Readonly<Record<string, string>>): Observation {
  const abundance = observedAbundance(cells.abundance, "abundance");
  const value = parseNumber(cells.value, "value", "give the measured abundance");
  const sigma = parseNumber(cells.sigma, "sigma", "give one standard deviation");
  if (!(value > 0 && sigma > 0)) throw new InputError("range", "value and sigma must be positive");
  if (!KINDS.includes(cells.kind)) throw new InputError("choice", `kind ${cells.kind}: write ${KINDS.join(" or ")}`);
  if (cells.source === "") throw new InputError("data-file", "source is missing");
  return {
    abundance,
    value,
    sigma,
    kind: cells.kind as Observation["kind"],
    source: cells.source,
    date: parseNumber(cells.date, "date", "give the year of publication"),
    basis: cells.basis,
    ...(cells.note ? { note: cells.note } : {}),
    ...(cells.name ? { name: cells.name } : {}),
  };
}

/** Observations of a request: those that make the likelihood, and those only compared with. */
export interface ObservedData {
  readonly fitted: readonly Observation[];
  readonly compared: readonly Observation[];
}

function fromCatalogue(files: LibraryFiles, abundance: ObservedAbundance, name: string): Observation {
  const rows = readObservations(files, CATALOGUE).filter((row) => row.abundance === abundance);
  const found = rows.find((row) => row.name === name);
  if (found) return found;
  throw new InputError(
    "choice",
    `observed ${observableName(abundance)}=${name}: neither VALUE±SIGMA nor a measurement of the catalogue (${
      rows.map((row) => row.name).join(", ") || "none of this abundance"
    })`,
  );
}

/**
 * Observations from text: a comma-separated list of `NAME=VALUE±SIGMA` (D/H, Yp, 3He/H, 7Li/H or their keys),
 * `NAME=measurement of the catalogue` (D/H=cooke2018), and at most one name of a set. What is named one by one enters the
 * likelihood and replaces the set's value; of a set D/H and Yp enter, 3He (a limit) and 7Li (not known to be primordial)
 * are compared only. What is observed nowhere else is compared with the recommended set.
 * @throws {InputError} for unknown names, duplicates, a zero or negative error, values outside (0, 1), nothing to fit
 */
export function parseObserved(text: string, files: LibraryFiles): ObservedData {
  const named: Observation[] = [];
  let set: { name: string; rows: Observation[] } | undefined;
  for (const item of text.split(",").map((each) => each.trim())) {
    const at = item.indexOf("=");
    if (at < 0) {
      if (item === "") throw new InputError("syntax", `observed = ${text}: an empty entry; write NAME=VALUE±SIGMA,...`);
      if (item === CATALOGUE)
        throw new InputError(
          "choice",
          `observed = ${CATALOGUE}: several measurements of one abundance; choose one, e.g. D/H=cooke2018`,
        );
      if (set !== undefined) throw new InputError("conflict", `observed = ${text}: two sets; give one`);
      set = { name: item, rows: readObservations(files, item) };
      continue;
    }
    const what = `observed ${item}`;
    const abundance = observedAbundance(item.slice(0, at), what);
    const given = item.slice(at + 1).trim();
    if (named.some((each) => each.abundance === abundance))
      throw new InputError("conflict", `${what}: ${observableName(abundance)} is given twice; keep one`);
    if (/^[a-z]/i.test(given)) {
      named.push(fromCatalogue(files, abundance, given));
      continue;
    }
    const { value, sigma } = parseMeasured(given, what);
    if (!(value > 0 && value < 1)) throw new InputError("range", `${what}: an abundance must lie between 0 and 1`);
    named.push({ abundance, value, sigma, kind: "measurement", source: "given", basis: "given" });
  }
  const has = (list: readonly Observation[], { abundance }: Observation) => list.some((o) => o.abundance === abundance);
  const rest = (set?.rows ?? []).filter((row) => !has(named, row));
  const fitted = [...named, ...rest.filter((row) => FITTED_BY_DEFAULT.includes(row.abundance))];
  const compared = rest.filter((row) => !has(fitted, row));
  if (set === undefined || set.name !== DEFAULT_SET)
    for (const row of readObservations(files, DEFAULT_SET))
      if (!has(fitted, row) && !has(compared, row)) compared.push(row);
  if (fitted.length === 0) throw new InputError("conflict", `observed = ${text}: nothing to fit; give D/H or Yp`);
  return { fitted, compared };
}
