/** Ionisation equilibrium (Saha) of hydrogen and of both ionisations of helium: start and comparison of every recombination history. */
import { BOLTZMANN, LIGHT_SPEED, PLANCK } from "../constants/codata.ts";
import { CM_PER_METRE, CM2_PER_M2, JOULE_PER_MEV, KELVIN_PER_WAVENUMBER } from "../constants/units.ts";
import { CalculationError, requirePositive } from "../numerics/check.ts";
import { RECOMBINATION_VALUES, type RecombinationValues } from "./atomic.ts";

/** What the Saha equations need, from the constants. */
export interface SahaCoefficients {
  /** 2 pi m_e k/h^2 [1/(cm^2 K)]. */
  readonly thermal: number;
  /** Ionisation energies over k [K]. */
  readonly hIonisation: number;
  readonly he1Ionisation: number;
  readonly he2Ionisation: number;
}

/** Temperature of a wavenumber, h c k~/k_B. @param wavenumber [1/m] @returns [K] */
export function termTemperature(wavenumber: number): number {
  return (wavenumber / CM_PER_METRE) * KELVIN_PER_WAVENUMBER;
}

/** Coefficients of the Saha equations. The mass in the thermal factor is that of the electron, not a reduced mass. */
export function sahaCoefficients(values: RecombinationValues = RECOMBINATION_VALUES): SahaCoefficients {
  const electronMass = (values.electronMass * JOULE_PER_MEV) / LIGHT_SPEED.value ** 2;
  return {
    thermal: (2 * Math.PI * electronMass * BOLTZMANN.value) / PLANCK.value ** 2 / CM2_PER_M2,
    hIonisation: termTemperature(values.hIonisation),
    he1Ionisation: termTemperature(values.he1Ionisation),
    he2Ionisation: termTemperature(values.he2Ionisation),
  };
}

/**
 * Saha factor n_e n_(i+1)/n_i = g (2 pi m_e kT/h^2)^(3/2) exp(-E/kT).
 * @param thermal 2 pi m_e k/h^2 [1/(cm^2 K)]
 * @param T [K], > 0
 * @param weight ratio of statistical weights 2 g_(i+1)/g_i: H 1, He II -> He I 4, He III -> He II 1
 * @param energy ionisation energy over k [K]
 * @returns [cm^-3]
 */
export function sahaFactor(thermal: number, T: number, weight: number, energy: number): number {
  const x = thermal * T;
  return weight * x * Math.sqrt(x) * Math.exp(-energy / T);
}

/**
 * Ionised fraction of pure hydrogen in equilibrium: x^2/(1 - x) = S, S = (2 pi m_e kT/h^2)^(3/2) exp(-E/kT)/n_H.
 *
 * @param T   radiation temperature [K], > 0
 * @param nH  hydrogen nuclei, neutral and ionised [cm^-3], > 0
 * @returns   x in [0, 1]; too low once recombination leaves equilibrium (x below about 0.99)
 * @see Peebles 1968, ApJ 153, 1
 */
export function sahaHydrogen(T: number, nH: number, c: SahaCoefficients = sahaCoefficients()): number {
  requirePositive("T", T, "K");
  requirePositive("nH", nH, "cm^-3");
  const S = sahaFactor(c.thermal, T, 1, c.hIonisation) / nH;
  return 2 / (1 + Math.sqrt(1 + 4 / S)); // the root that keeps all digits as S -> 0
}

/** Equilibrium composition; every fraction to full relative precision, so that nothing need be formed as 1 - x. */
export interface SahaState {
  /** n_e/n_H. */
  readonly xe: number;
  /** Ionised and neutral hydrogen over all hydrogen. */
  readonly xp: number;
  readonly neutralH: number;
  /** He I, He II and He III over all helium. */
  readonly he1: number;
  readonly he2: number;
  readonly he3: number;
}

/**
 * Ionisation equilibrium of hydrogen and helium: x_e = x_p + f_He (he2 + 2 he3), each stage by its Saha equation with
 * the common electron density. Solved by Newton's method in ln x_e, bracketed.
 *
 * @param T    [K], > 0
 * @param nH   [cm^-3], > 0
 * @param fHe  n_He/n_H, >= 0
 * @param double false: helium is ionised once only
 * @returns composition, relative accuracy 1e-13
 * @throws {CalculationError} if the iteration does not converge
 */
export function sahaEquilibrium(
  T: number,
  nH: number,
  fHe: number,
  c: SahaCoefficients = sahaCoefficients(),
  double = true,
): SahaState {
  const sH = sahaFactor(c.thermal, T, 1, c.hIonisation) / nH;
  const s1 = sahaFactor(c.thermal, T, 4, c.he1Ionisation) / nH;
  const s2 = double ? sahaFactor(c.thermal, T, 1, c.he2Ionisation) / nH : 0;
  // Electrons of hydrogen alone are a lower bound; everything ionised is an upper one.
  let lo = 2 / (1 + Math.sqrt(1 + 4 / sH));
  if (!(lo > 0)) lo = Math.exp(0.5 * logSahaHydrogen(T, nH, c));
  if (!(lo > 0)) return { xe: 0, xp: 0, neutralH: 1, he1: 1, he2: 0, he3: 0 };
  let hi = 1 + 2 * fHe;
  let xe = Math.min(Math.max(lo * (1 + 1e-9), lo), hi);
  for (let iteration = 0; iteration < 200; iteration++) {
    const r1 = s1 / xe;
    const r2 = s2 / xe;
    const helium = 1 + r1 * (1 + r2);
    const hydrogen = sH / (xe + sH);
    const electrons = hydrogen + (fHe * r1 * (1 + 2 * r2)) / helium;
    const residual = electrons - xe;
    if (residual > 0) lo = xe;
    else hi = xe;
    // d ln(electrons)/d ln(xe): minus the variance of charge over its mean.
    const charge = (r1 * (1 + 2 * r2)) / helium;
    const square = (r1 * (1 + 4 * r2)) / helium;
    const spread = hydrogen * (1 - hydrogen) + fHe * (square - charge * charge);
    let next = xe * Math.exp(residual / (xe + spread));
    if (!(next > lo && next < hi)) next = Math.sqrt(lo * hi);
    const change = Math.abs(next - xe);
    xe = next;
    if (change <= 4e-16 * xe || hi - lo <= 4e-16 * hi) return composition(xe, sH, s1, s2);
  }
  throw new CalculationError("saha", `Saha equilibrium at T = ${T} K did not converge`);
}

function composition(xe: number, sH: number, s1: number, s2: number): SahaState {
  const r1 = s1 / xe;
  const r2 = s2 / xe;
  const helium = 1 + r1 * (1 + r2);
  return {
    xe,
    xp: sH / (xe + sH),
    neutralH: xe / (xe + sH),
    he1: 1 / helium,
    he2: r1 / helium,
    he3: (r1 * r2) / helium,
  };
}

/** ln of the Saha factor of hydrogen over n_H, safe where the factor underflows. */
function logSahaHydrogen(T: number, nH: number, c: SahaCoefficients): number {
  return 1.5 * Math.log(c.thermal * T) - c.hIonisation / T - Math.log(nH);
}
