/** The two ways to state helium: mass fraction of neutral H + He, and nuclei per hydrogen nucleus. Never 4 n_He/n_b. */
import { HELIUM4_ATOM_MASS, HYDROGEN_ATOM_MASS } from "../constants/particle.ts";

/** m(4He)/m(1H) of the neutral atoms, 3.971526. */
export const HELIUM_HYDROGEN_MASS_RATIO = HELIUM4_ATOM_MASS.value / HYDROGEN_ATOM_MASS.value;

/**
 * Helium mass fraction of neutral hydrogen and helium from the number ratio: Y = f m_He/(m_H + f m_He).
 * @param fHe n_He4/n_H, >= 0
 */
export function heliumMassFraction(fHe: number, massRatio: number = HELIUM_HYDROGEN_MASS_RATIO): number {
  return (fHe * massRatio) / (1 + fHe * massRatio);
}

/** Inverse of {@link heliumMassFraction}: n_He/n_H = Y/(3.971526 (1 - Y)). @param ypMass in [0, 1) */
export function heliumToHydrogen(ypMass: number, massRatio: number = HELIUM_HYDROGEN_MASS_RATIO): number {
  return ypMass / (massRatio * (1 - ypMass));
}
