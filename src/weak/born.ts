/** Born level of the n <-> p rates: infinitely heavy nucleons, no electromagnetic correction; the frame of all corrections. */
import { requirePositive } from "../numerics/check.ts";
import type { WeakInputs } from "./inputs.ts";

/**
 * Terms of the phase-space integrand at one signed electron energy E, after the corrections.
 *
 * Signed energies keep the three channels of each direction in one integral: E > 0 is an electron, E < 0 a positron,
 * k = E - Q > 0 a neutrino and k < 0 an antineutrino, so that with f(k) = 1/(exp(k/T_nu - xi) + 1)
 *   Gamma(n -> p) = K int p^2 dp sum_(+-E) f_e(-E) [n0 f + n1 df/dk + n2 d2f/dk2],
 *   Gamma(p -> n) = K int p^2 dp sum_(+-E) f_e(E)  [p0 h + p1 dh/dk + p2 d2h/dk2], h(k) = 1 - f(k),
 * each coefficient linear in the photon temperature, n0 = n0[0] + T n0[1] and so on; n2 and p2 are proportional to T.
 * At Born level only n0 = p0 = k^2 remain.
 * @see Weinberg 1972, Gravitation and Cosmology, sec. 15.7; Dicus et al. 1982, Phys. Rev. D 26, 2694
 */
export interface Integrand {
  readonly n0: readonly [number, number];
  readonly n1: readonly [number, number];
  readonly n2: number;
  readonly p0: readonly [number, number];
  readonly p1: readonly [number, number];
  readonly p2: number;
}

/** Born integrand k^2 (E - Q = k) [MeV^2]; @param E signed electron energy [MeV], |E| >= m_e */
export function bornIntegrand(E: number, inputs: WeakInputs): Integrand {
  const k2 = (E - inputs.Q) ** 2;
  return { n0: [k2, 0], n1: [0, 0], n2: 0, p0: [k2, 0], p1: [0, 0], p2: 0 };
}

/**
 * Born phase space of neutron decay in closed form, lambda_0 = int_1^q de e sqrt(e^2 - 1) (q - e)^2
 * = sqrt(q^2 - 1) (q^4/30 - 3 q^2/20 - 2/15) + (q/4) ln(q + sqrt(q^2 - 1)).
 * @param q Q/m_e, > 1
 * @returns lambda_0 [m_e^5], 1.636099 for q = 2.530989; loses digits as (q - 1)^(-7/2) near threshold
 * @throws {RangeError} if q is not above 1
 */
export function bornPhaseSpace(q: number): number {
  requirePositive("q - 1", q - 1, "");
  const root = Math.sqrt(q * q - 1);
  return root * (q ** 4 / 30 - (3 * q * q) / 20 - 2 / 15) + (q / 4) * Math.log(q + root);
}
