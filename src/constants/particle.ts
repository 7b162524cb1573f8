/** Particle-physics inputs that CODATA does not list: neutron mean life, axial coupling, Fermi constant, proton radius. */
import type { Constant } from "./constant.ts";

export const NEUTRON_MEAN_LIFE = {
  value: 878.4,
  uncertainty: 0.5,
  unit: "s",
  source: "Particle Data Group, Review of Particle Physics 2022 and 2024 listing (scale factor 1.8)",
} as const satisfies Constant;
export const AXIAL_COUPLING = {
  value: 1.2754,
  uncertainty: 0.0013,
  unit: "1",
  source: "|g_A/g_V|, Particle Data Group, Review of Particle Physics 2020-2024 listing (scale factor 2.7)",
} as const satisfies Constant;
export const FERMI_CONSTANT = {
  value: 1.1663787e-5,
  uncertainty: 6e-12,
  unit: "1/GeV2",
  source: "G_F/(hbar c)^3, CODATA 2022 (unchanged from 2018), Mohr et al. 2025, Rev. Mod. Phys. 97, 025002",
} as const satisfies Constant;
export const PROTON_RADIUS = {
  value: 0.841,
  uncertainty: 0.001,
  unit: "fm",
  source: "proton charge radius, rounded from CODATA 2022 0.84075(64) fm (from memory)",
} as const satisfies Constant;
export const WEAK_MAGNETISM = {
  value: 1.853,
  uncertainty: 0,
  unit: "1",
  source: "f = (mu_p - mu_n - 1)/2 in nuclear magnetons, magnetic moments of CODATA (2.7928, -1.9130)",
} as const satisfies Constant;
/** Neutrino-electron couplings with radiative corrections, as used for neutrino decoupling. */
export const NEUTRINO_COUPLINGS = {
  electron: { left: 0.727, right: 0.233 },
  muTau: { left: -0.273, right: 0.233 },
  source: "Escudero 2020, JCAP 05, 048 (arXiv:2001.04466), from memory",
} as const;
export const HYDROGEN_ATOM_MASS = {
  value: 1.0078250319,
  uncertainty: 1.4e-11,
  unit: "u",
  source: "atomic mass of 1H, AME2020, Wang et al. 2021, Chin. Phys. C 45, 030003",
} as const satisfies Constant;
export const HELIUM4_ATOM_MASS = {
  value: 4.00260325413,
  uncertainty: 1.6e-10,
  unit: "u",
  source: "atomic mass of 4He, AME2020, Wang et al. 2021, Chin. Phys. C 45, 030003",
} as const satisfies Constant;
