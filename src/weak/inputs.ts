/** What the weak rates are computed from: the switches of the corrections and the measured constants. */
import { ELECTRON_MASS, FINE_STRUCTURE, NEUTRON_PROTON_MASS_DIFFERENCE, PROTON_MASS } from "../constants/codata.ts";
import { AXIAL_COUPLING, PROTON_RADIUS, WEAK_MAGNETISM } from "../constants/particle.ts";
import { HBARC_MEV_FM } from "../constants/units.ts";
import { requireFinite, requirePositive } from "../numerics/check.ts";

/** Corrections to the Born rates, each a switch. */
export interface WeakOptions {
  /** Coulomb attraction of electron and proton (relativistic Fermi function). */
  readonly coulomb: boolean;
  /** Zero-temperature radiative correction. */
  readonly radiative: boolean;
  /** Recoil and thermal motion of the nucleons, to first order in 1/M. */
  readonly finiteMass: boolean;
  /** Weak magnetism; part of the 1/M terms, so ignored unless finiteMass is on. */
  readonly weakMagnetism: boolean;
}

/** All corrections on: what a run uses unless told otherwise. */
export const WEAK_DEFAULTS: WeakOptions = { coulomb: true, radiative: true, finiteMass: true, weakMagnetism: true };

/** Born level: infinite nucleon mass, no electromagnetic correction. */
export const BORN: WeakOptions = { coulomb: false, radiative: false, finiteMass: false, weakMagnetism: false };

/** Measured constants that enter the rates. Energies in MeV, hbar = c = 1. */
export interface WeakInputs {
  /** Q = m_n - m_p [MeV]. */
  readonly Q: number;
  /** Electron mass [MeV]. */
  readonly electronMass: number;
  /** Proton mass [MeV]. */
  readonly protonMass: number;
  /** Axial coupling |g_A/g_V|. */
  readonly gA: number;
  /** Weak-magnetism coupling f. */
  readonly magnetism: number;
  /** Fine-structure constant. */
  readonly alpha: number;
  /** Proton charge radius [1/MeV], the cut-off of the Fermi function. */
  readonly protonRadius: number;
}

/** CODATA 2022 and PDG values. */
export const WEAK_INPUTS: WeakInputs = {
  Q: NEUTRON_PROTON_MASS_DIFFERENCE.value,
  electronMass: ELECTRON_MASS.value,
  protonMass: PROTON_MASS.value,
  gA: AXIAL_COUPLING.value,
  magnetism: WEAK_MAGNETISM.value,
  alpha: FINE_STRUCTURE.value,
  protonRadius: PROTON_RADIUS.value / HBARC_MEV_FM,
};

/** Mean nucleon mass M = (m_n + m_p)/2 [MeV], the expansion parameter of the finite-mass terms. */
export function nucleonMass(inputs: WeakInputs): number {
  return inputs.protonMass + inputs.Q / 2;
}

/** @throws {RangeError} unless masses, couplings and radius are positive and finite and Q exceeds the electron mass */
export function checkWeakInputs(inputs: WeakInputs): void {
  requirePositive("Q", inputs.Q, "MeV");
  requirePositive("electronMass", inputs.electronMass, "MeV");
  requirePositive("protonMass", inputs.protonMass, "MeV");
  requirePositive("gA", inputs.gA, "");
  requireFinite("magnetism", inputs.magnetism, "");
  requirePositive("alpha", inputs.alpha, "");
  requirePositive("protonRadius", inputs.protonRadius, "1/MeV");
  if (!(inputs.Q > inputs.electronMass))
    throw new RangeError(`Q = ${inputs.Q} MeV: must exceed the electron mass, or the free neutron would not decay`);
}
