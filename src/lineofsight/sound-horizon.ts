/** Sound speed of the baryon-photon fluid and the comoving sound horizon. */
import { integrateOverA, type LateBackground } from "../background/expansion.ts";
import { HUBBLE_LENGTH_MPC } from "./distances.ts";

/**
 * Baryon loading today, R0 = 3 rho_b/(4 rho_gamma); R = R0/(1 + z).
 * @returns [1]
 */
export function baryonLoading(background: LateBackground): number {
  return (3 * background.cosmology.omegaB) / (4 * background.omegaGamma);
}

/**
 * Comoving sound horizon r_s = int_0^a c_s da/(a^2 H), c_s = c/sqrt(3 (1 + R)).
 * @param z redshift, > -1
 * @returns [Mpc], relative accuracy 1e-9
 */
export function soundHorizon(background: LateBackground, z: number): number {
  const R0 = baryonLoading(background);
  return HUBBLE_LENGTH_MPC * integrateOverA(background, (a) => 1 / Math.sqrt(3 * (1 + R0 * a)), 0, 1 / (1 + z));
}
