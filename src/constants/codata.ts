/** CODATA 2022 values of the fundamental constants, each with uncertainty, unit and source. */
import type { Constant } from "./constant.ts";

const SI = "exact by definition of the SI (2019); CODATA 2022, Mohr et al. 2025, Rev. Mod. Phys. 97, 025002";
const CODATA_2022 = "CODATA 2022 adjustment, Mohr et al. 2025, Rev. Mod. Phys. 97, 025002 (arXiv:2409.03787)";

/** The edition every constant of this file belongs to; printed in the provenance of each answer. */
export const CONSTANTS_EDITION = "CODATA 2022";

export const BOLTZMANN = { value: 1.380649e-23, uncertainty: 0, unit: "J/K", source: SI } as const satisfies Constant;
export const PLANCK = { value: 6.62607015e-34, uncertainty: 0, unit: "J s", source: SI } as const satisfies Constant;
export const HBAR = {
  value: 6.62607015e-34 / (2 * Math.PI),
  uncertainty: 0,
  unit: "J s",
  source: `h/(2 pi); ${SI}`,
} as const satisfies Constant;
export const LIGHT_SPEED = { value: 299792458, uncertainty: 0, unit: "m/s", source: SI } as const satisfies Constant;
export const ELEMENTARY_CHARGE = {
  value: 1.602176634e-19,
  uncertainty: 0,
  unit: "C",
  source: SI,
} as const satisfies Constant;
export const AVOGADRO = { value: 6.02214076e23, uncertainty: 0, unit: "1/mol", source: SI } as const satisfies Constant;
export const NEWTON_G = {
  value: 6.6743e-11,
  uncertainty: 0.00015e-11,
  unit: "m3/(kg s2)",
  source: CODATA_2022,
} as const satisfies Constant;
export const ELECTRON_MASS = {
  value: 0.51099895069,
  uncertainty: 1.6e-10,
  unit: "MeV/c2",
  source: CODATA_2022,
} as const satisfies Constant;
export const PROTON_MASS = {
  value: 938.27208943,
  uncertainty: 2.9e-7,
  unit: "MeV/c2",
  source: CODATA_2022,
} as const satisfies Constant;
export const NEUTRON_MASS = {
  value: 939.56542194,
  uncertainty: 4.8e-7,
  unit: "MeV/c2",
  source: CODATA_2022,
} as const satisfies Constant;
export const NEUTRON_PROTON_MASS_DIFFERENCE = {
  value: 1.29333251,
  uncertainty: 3.8e-7,
  unit: "MeV/c2",
  source: CODATA_2022,
} as const satisfies Constant;
export const DEUTERON_MASS = {
  value: 1875.612945,
  uncertainty: 5.8e-7,
  unit: "MeV/c2",
  source: CODATA_2022,
} as const satisfies Constant;
export const ALPHA_PARTICLE_MASS = {
  value: 3727.3794118,
  uncertainty: 1.2e-6,
  unit: "MeV/c2",
  source: CODATA_2022,
} as const satisfies Constant;
export const ATOMIC_MASS_CONSTANT = {
  value: 931.49410372,
  uncertainty: 2.9e-7,
  unit: "MeV/c2",
  source: CODATA_2022,
} as const satisfies Constant;
export const FINE_STRUCTURE = {
  value: 1 / 137.035999177,
  uncertainty: 2.1e-8 / 137.035999177 ** 2,
  unit: "1",
  source: `${CODATA_2022}; 1/alpha = 137.035999177(21)`,
} as const satisfies Constant;
export const THOMSON = {
  value: 6.6524587051e-29,
  uncertainty: 6.2e-38,
  unit: "m2",
  source: `${CODATA_2022}; value from memory, equal to (8 pi/3)(alpha hbar c/m_e c2)^2 to 1e-9`,
} as const satisfies Constant;
