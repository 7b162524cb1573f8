/** Every constant of recombination with its source: levels and rates of hydrogen and helium, recombination-coefficient fits, masses. */

import { ELECTRON_MASS, NEWTON_G, THOMSON } from "../constants/codata.ts";
import type { Constant } from "../constants/constant.ts";
import { HELIUM4_ATOM_MASS, HYDROGEN_ATOM_MASS } from "../constants/particle.ts";

const NIST = "NIST Atomic Spectra Database, from memory";
const PEQUIGNOT =
  "fit a t^b/(1 + c t^d), t = T/1e4 K: Pequignot, Petitjean & Boisson 1991, A&A 251, 680, from memory; within 0.16 % of Hummer 1994, MNRAS 268, 109";
const SINGLETS =
  "form of Verner & Ferland 1996, ApJS 103, 467, fitted to Hummer & Storey 1998, MNRAS 297, 1073, by Seager, Sasselov & Scott 2000, ApJS 128, 407, from memory";
const TRIPLETS =
  "form of Verner & Ferland 1996, ApJS 103, 467, fitted to Hummer & Storey 1998, MNRAS 297, 1073, by Wong, Moss & Scott 2008, MNRAS 386, 1023, from memory";
const ESCAPE =
  "fit 1/(1 + a gamma^b): Kholupenko, Ivanchik & Varshalovich 2007, MNRAS 378, L39, and Wong, Moss & Scott 2008, MNRAS 386, 1023, from memory";

const entry = (value: number, unit: string, source: string, uncertainty = 0): Constant => ({
  value,
  uncertainty,
  unit,
  source,
});

/**
 * The constants in the order of the provenance table. `uncertainty` is 0 where none is stated. Wavenumbers are those of
 * the transition from the ground state unless the name says ionisation.
 */
export const RECOMBINATION_CONSTANTS = {
  hIonisation: entry(1.09678771743e7, "1/m", `H I ionisation; ${NIST}`),
  hLymanAlpha: entry(8.225916453e6, "1/m", `H I 2p-1s, mean of the doublet; ${NIST}`),
  hTwoPhoton: entry(8.2245809, "1/s", "H 2s-1s two-photon rate: Goldman 1989, Phys. Rev. A 40, 1185, from memory"),
  hAlphaA: entry(4.309e-13, "cm3/s", `case-B a; ${PEQUIGNOT}`),
  hAlphaB: entry(-0.6166, "1", `case-B b; ${PEQUIGNOT}`),
  hAlphaC: entry(0.6703, "1", `case-B c; ${PEQUIGNOT}`),
  hAlphaD: entry(0.53, "1", `case-B d; ${PEQUIGNOT}`),
  he1Ionisation: entry(1.9831066637e7, "1/m", `He I ionisation; ${NIST}`),
  he2Ionisation: entry(4.3890887884e7, "1/m", `He II ionisation; ${NIST}`),
  he1SingletS: entry(1.66277434e7, "1/m", `He I 2 1S; ${NIST}`),
  he1SingletP: entry(1.7113489697e7, "1/m", `He I 2 1P; ${NIST}`),
  he1TripletS: entry(1.598559734e7, "1/m", `He I 2 3S; ${NIST}`),
  he1TripletP: entry(1.690868429e7, "1/m", `He I 2 3P1; ${NIST}`),
  he1TwoPhoton: entry(51.3, "1/s", "He I 2 1S two-photon rate: Drake 1986, Phys. Rev. A 34, 2871, from memory"),
  he1SingletA: entry(
    1.798287e9,
    "1/s",
    "He I 2 1P-1 1S Einstein A as in Wong, Moss & Scott 2008, MNRAS 386, 1023, from memory",
  ),
  he1TripletA: entry(
    177.58,
    "1/s",
    "He I 2 3P1-1 1S Einstein A: Lach & Pachucki 2001, Phys. Rev. A 64, 042510, from memory",
  ),
  he1AlphaSingletLogQ: entry(-16.744, "1", `log10 of q in m3/s, singlets; ${SINGLETS}`),
  he1AlphaSingletP: entry(0.711, "1", `p, singlets; ${SINGLETS}`),
  he1AlphaTripletLogQ: entry(-16.306, "1", `log10 of q in m3/s, triplets; ${TRIPLETS}`),
  he1AlphaTripletP: entry(0.761, "1", `p, triplets; ${TRIPLETS}`),
  he1AlphaLogT1: entry(5.114, "1", `log10 of T1 in K; ${SINGLETS}`),
  he1AlphaT2: entry(3, "K", `T2; ${SINGLETS}`),
  he1EscapeSingletA: entry(0.36, "1", `a, singlet line; ${ESCAPE}`),
  he1EscapeSingletB: entry(0.86, "1", `b, singlet line; ${ESCAPE}`),
  he1EscapeTripletA: entry(0.66, "1", `a, triplet line; ${ESCAPE}`),
  he1EscapeTripletB: entry(0.9, "1", `b, triplet line; ${ESCAPE}`),
  hPhotoionisation: entry(
    6.30432e-22,
    "m2",
    "H 1s photo-ionisation at threshold, 512 pi^2/(3 e^4) alpha a0^2 evaluated (Stobbe 1930, Ann. Phys. 399, 661)",
  ),
  hydrogenMass: HYDROGEN_ATOM_MASS,
  heliumMass: HELIUM4_ATOM_MASS,
  electronMass: ELECTRON_MASS,
  thomson: THOMSON,
  newtonG: NEWTON_G,
} as const satisfies Record<string, Constant>;

export type RecombinationConstantName = keyof typeof RECOMBINATION_CONSTANTS;

/** The bare numbers of {@link RECOMBINATION_CONSTANTS}, so that a study can change one of them. */
export type RecombinationValues = Readonly<Record<RecombinationConstantName, number>>;

/** The values as published; the default of every function here. */
export const RECOMBINATION_VALUES: RecombinationValues = Object.freeze(
  Object.fromEntries(Object.entries(RECOMBINATION_CONSTANTS).map(([name, { value }]) => [name, value])),
) as RecombinationValues;

/**
 * Photo-ionisation cross-section of hydrogen 1s, sigma_0 (nu0/nu)^4 exp(4 - 4 atan(e)/e)/(1 - exp(-2 pi/e)),
 * e = sqrt(nu/nu0 - 1); exact (non-relativistic, infinite proton mass).
 *
 * @param ratio photon energy over the ionisation energy, > 1
 * @param threshold cross-section at threshold [m^2]
 * @returns [m^2]
 * @see Stobbe 1930, Ann. Phys. 399, 661; Osterbrock & Ferland 2006, eq. 2.4
 */
export function hydrogenPhotoionisation(ratio: number, threshold = RECOMBINATION_VALUES.hPhotoionisation): number {
  const e = Math.sqrt(ratio - 1);
  return (threshold * ratio ** -4 * Math.exp(4 - (4 * Math.atan(e)) / e)) / (1 - Math.exp((-2 * Math.PI) / e));
}
