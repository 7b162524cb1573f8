/** Every constant of recombination with its source: levels and rates of hydrogen and helium, recombination-coefficient fits, masses. */

import { ELECTRON_MASS, NEWTON_G, THOMSON } from "../constants/codata.ts";
import type { Constant } from "../constants/constant.ts";
import { HELIUM4_ATOM_MASS, HYDROGEN_ATOM_MASS } from "../constants/particle.ts";

const NIST = "NIST Atomic Spectra Database, from memory";
const PEQUIGNOT =
  "a t^b/(1 + c t^d), t = T/1e4 K: Pequignot, Petitjean & Boisson 1991, A&A 251, 680, from memory; within 0.16 % of Hummer 1994, MNRAS 268, 109";
const SINGLETS =
  "form of Verner & Ferland 1996, ApJS 103, 467, fitted to Hummer & Storey 1998, MNRAS 297, 1073, by Seager, Sasselov & Scott 2000, ApJS 128, 407, from memory";
const TRIPLETS =
  "form of Verner & Ferland 1996, ApJS 103, 467, fitted to Hummer & Storey 1998, MNRAS 297, 1073, by Wong, Moss & Scott 2008, MNRAS 386, 1023, from memory";
const ESCAPE =
  "1/(1 + a gamma^b): Kholupenko, Ivanchik & Varshalovich 2007, MNRAS 378, L39, and Wong, Moss & Scott 2008, MNRAS 386, 1023, from memory";

/** A constant with what it is, in words. */
export interface NamedConstant extends Constant {
  readonly meaning: string;
}

const entry = (meaning: string, value: number, unit: string, source: string): NamedConstant => ({
  meaning,
  value,
  uncertainty: 0,
  unit,
  source,
});

/**
 * The constants in the order of the provenance table. `uncertainty` is 0 where none is stated. Wavenumbers are those of
 * the transition from the ground state unless the name says ionisation.
 */
export const RECOMBINATION_CONSTANTS = {
  hIonisation: entry("H I ionisation", 1.09678771743e7, "1/m", NIST),
  hLymanAlpha: entry("H I 2p-1s, mean of doublet", 8.225916453e6, "1/m", NIST),
  he1Ionisation: entry("He I ionisation", 1.9831066637e7, "1/m", NIST),
  he2Ionisation: entry("He II ionisation", 4.3890887884e7, "1/m", NIST),
  he1SingletS: entry("He I 2 1S", 1.66277434e7, "1/m", NIST),
  he1SingletP: entry("He I 2 1P", 1.7113489697e7, "1/m", NIST),
  he1TripletS: entry("He I 2 3S", 1.598559734e7, "1/m", NIST),
  he1TripletP: entry("He I 2 3P1", 1.690868429e7, "1/m", NIST),
  hTwoPhoton: entry("H 2s-1s two-photon rate", 8.2245809, "1/s", "Goldman 1989, Phys. Rev. A 40, 1185, from memory"),
  he1TwoPhoton: entry("He I 2 1S two-photon rate", 51.3, "1/s", "Drake 1986, Phys. Rev. A 34, 2871, from memory"),
  he1SingletA: entry(
    "He I 2 1P-1 1S Einstein A",
    1.798287e9,
    "1/s",
    "as in Wong, Moss & Scott 2008, MNRAS 386, 1023, from memory",
  ),
  he1TripletA: entry(
    "He I 2 3P1-1 1S Einstein A",
    177.58,
    "1/s",
    "Lach & Pachucki 2001, Phys. Rev. A 64, 042510, from memory",
  ),
  hAlphaA: entry("H case-B: a", 4.309e-13, "cm3/s", PEQUIGNOT),
  hAlphaB: entry("  b", -0.6166, "1", PEQUIGNOT),
  hAlphaC: entry("  c", 0.6703, "1", PEQUIGNOT),
  hAlphaD: entry("  d", 0.53, "1", PEQUIGNOT),
  he1AlphaSingletLogQ: entry("He I singlets: log10 q [m3/s]", -16.744, "1", SINGLETS),
  he1AlphaSingletP: entry("  p", 0.711, "1", SINGLETS),
  he1AlphaLogT1: entry("  log10 T1 [K], both", 5.114, "1", SINGLETS),
  he1AlphaT2: entry("  T2, both", 3, "K", SINGLETS),
  he1AlphaTripletLogQ: entry("He I triplets: log10 q [m3/s]", -16.306, "1", TRIPLETS),
  he1AlphaTripletP: entry("  p", 0.761, "1", TRIPLETS),
  he1EscapeSingletA: entry("He I line escape, singlet: a", 0.36, "1", ESCAPE),
  he1EscapeSingletB: entry("  b, singlet", 0.86, "1", ESCAPE),
  he1EscapeTripletA: entry("  a, triplet", 0.66, "1", ESCAPE),
  he1EscapeTripletB: entry("  b, triplet", 0.9, "1", ESCAPE),
  hPhotoionisation: entry(
    "H 1s photo-ionisation",
    6.30432e-22,
    "m2",
    "at threshold, 512 pi^2/(3 e^4) alpha a0^2 evaluated; Stobbe 1930, Ann. Phys. 399, 661",
  ),
  hydrogenMass: { meaning: "mass of the 1H atom", ...HYDROGEN_ATOM_MASS },
  heliumMass: { meaning: "mass of the 4He atom", ...HELIUM4_ATOM_MASS },
  electronMass: { meaning: "electron mass", ...ELECTRON_MASS },
  newtonG: { meaning: "Newton's constant", ...NEWTON_G },
  thomson: { meaning: "Thomson cross-section", ...THOMSON },
} as const satisfies Record<string, NamedConstant>;

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
