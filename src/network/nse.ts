/** Nuclear statistical equilibrium: initial abundances of a network, and an oracle for detailed balance. */
import { BOLTZMANN } from "../constants/codata.ts";
import { AVOGADRO_NUMBER, HBARC_MEV_CM, JOULE_PER_MEV } from "../constants/units.ts";
import { requirePositive } from "../numerics/check.ts";

/** What equilibrium needs of a nuclide. */
export interface EquilibriumNuclide {
  readonly Z: number;
  readonly A: number;
  /** Spin J of the ground state. */
  readonly spin: number;
  readonly nuclearMassMeV: number;
}

/**
 * Logarithm of the equilibrium abundance Y_i = n_i/n_b given the abundances of free neutrons and protons:
 * Y_i n_b = g_i (m_i kT/2 pi hbar^2)^(3/2) exp((Z mu_p + N mu_n - m_i)/kT), g = 2J + 1, with mu from Y_n and Y_p.
 * @param nuclide the nuclide asked for
 * @param neutron,proton the free nucleons (masses, spins)
 * @param T [K], > 0
 * @param rhoN baryon density n_b/N_A [mol cm^-3], > 0
 * @param Yn,Yp free abundances, > 0
 * @see Clayton 1983, Principles of Stellar Evolution and Nucleosynthesis, sec. 3-2 (Saha equation of nuclei)
 */
export function lnEquilibriumAbundance(
  nuclide: EquilibriumNuclide,
  neutron: EquilibriumNuclide,
  proton: EquilibriumNuclide,
  T: number,
  rhoN: number,
  Yn: number,
  Yp: number,
): number {
  requirePositive("T", T, "K");
  requirePositive("rhoN", rhoN, "mol/cm3");
  const kT = (BOLTZMANN.value * T) / JOULE_PER_MEV;
  const nb = rhoN * AVOGADRO_NUMBER;
  // ln of Y n_b / [g (m kT/2 pi hbar^2)^(3/2)] = (mu - m)/kT
  const lnStates = (x: EquilibriumNuclide) =>
    Math.log(2 * x.spin + 1) +
    1.5 * Math.log((x.nuclearMassMeV * kT) / (2 * Math.PI * HBARC_MEV_CM ** 2)) -
    Math.log(nb);
  const N = nuclide.A - nuclide.Z;
  const binding = nuclide.Z * proton.nuclearMassMeV + N * neutron.nuclearMassMeV - nuclide.nuclearMassMeV;
  return (
    lnStates(nuclide) +
    binding / kT +
    nuclide.Z * (Math.log(Yp) - lnStates(proton)) +
    N * (Math.log(Yn) - lnStates(neutron))
  );
}
