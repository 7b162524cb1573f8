/** Conformal time and comoving distance of a late-time background. */
import { integrateOverA, type LateBackground } from "../background/expansion.ts";
import { LIGHT_SPEED } from "../constants/codata.ts";
import { HUNDRED_KM_S_MPC, METRE_PER_MPC } from "../constants/units.ts";

/** c/(100 km/s/Mpc) [Mpc]. */
export const HUBBLE_LENGTH_MPC = LIGHT_SPEED.value / HUNDRED_KM_S_MPC / METRE_PER_MPC;

/**
 * Comoving particle horizon c int_0^t dt/a = (c/100 km/s/Mpc) int_0^a da/(a^2 H), called conformal time in Mpc.
 * @param z redshift, > -1
 * @returns [Mpc], relative accuracy 1e-9
 */
export function conformalTime(background: LateBackground, z: number): number {
  return HUBBLE_LENGTH_MPC * integrateOverA(background, () => 1, 0, 1 / (1 + z));
}

/**
 * Line-of-sight comoving distance from today to z; in the flat Universe also the transverse one, D_M.
 * @param z redshift, >= 0
 * @returns [Mpc], relative accuracy 1e-9
 */
export function comovingDistance(background: LateBackground, z: number): number {
  return HUBBLE_LENGTH_MPC * integrateOverA(background, () => 1, 1 / (1 + z), 1);
}
