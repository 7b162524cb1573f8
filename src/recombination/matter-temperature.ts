/** Matter temperature: adiabatic cooling against Compton heating by the radiation. */

import { photonEnergyDensity } from "../background/expansion.ts";
import { LIGHT_SPEED } from "../constants/codata.ts";
import { JOULE_PER_MEV } from "../constants/units.ts";
import type { RecombinationValues } from "./atomic.ts";

/**
 * Compton rate at T_r = 1 K and one electron per particle, 8 sigma_T a_rad/(3 m_e c) [1/(s K^4)].
 * @see Weymann 1965, Phys. Fluids 8, 2112
 */
export function comptonCoefficient(values: RecombinationValues): number {
  return (8 * values.thomson * photonEnergyDensity(1) * LIGHT_SPEED.value) / (3 * values.electronMass * JOULE_PER_MEV);
}

/**
 * du/d ln a of u = 1 - T_m/T_r: (1 - u) - (Gamma/H) u, which is
 * dT_m/dt = -2 H T_m + Gamma (T_r - T_m), Gamma = [8 sigma_T a T_r^4/(3 m_e c)] x_e/(1 + f_He + x_e).
 * The change of the number of particles by recombination is neglected.
 *
 * @param gammaOverH Gamma/H [1]
 * @returns du/d ln a
 */
export function temperatureRate(u: number, gammaOverH: number): number {
  return 1 - u - gammaOverH * u;
}
