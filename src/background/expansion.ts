/** Expansion rate: H from a density, and H(z), age and equality of the late flat Universe with photons, neutrinos, matter and Lambda. */
import { BOLTZMANN, HBAR, LIGHT_SPEED, NEWTON_G } from "../constants/codata.ts";
import { HUNDRED_KM_S_MPC, KELVIN_PER_MEV, NEWTON_G_CGS } from "../constants/units.ts";
import { InputError } from "../numerics/check.ts";
import { gaussLegendre } from "../numerics/quadrature.ts";
import { tabulatedDensityRatio } from "./massive-neutrino.ts";

/**
 * Friedmann equation of a flat Universe, H = sqrt(8 pi G rho/3).
 * @param rho total density [g cm^-3], > 0
 * @returns H [1/s]
 */
export function hubbleFromDensity(rho: number): number {
  return Math.sqrt(((8 * Math.PI) / 3) * NEWTON_G_CGS * rho);
}

/** What the late-time background depends on; units and ranges as in the options of the command. */
export interface LateCosmology {
  /** Omega_b h^2 and Omega_c h^2. */
  readonly omegaB: number;
  readonly omegaC: number;
  /** Hubble constant [km/s/Mpc]. */
  readonly h0: number;
  /** Photon temperature today [K]. */
  readonly tCmb: number;
  /** Total effective number of neutrinos; 0: none. */
  readonly nEff: number;
  /** Mass of the one massive eigenstate [eV]; 0: three massless ones. */
  readonly sumMnu: number;
}

/** The late flat Universe. Densities are Omega h^2 today. */
export interface LateBackground {
  readonly cosmology: LateCosmology;
  readonly omegaGamma: number;
  /** The neutrinos as if all three were massless. */
  readonly omegaNuMassless: number;
  /** The massive eigenstate today; 0 if there is none. */
  readonly omegaNuMassive: number;
  /** Baryons, cold dark matter and the massive neutrino. */
  readonly omegaM: number;
  readonly omegaLambda: number;
  /** Equality of (omega_b + omega_c) with photons and three massless neutrinos. */
  readonly zEq: number;
  /** a^2 H/(100 km/s/Mpc), finite at a = 0. @param a scale factor, 1 today */
  conformalRate(a: number): number;
  /** H [1/s]. @param z redshift, > -1 */
  hubble(z: number): number;
  /** Writes [H in 1/s, d ln H/d ln a] at ln a; the scale factor may be given where it is known. */
  hubbleAndSlope(logA: number, out: Float64Array, a?: number): void;
}

/**
 * Energy density of black-body radiation, (pi^2/15) (kT)^4/(hbar c)^3.
 * @param T [K], > 0
 * @returns [J m^-3]
 */
export function photonEnergyDensity(T: number): number {
  const kT = BOLTZMANN.value * T;
  return (Math.PI ** 2 / 15) * kT * (kT / (HBAR.value * LIGHT_SPEED.value)) ** 3;
}

/**
 * Photon mass density today as Omega h^2: that of {@link photonEnergyDensity} over 3 (100 km/s/Mpc)^2/(8 pi G).
 * @param tCmb [K], > 0
 * @param newtonG [m^3/(kg s^2)]
 * @returns 2.47298e-5 at 2.7255 K
 */
export function photonDensity(tCmb: number, newtonG: number = NEWTON_G.value): number {
  const rho = photonEnergyDensity(tCmb) / LIGHT_SPEED.value ** 2;
  return (rho * 8 * Math.PI * newtonG) / (3 * HUNDRED_KM_S_MPC ** 2);
}

/**
 * Mass density that Omega h^2 = 1 stands for, 3 (100 km/s/Mpc)^2/(8 pi G).
 * @returns [g cm^-3]
 */
export function unitDensity(newtonG: number = NEWTON_G.value): number {
  return (3 * HUNDRED_KM_S_MPC ** 2) / (8 * Math.PI * newtonG) / 1000;
}

/**
 * Temperature of the neutrinos today that makes three of them N_eff: (4/11)^(1/3) (N_eff/3)^(1/4) T0.
 * @returns [K]
 */
export function neutrinoTemperature(tCmb: number, nEff: number): number {
  return Math.cbrt(4 / 11) * (nEff / 3) ** 0.25 * tCmb;
}

/**
 * Builds H(z) of a flat Universe of photons, three neutrinos of equal temperature (one of them with mass `sumMnu`,
 * exact Fermi-Dirac density), baryons, cold dark matter and a cosmological constant that fills up to flatness.
 * N_eff is the total that is given. Relative accuracy of H: 1e-9.
 *
 * @param newtonG [m^3/(kg s^2)], CODATA unless its effect is studied
 * @throws {InputError} if flatness would need a negative cosmological constant (refused), which includes Omega_m > 1
 */
export function lateBackground(cosmology: LateCosmology, newtonG: number = NEWTON_G.value): LateBackground {
  const { omegaB, omegaC, h0, tCmb, nEff, sumMnu } = cosmology;
  const h = h0 / 100;
  const omegaGamma = photonDensity(tCmb, newtonG);
  const omegaNuMassless = omegaGamma * (7 / 8) * (4 / 11) ** (4 / 3) * nEff;
  const massive = nEff > 0 && sumMnu > 0;
  // ln(m c^2/k T_nu) today; the massive third enters as I(y a).
  const logY0 = massive ? Math.log((sumMnu * 1e-6 * KELVIN_PER_MEV) / neutrinoTemperature(tCmb, nEff)) : 0;
  const ratio = new Float64Array(2);
  if (massive) tabulatedDensityRatio(logY0, ratio);
  const third = massive ? omegaNuMassless / 3 : 0;
  const omegaNuMassive = massive ? third * ratio[0] : 0;
  const relativistic = omegaGamma + omegaNuMassless - third;
  const omegaCb = omegaB + omegaC;
  const omegaM = omegaCb + omegaNuMassive;
  const omegaLambda = h * h - omegaM - relativistic;
  if (!(omegaLambda >= 0))
    throw new InputError(
      "flatness",
      `h0 = ${h0} km/s/Mpc: matter and radiation (Omega h^2 = ${(omegaM + relativistic).toPrecision(5)}) exceed h^2 = ${(h * h).toPrecision(5)}, ` +
        `and a negative cosmological constant is refused; raise h0 above ${(100 * Math.sqrt(omegaM + relativistic)).toPrecision(5)} or lower omegaC, omegaB`,
    );
  /** a^4 (H/100 km/s/Mpc)^2 and its derivative by ln a in slope[0]. */
  const slope = new Float64Array(1);
  const squared = (a: number, logA: number): number => {
    const matter = omegaCb * a;
    const lambda = omegaLambda * a * a * a * a;
    let sum = relativistic + matter + lambda;
    let derivative = matter + 4 * lambda;
    if (massive) {
      tabulatedDensityRatio(logY0 + logA, ratio);
      sum += third * ratio[0];
      derivative += third * ratio[1];
    }
    slope[0] = derivative;
    return sum;
  };
  return {
    cosmology,
    omegaGamma,
    omegaNuMassless,
    omegaNuMassive,
    omegaM,
    omegaLambda,
    zEq: omegaCb / (omegaGamma + omegaNuMassless) - 1,
    conformalRate: (a) => Math.sqrt(squared(a, massive ? Math.log(a) : 0)),
    hubble(z) {
      const a = 1 / (1 + z);
      return (HUNDRED_KM_S_MPC * Math.sqrt(squared(a, Math.log(a)))) / (a * a);
    },
    hubbleAndSlope(logA, out, a = Math.exp(logA)) {
      const sum = squared(a, logA);
      out[0] = (HUNDRED_KM_S_MPC * Math.sqrt(sum)) / (a * a);
      out[1] = slope[0] / (2 * sum) - 2;
    },
  };
}

const POINTS = 12;

/**
 * Integral of f(a)/(a^2 H/100 km/s/Mpc) da from a1 to a2, in t = sqrt(a) on panels that double in t, so that equality,
 * the mass of the neutrino and Lambda are each resolved. Relative accuracy 1e-10 for smooth f.
 * @param f of the scale factor
 * @param a1 >= 0
 */
export function integrateOverA(background: LateBackground, f: (a: number) => number, a1: number, a2: number): number {
  const { nodes, weights } = gaussLegendre(POINTS);
  const start = Math.sqrt(a1);
  const end = Math.sqrt(a2);
  let sum = 0;
  let lo = start;
  while (lo < end) {
    let hi = Math.max(2 * lo, 2e-3);
    if (hi > 0.75 * end) hi = end;
    const half = (hi - lo) / 2;
    const middle = (lo + hi) / 2;
    for (let i = 0; i < POINTS; i++) {
      const t = middle + half * nodes[i];
      const a = t * t;
      sum += (weights[i] * half * 2 * t * f(a)) / background.conformalRate(a);
    }
    lo = hi;
  }
  return sum;
}

/**
 * Age of the Universe at redshift z, int_0^a da/(a H).
 * @param z redshift, > -1
 * @returns [s], relative accuracy 1e-9
 */
export function ageAt(background: LateBackground, z: number): number {
  return integrateOverA(background, (a) => a, 0, 1 / (1 + z)) / HUNDRED_KM_S_MPC;
}
