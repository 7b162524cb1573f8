/** The parameters of one request: names, defaults, accepted ranges, and their resolution into a complete set. */
import { BOLTZMANN, NEWTON_G } from "../constants/codata.ts";
import { HELIUM4_ATOM_MASS, HYDROGEN_ATOM_MASS, NEUTRON_MEAN_LIFE } from "../constants/particle.ts";
import { GRAM_PER_U, HBARC_MEV_CM, HUNDRED_KM_S_MPC, JOULE_PER_MEV } from "../constants/units.ts";
import { InputError, requireRange } from "../numerics/check.ts";

/** A value with its standard deviation, as in `878.4±0.5`. */
export interface Measured {
  readonly value: number;
  readonly sigma: number;
}

/** What a user may set: the camelCase keys of the command line, the batch requests and the library. */
export interface Keys {
  readonly omegaB?: number | Measured;
  readonly eta10?: number | Measured;
  readonly nEff?: number;
  readonly deltaNEff?: number;
  readonly tauN?: number | Measured;
  readonly xiE?: number;
  readonly xiMu?: number;
  readonly xiTau?: number;
  readonly tCmb?: number;
  readonly omegaC?: number;
  readonly h0?: number;
  readonly sumMnu?: number;
  readonly ypMass?: number;
  readonly model?: string;
  readonly alphaFactor?: number;
  readonly tauReion?: number;
  readonly zReion?: number;
  readonly expansion?: string;
  readonly without?: readonly string[];
  readonly network?: string;
  readonly evaluations?: Readonly<Record<string, string>>;
  readonly scales?: Readonly<Record<string, number>>;
  readonly errors?: string;
  readonly samples?: number;
  readonly seed?: number;
  readonly tolerance?: number;
}

/** A complete, validated set of parameters. */
export interface CosmologyParameters {
  readonly omegaB: number;
  /** Standard deviation of omegaB; 0 unless given as value±sigma. */
  readonly omegaBSigma: number;
  readonly eta10: number;
  readonly nEff: number;
  readonly deltaNEff: number;
  /** Neutron mean life [s] and its standard deviation [s]. */
  readonly tauN: number;
  readonly tauNSigma: number;
  readonly xiE: number;
  readonly xiMu: number;
  readonly xiTau: number;
  readonly tCmb: number;
  readonly omegaC: number;
  readonly h0: number;
  readonly sumMnu: number;
  readonly ypMass?: number;
  readonly model: "three-level" | "saha";
  readonly alphaFactor: number;
  readonly tauReion?: number;
  readonly zReion?: number;
  readonly expansion: string;
  readonly without: readonly string[];
  readonly network: string;
  readonly evaluations: Readonly<Record<string, string>>;
  readonly scales: Readonly<Record<string, number>>;
  readonly errors: "linear" | "none" | "sampled";
  readonly samples: number;
  readonly seed: number;
  readonly tolerance: number;
}

/** Standard effective neutrino number to which deltaNEff adds (Bennett et al. 2021, JCAP 04, 073: 3.0440). */
export const STANDARD_N_EFF = 3.044;

/** The one set of defaults; help texts and documents print from it. */
export const DEFAULTS = {
  omegaB: 0.02237,
  deltaNEff: 0,
  tauN: NEUTRON_MEAN_LIFE.value,
  tauNSigma: NEUTRON_MEAN_LIFE.uncertainty,
  xiE: 0,
  xiMu: 0,
  xiTau: 0,
  tCmb: 2.7255,
  omegaC: 0.12,
  h0: 67.36,
  sumMnu: 0.06,
  model: "three-level",
  alphaFactor: 1,
  expansion: "1",
  network: "standard",
  errors: "linear",
  samples: 0,
  seed: 1,
  tolerance: 2e-4,
} as const;

/** Accepted range, unit and meaning of every numeric key. */
export const RANGES: Readonly<
  Record<string, { readonly min: number; readonly max: number; readonly unit: string; readonly meaning: string }>
> = {
  omegaB: { min: 1e-4, max: 0.4, unit: "", meaning: "baryon density Omega_b h^2" },
  eta10: { min: 0.0274, max: 109.5, unit: "", meaning: "1e10 n_b/n_gamma, instead of omegaB" },
  nEff: { min: 0, max: 30, unit: "", meaning: "total effective neutrino number today" },
  deltaNEff: { min: -3.044, max: 26.956, unit: "", meaning: "dark radiation added to the standard 3.044" },
  tauN: { min: 500, max: 1500, unit: "s", meaning: "neutron mean life" },
  xiE: { min: -3, max: 3, unit: "", meaning: "degeneracy mu/T of nu_e" },
  xiMu: { min: -3, max: 3, unit: "", meaning: "degeneracy mu/T of nu_mu" },
  xiTau: { min: -3, max: 3, unit: "", meaning: "degeneracy mu/T of nu_tau" },
  tCmb: { min: 2, max: 4, unit: "K", meaning: "CMB temperature today" },
  omegaC: { min: 0, max: 1, unit: "", meaning: "cold dark matter density Omega_c h^2" },
  h0: { min: 20, max: 150, unit: "km/s/Mpc", meaning: "Hubble constant" },
  sumMnu: { min: 0, max: 3, unit: "eV", meaning: "neutrino mass, one massive eigenstate" },
  ypMass: { min: 0, max: 0.99, unit: "", meaning: "helium mass fraction, instead of the nucleosynthesis run's" },
  alphaFactor: { min: 0.5, max: 2, unit: "", meaning: "factor on the hydrogen recombination coefficient" },
  tauReion: { min: 0, max: 0.3, unit: "", meaning: "optical depth of reionisation" },
  zReion: { min: 1, max: 30, unit: "", meaning: "redshift of reionisation" },
  samples: { min: 0, max: 1e9, unit: "", meaning: "Monte Carlo samples" },
  seed: { min: 0, max: Number.MAX_SAFE_INTEGER, unit: "", meaning: "seed of the Monte Carlo" },
  tolerance: { min: 1e-12, max: 1e-2, unit: "", meaning: "relative error control of the integration" },
};

/** Range of a rate scale. */
export const SCALE_RANGE = { min: 1e-6, max: 1e6 } as const;

/** Corrections that `without` may leave out in nucleosynthesis; finite-mass takes weak-magnetism, qed-e2 takes qed-e3 with it. */
export const NUCLEOSYNTHESIS_CORRECTIONS = [
  "coulomb",
  "radiative",
  "finite-mass",
  "weak-magnetism",
  "qed-e2",
  "qed-e3",
  "incomplete-decoupling",
] as const;

/** Helium abundance 4 n_He4/n_b of the fixed reference composition that turns omega_b into eta. */
export const REFERENCE_YP = 0.247;

/**
 * eta10 per omega_b at CMB temperature T0: 1e10 n_b/n_gamma for Omega_b h^2 = 1, with the mean mass per baryon of
 * neutral hydrogen and helium-4 at the fixed Y_p = 0.247, so that eta and omega_b stay proportional.
 * @param tCmb [K], > 0
 * @returns 273.748 at 2.7255 K
 */
export function eta10PerOmegaB(tCmb: number): number {
  const kT = (BOLTZMANN.value * tCmb) / JOULE_PER_MEV;
  const zeta3 = 1.2020569031595942;
  const nGamma = ((2 * zeta3) / Math.PI ** 2) * (kT / HBARC_MEV_CM) ** 3;
  const criticalDensity = (3 * HUNDRED_KM_S_MPC ** 2) / (8 * Math.PI * NEWTON_G.value) / 1000;
  const massPerBaryon =
    GRAM_PER_U * ((1 - REFERENCE_YP) * HYDROGEN_ATOM_MASS.value + (REFERENCE_YP * HELIUM4_ATOM_MASS.value) / 4);
  return (1e10 * criticalDensity) / massPerBaryon / nGamma;
}

/** Keys that take a value with an error. */
const MEASURED_KEYS = new Set(["omegaB", "eta10", "tauN"]);
const TEXT_KEYS = new Set(["model", "expansion", "network", "errors"]);
const OTHER_KEYS = new Set(["without", "evaluations", "scales"]);

/**
 * Checks keys that a program (not the command line) hands over: each known, each of its kind.
 * @throws {InputError} naming the key, its value and what is accepted
 */
export function checkKeys(keys: Keys): void {
  for (const [key, value] of Object.entries(keys)) {
    if (value === undefined) continue;
    const wrong = (wanted: string) => new InputError("key", `${key} = ${JSON.stringify(value)}: must be ${wanted}`);
    if (TEXT_KEYS.has(key)) {
      if (typeof value !== "string") throw wrong("a string");
    } else if (key in RANGES) {
      const measured =
        MEASURED_KEYS.has(key) &&
        typeof value === "object" &&
        typeof value.value === "number" &&
        typeof value.sigma === "number";
      if (typeof value !== "number" && !measured)
        throw wrong(MEASURED_KEYS.has(key) ? "a number or {value, sigma}" : "a number");
    } else if (!OTHER_KEYS.has(key))
      throw new InputError(
        "key",
        `${key}: unknown key; known are ${[...Object.keys(RANGES), ...TEXT_KEYS, ...OTHER_KEYS].join(", ")}`,
      );
  }
}

function split(input: number | Measured | undefined): { value: number | undefined; sigma: number } {
  if (input === undefined || typeof input === "number") return { value: input, sigma: 0 };
  return { value: input.value, sigma: input.sigma };
}

function ranged(key: string, value: number): number {
  const range = RANGES[key];
  requireRange(key, value, range.unit, range.min, range.max);
  return value;
}

function wholeNumber(key: string, value: number): string {
  return `${key} = ${value}: must be a whole number from ${RANGES[key].min} to ${RANGES[key].max}`;
}

function oneOf<T extends string>(key: string, value: string, allowed: readonly T[]): T {
  if (!(allowed as readonly string[]).includes(value))
    throw new InputError("choice", `${key} = ${value}: accepted are ${allowed.join(", ")}`);
  return value as T;
}

/**
 * Completes and checks a set of keys: defaults filled in, eta10 and omegaB, nEff and deltaNEff derived from each other.
 * Names of reactions, evaluations and networks are checked where the rate library is at hand.
 * @param allowedWithout the corrections that `without` may name in this command
 * @throws {InputError} naming key, value, unit and accepted range
 */
export function resolveParameters(
  keys: Keys,
  allowedWithout: readonly string[] = NUCLEOSYNTHESIS_CORRECTIONS,
): CosmologyParameters {
  const tCmb = ranged("tCmb", keys.tCmb ?? DEFAULTS.tCmb);
  if (keys.omegaB !== undefined && keys.eta10 !== undefined)
    throw new InputError("conflict", "omegaB and eta10 both set the baryon density: give one of them");
  if (keys.nEff !== undefined && keys.deltaNEff !== undefined)
    throw new InputError("conflict", "nEff and deltaNEff both set the neutrino number: give one of them");
  if (keys.tauReion !== undefined && keys.zReion !== undefined)
    throw new InputError("conflict", "tauReion and zReion both set reionisation: give one of them");
  const conversion = eta10PerOmegaB(tCmb);
  const density = split(keys.eta10 ?? keys.omegaB ?? DEFAULTS.omegaB);
  const fromEta = keys.eta10 !== undefined;
  const given = ranged(fromEta ? "eta10" : "omegaB", density.value as number);
  if (!(density.sigma >= 0)) throw new InputError("range", `omegaB sigma = ${density.sigma}: must be 0 or more`);
  const omegaB = fromEta ? given / conversion : given;
  const deltaNEff =
    keys.nEff !== undefined
      ? ranged("nEff", keys.nEff) - STANDARD_N_EFF
      : ranged("deltaNEff", keys.deltaNEff ?? DEFAULTS.deltaNEff);
  const lifetime = split(keys.tauN);
  const tauNSigma = typeof keys.tauN === "object" ? lifetime.sigma : DEFAULTS.tauNSigma;
  if (!(tauNSigma >= 0)) throw new InputError("range", `tauN sigma = ${tauNSigma} s: must be 0 or more`);
  const without = [...new Set(keys.without ?? [])];
  for (const name of without) oneOf("without", name, allowedWithout);
  for (const [reaction, factor] of Object.entries(keys.scales ?? {})) {
    if (!(factor >= SCALE_RANGE.min && factor <= SCALE_RANGE.max))
      throw new InputError(
        "range",
        `scale ${reaction} = ${factor}: accepted are ${SCALE_RANGE.min} to ${SCALE_RANGE.max}`,
      );
  }
  const samples = ranged("samples", keys.samples ?? DEFAULTS.samples);
  if (!Number.isInteger(samples)) throw new InputError("range", wholeNumber("samples", samples));
  const seed = ranged("seed", keys.seed ?? DEFAULTS.seed);
  if (!Number.isInteger(seed)) throw new InputError("range", wholeNumber("seed", seed));
  const requested = oneOf("errors", keys.errors ?? DEFAULTS.errors, ["linear", "none", "sampled"] as const);
  if (requested === "sampled" && samples === 0)
    throw new InputError("conflict", "errors = sampled needs samples: add --samples N");
  if (samples > 0 && keys.errors !== undefined && requested !== "sampled")
    throw new InputError(
      "conflict",
      `errors = ${requested} and samples = ${samples}: samples give sampled errors; give one of them`,
    );
  const optional = (key: "ypMass" | "tauReion" | "zReion") =>
    keys[key] === undefined ? {} : { [key]: ranged(key, keys[key]) };
  return {
    omegaB,
    omegaBSigma: fromEta ? density.sigma / conversion : density.sigma,
    eta10: fromEta ? given : omegaB * conversion,
    nEff: keys.nEff ?? STANDARD_N_EFF + deltaNEff,
    deltaNEff,
    tauN: ranged("tauN", lifetime.value ?? DEFAULTS.tauN),
    tauNSigma,
    xiE: ranged("xiE", keys.xiE ?? DEFAULTS.xiE),
    xiMu: ranged("xiMu", keys.xiMu ?? DEFAULTS.xiMu),
    xiTau: ranged("xiTau", keys.xiTau ?? DEFAULTS.xiTau),
    tCmb,
    omegaC: ranged("omegaC", keys.omegaC ?? DEFAULTS.omegaC),
    h0: ranged("h0", keys.h0 ?? DEFAULTS.h0),
    sumMnu: ranged("sumMnu", keys.sumMnu ?? DEFAULTS.sumMnu),
    ...optional("ypMass"),
    model: oneOf("model", keys.model ?? DEFAULTS.model, ["three-level", "saha"] as const),
    alphaFactor: ranged("alphaFactor", keys.alphaFactor ?? DEFAULTS.alphaFactor),
    ...optional("tauReion"),
    ...optional("zReion"),
    expansion: keys.expansion ?? DEFAULTS.expansion,
    without,
    network: keys.network ?? DEFAULTS.network,
    evaluations: { ...keys.evaluations },
    scales: { ...keys.scales },
    errors: samples > 0 && keys.errors === undefined ? "sampled" : requested,
    samples,
    seed,
    tolerance: ranged("tolerance", keys.tolerance ?? DEFAULTS.tolerance),
  };
}
