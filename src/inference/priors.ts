/** What an inference may leave free, and what is known of it beforehand: flat ranges and Gaussian priors. */
import { parseCsv } from "../nuclear/csv-rows.ts";
import type { LibraryFiles } from "../nuclear/library.ts";
import { InputError } from "../numerics/check.ts";
import { eta10PerOmegaB, type Measured, RANGES } from "../parameters/cosmology.ts";
import { parseMeasured, parseNumber } from "../parameters/measured.ts";

/** How one parameter is sampled by the theory: its flat range by default, and Chebyshev points for a range of this size. */
interface FreeParameter {
  readonly min: number;
  readonly max: number;
  readonly unit: string;
  /** Variable in which the abundances are interpolated. */
  readonly coordinate: "ln" | "linear";
  /** Points for the abundances and for their theory errors over the default range. */
  readonly points: number;
  readonly errorPoints: number;
}

/** The parameters that may be free, in the order of the results. */
export const FREE_PARAMETERS = {
  omegaB: { min: 0.005, max: 0.06, unit: "", coordinate: "ln", points: 17, errorPoints: 9 },
  nEff: { min: 1, max: 6, unit: "", coordinate: "linear", points: 7, errorPoints: 3 },
  tauN: { min: 700, max: 1100, unit: "s", coordinate: "linear", points: 5, errorPoints: 2 },
  xiE: { min: -0.3, max: 0.3, unit: "", coordinate: "linear", points: 7, errorPoints: 3 },
} as const satisfies Readonly<Record<string, FreeParameter>>;

export type FreeKey = keyof typeof FREE_PARAMETERS;
export const FREE_KEYS = Object.keys(FREE_PARAMETERS) as FreeKey[];

/** Prior of one free parameter: flat between min and max, times a Gaussian if there is one. */
export interface Prior {
  readonly key: FreeKey;
  readonly min: number;
  readonly max: number;
  readonly gaussian?: Measured;
  /** Where the Gaussian is from. */
  readonly source?: string;
}

/**
 * The free parameters from text, e.g. `omegaB,nEff`.
 * @throws {InputError} for an unknown or repeated name, or none
 */
export function parseFree(text: string): FreeKey[] {
  const names = text.split(",").map((name) => name.trim());
  for (const [i, name] of names.entries()) {
    if (!FREE_KEYS.includes(name as FreeKey))
      throw new InputError(
        "choice",
        `free = ${text}: ${name || "an empty name"} cannot be free; accepted are ${FREE_KEYS.join(", ")}`,
      );
    if (names.indexOf(name) !== i) throw new InputError("conflict", `free = ${text}: ${name} is given twice`);
  }
  return FREE_KEYS.filter((key) => names.includes(key));
}

interface Statement {
  readonly key: FreeKey;
  readonly gaussian?: Measured;
  readonly range?: readonly [number, number];
  readonly source?: string;
}

/** Reads observations/cmb/NAME.csv: parameters measured otherwise, to be used as priors. */
function namedPriors(name: string, files: LibraryFiles): Statement[] {
  const found = /^[\w-]+$/.test(name) ? files.read(`observations/cmb/${name}.csv`) : undefined;
  if (!found) {
    const names = files.list("observations/cmb").map((file) => file.replace(/\.csv$/, ""));
    throw new InputError(
      "choice",
      `prior = ${name}: write KEY=VALUE±SIGMA or KEY=MIN:MAX, e.g. omegaB=0.02237±0.00015${names.length > 0 ? `, or the name of a measurement: ${names.join(", ")}` : ""}`,
    );
  }
  return parseCsv(found, ["parameter", "value", "sigma", "source"]).map(({ cells }) => ({
    key: requireFreeKey(cells.parameter, `prior ${name}`),
    gaussian: parseMeasured(`${cells.value}±${cells.sigma}`, `prior ${name}`),
    source: cells.source,
  }));
}

function requireFreeKey(text: string, what: string): FreeKey {
  if (FREE_KEYS.includes(text as FreeKey)) return text as FreeKey;
  throw new InputError("choice", `${what}: ${text || "no key"}; accepted are ${FREE_KEYS.join(", ")} and eta10`);
}

function readStatement(item: string, tCmb: number): Statement {
  const at = item.indexOf("=");
  const what = `prior ${item}`;
  const name = item.slice(0, at).trim();
  const text = item.slice(at + 1).trim();
  const scale = name === "eta10" ? 1 / eta10PerOmegaB(tCmb) : 1;
  const key = name === "eta10" ? "omegaB" : requireFreeKey(name, what);
  const accepted = RANGES[name];
  const inside = (value: number) => {
    if (!(value >= accepted.min && value <= accepted.max))
      throw new InputError(
        "range",
        `${what}: ${value} is outside what ${name} may be, ${accepted.min} to ${accepted.max}`,
      );
    return value * scale;
  };
  if (text.includes(":")) {
    const ends = text.split(":");
    if (ends.length !== 2) throw new InputError("syntax", `${what}: write KEY=MIN:MAX for a flat prior`);
    const [min, max] = ends.map((end) => inside(parseNumber(end, what, "write KEY=MIN:MAX")));
    if (!(min < max)) throw new InputError("range", `${what}: the lower end must be below the upper one`);
    return { key, range: [min, max] };
  }
  const { value, sigma } = parseMeasured(text, what);
  return { key, gaussian: { value: inside(value), sigma: sigma * scale }, source: "given" };
}

/** A Gaussian prior this many sigma off a flat range leaves nothing. */
const IMPOSSIBLE_SIGMA = 5;

/**
 * The prior of each free parameter from text: a comma-separated list of `KEY=VALUE±SIGMA` (Gaussian), `KEY=MIN:MAX` (flat)
 * or names of observations/cmb/. Without a statement a parameter is flat over its default range; a Gaussian outside that
 * range carries the range with it.
 * @param tCmb [K], to turn eta10 into omega_b
 * @throws {InputError} for what is not free, repeated, out of range, or impossible
 */
export function parsePriors(
  text: string | undefined,
  free: readonly FreeKey[],
  files: LibraryFiles,
  tCmb: number,
): Prior[] {
  const items = text === undefined ? [] : text.split(",").map((item) => item.trim());
  const statements = items.flatMap((item) =>
    item.includes("=") ? [readStatement(item, tCmb)] : namedPriors(item, files),
  );
  for (const { key } of statements)
    if (!free.includes(key))
      throw new InputError(
        "conflict",
        `prior = ${text}: ${key} is not free; add it to --free ${[...free, key].join(",")}, or set its value`,
      );
  return free.map((key) => {
    const own = statements.filter((statement) => statement.key === key);
    const gaussians = own.filter((statement) => statement.gaussian !== undefined);
    const ranges = own.filter((statement) => statement.range !== undefined);
    if (gaussians.length > 1 || ranges.length > 1)
      throw new InputError("conflict", `prior = ${text}: ${key} is given twice; keep one`);
    const { gaussian, source } = gaussians[0] ?? {};
    const [min, max] = ranges[0]?.range ?? defaultRange(key, gaussian);
    if (gaussian !== undefined) {
      const off = Math.max(min - gaussian.value, gaussian.value - max) / gaussian.sigma;
      if (off > IMPOSSIBLE_SIGMA)
        throw new InputError(
          "range",
          `prior = ${text}: the Gaussian of ${key} lies ${off.toFixed(0)} sigma outside its range ${min} to ${max}; nothing is left`,
        );
    }
    return { key, min, max, ...(gaussian ? { gaussian, source } : {}) };
  });
}

/** Width of the range around a Gaussian prior that lies off the default range [sigma]. */
const AROUND = 6;

function defaultRange(key: FreeKey, gaussian: Measured | undefined): readonly [number, number] {
  const { min, max } = FREE_PARAMETERS[key];
  if (gaussian === undefined || (gaussian.value >= min && gaussian.value <= max)) return [min, max];
  const accepted = RANGES[key];
  return [
    Math.max(accepted.min, gaussian.value - AROUND * gaussian.sigma),
    Math.min(accepted.max, gaussian.value + AROUND * gaussian.sigma),
  ];
}

/** ln of the Gaussian factor of the priors, up to a constant. */
export function lnPrior(priors: readonly Prior[], point: ArrayLike<number>): number {
  let sum = 0;
  priors.forEach(({ gaussian }, i) => {
    if (gaussian) sum -= 0.5 * ((point[i] - gaussian.value) / gaussian.sigma) ** 2;
  });
  return sum;
}
