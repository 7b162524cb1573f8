/** The only place that converts units: K <-> T9 <-> MeV, Mpc <-> cm, MeV4 -> g/cm3, natural time -> s. */
import {
  ATOMIC_MASS_CONSTANT,
  AVOGADRO,
  BOLTZMANN,
  ELEMENTARY_CHARGE,
  HBAR,
  LIGHT_SPEED,
  NEWTON_G,
  PLANCK,
} from "./codata.ts";

/** 1 MeV in joule (exact). */
export const JOULE_PER_MEV = ELEMENTARY_CHARGE.value * 1e6;
/** Kelvin per MeV: e/k_B times 1e6 (exact in the 2019 SI). */
export const KELVIN_PER_MEV = JOULE_PER_MEV / BOLTZMANN.value;
/** GK per MeV, 11.6045... */
export const GK_PER_MEV = KELVIN_PER_MEV / 1e9;
/** hbar in MeV s. */
export const HBAR_MEV_S = HBAR.value / JOULE_PER_MEV;
/** hbar c in MeV cm. */
export const HBARC_MEV_CM = HBAR_MEV_S * LIGHT_SPEED.value * 100;
/** hbar c in MeV fm. */
export const HBARC_MEV_FM = HBARC_MEV_CM * 1e13;
/** Speed of light in km/s. */
export const LIGHT_SPEED_KM_S = LIGHT_SPEED.value / 1000;
/** Parsec in metre: IAU 2015 Resolution B2 (exact, 648000/pi au). */
export const METRE_PER_PARSEC = 3.0856775814913673e16;
/** Megaparsec in metre. */
export const METRE_PER_MPC = METRE_PER_PARSEC * 1e6;
/** Julian year in seconds (IAU): 365.25 d. */
export const SECONDS_PER_JULIAN_YEAR = 365.25 * 86400;
/** Centimetre per metre, and the same squared and cubed. */
export const CM_PER_METRE = 100;
export const CM2_PER_M2 = 1e4;
export const CM3_PER_M3 = 1e6;
/** Kelvin per 1/cm of a spectroscopic term (wavenumber): h c/k_B, exact in the 2019 SI. */
export const KELVIN_PER_WAVENUMBER = (PLANCK.value * LIGHT_SPEED.value * 100) / BOLTZMANN.value;
/** Gram per MeV/c2. */
export const GRAM_PER_MEV = (JOULE_PER_MEV / LIGHT_SPEED.value ** 2) * 1000;
/** g/cm3 per MeV4 (natural units, hbar = c = 1). */
export const G_CM3_PER_MEV4 = GRAM_PER_MEV / HBARC_MEV_CM ** 3;
/** cm^-3 per MeV3 (natural units). */
export const PER_CM3_PER_MEV3 = 1 / HBARC_MEV_CM ** 3;
/** Newton's constant in cm3/(g s2). */
export const NEWTON_G_CGS = NEWTON_G.value * 1000;
/** H0 of 100 km/s/Mpc in 1/s. */
export const HUNDRED_KM_S_MPC = 1e5 / METRE_PER_MPC;
/** Atomic mass constant in gram. */
export const GRAM_PER_U = ATOMIC_MASS_CONSTANT.value * GRAM_PER_MEV;
/** Avogadro's number, for n = N_A rho_N. */
export const AVOGADRO_NUMBER = AVOGADRO.value;

/** Kelvin to GK. @param T temperature [K] @returns T9 [GK] */
export function kelvinToT9(T: number): number {
  return T * 1e-9;
}
/** GK to kelvin. @param T9 [GK] @returns T [K] */
export function t9ToKelvin(T9: number): number {
  return T9 * 1e9;
}
/** Kelvin to MeV. @param T temperature [K] @returns k_B T [MeV] */
export function kelvinToMeV(T: number): number {
  return T / KELVIN_PER_MEV;
}
/** MeV to kelvin. @param TMeV k_B T [MeV] @returns T [K] */
export function mevToKelvin(TMeV: number): number {
  return TMeV * KELVIN_PER_MEV;
}
/** GK to MeV. @param T9 [GK] @returns k_B T [MeV] */
export function t9ToMeV(T9: number): number {
  return T9 / GK_PER_MEV;
}
/** MeV to GK. @param TMeV k_B T [MeV] @returns T9 [GK] */
export function mevToT9(TMeV: number): number {
  return TMeV * GK_PER_MEV;
}
