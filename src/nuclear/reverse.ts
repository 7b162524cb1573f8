/** Reverse rates by detailed balance from nuclear masses and spins, never from a table. */
import { AVOGADRO_NUMBER, HBARC_MEV_CM, t9ToMeV } from "../constants/units.ts";
import type { NuclideTable } from "./nuclide.ts";
import { multiplicities, qValueMeV, type Reaction } from "./reaction.ts";

/** ln(reverse/forward) as a function of temperature: constant + power * ln T9 - qOverK/T9. */
export interface ReverseRatio {
  readonly constant: number;
  /** 3/2 (reactants - products). */
  readonly power: number;
  /** Q/k [GK]. */
  readonly qOverK: number;
  /** ln(lambda_r/lambda_f) at T9 [GK]. */
  lnRatio(T9: number): number;
  /** Its derivative d/d ln T9. */
  dLnRatiodLnT9(T9: number): number;
}

/** Products up to which a reverse rate is formed; more bodies hardly ever meet. */
export const MOST_PRODUCTS = 3;

function lnFactorials(ids: readonly string[]): number {
  let sum = 0;
  for (const count of multiplicities(ids).values()) for (let k = 2; k <= count; k++) sum += Math.log(k);
  return sum;
}

/**
 * Ratio of reverse to forward rate of a nuclear reaction of any number of reactants r and up to three products q:
 *
 *   lambda_r/lambda_f = (prod_q mult!/prod_r mult!) N_A^(nq-nr) (kT/(2 pi hbar^2))^(3(nr-nq)/2)
 *                       prod_r (2J+1) m^(3/2) / prod_q (2J+1) m^(3/2) exp(-Q/kT).
 *
 * Convention: both lambda are N_A^(k-1)<sigma v> of their k colliding nuclides, without the factor for identical ones.
 * That factor stands in the flows (per baryon and second, rho_N = n_b/N_A [mol cm^-3], mult = how often a nuclide occurs):
 *
 *   forward flow = rho_N^(nr-1) lambda_f prod_r Y / prod_r mult!
 *   reverse flow = rho_N^(nq-1) lambda_r prod_q Y / prod_q mult!
 *
 * which are equal in nuclear statistical equilibrium; this fixes the factorials above (for d + d -> n + he3 the ratio holds
 * a factor 1/2). The photon has no abundance: for one product lambda_r is a photodisintegration rate [s^-1]. Maxwell-Boltzmann
 * statistics; excited states of the nuclei are neglected. Masses are nuclear, with their binding; Q is from atomic masses.
 *
 * @returns null for decays (weak: no detailed balance here) and for more than three products
 * @throws {InputError} if a nuclide is not in the table
 * @see Fowler, Caughlan & Zimmerman 1967, ARA&A 5, 525, sec. II (from memory)
 */
export function reverseRatio(reaction: Reaction, nuclides: NuclideTable): ReverseRatio | null {
  const { reactants, products } = reaction;
  if (reaction.isDecay || products.length > MOST_PRODUCTS) return null;
  const qMeV = qValueMeV(reaction, nuclides);
  const lnStates = (ids: readonly string[]) =>
    ids.reduce((sum, id) => {
      const { spin, nuclearMassMeV } = nuclides.get(id)!;
      return sum + Math.log(2 * spin + 1) + 1.5 * Math.log(nuclearMassMeV);
    }, 0);
  const power = 1.5 * (reactants.length - products.length);
  // (kT/(2 pi (hbar c)^2)) at T9 = 1 [cm^-2 per MeV of mass], and N_A, per surplus reactant.
  const lnPerBody = 1.5 * Math.log(t9ToMeV(1) / (2 * Math.PI * HBARC_MEV_CM ** 2)) - Math.log(AVOGADRO_NUMBER);
  const constant =
    lnFactorials(products) -
    lnFactorials(reactants) +
    (reactants.length - products.length) * lnPerBody +
    lnStates(reactants) -
    lnStates(products);
  const qOverK = qMeV / t9ToMeV(1);
  return {
    constant,
    power,
    qOverK,
    lnRatio: (T9) => constant + power * Math.log(T9) - qOverK / T9,
    dLnRatiodLnT9: (T9) => power + qOverK / T9,
  };
}
