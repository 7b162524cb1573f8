/** Neutrinos: energy density with degeneracy, energy exchange with the e+- plasma and among flavours, N_eff. */
import { ELECTRON_MASS } from "../constants/codata.ts";
import { FERMI_CONSTANT, NEUTRINO_COUPLINGS } from "../constants/particle.ts";
import { HBAR_MEV_S } from "../constants/units.ts";
import { type ExchangeIntegrals, interpolatedExchange } from "./exchange.ts";
import { type GridTable, tabulateOverTemperature } from "./plasma.ts";

/** rho_nu/rho_gamma of one massless flavour at T_nu/T_gamma = (4/11)^(1/3): 7/8 (4/11)^(4/3). */
export const RHO_PER_NEFF = (7 / 8) * (4 / 11) ** (4 / 3);

/**
 * Energy density of one flavour, neutrinos and antineutrinos, at mu = +-xi T, over T^4:
 * rho/T^4 = (7 pi^2/120) [1 + (30/7)(xi/pi)^2 + (15/7)(xi/pi)^4]; exact for massless particles.
 * @param xi degeneracy mu/T, any finite value
 * @see Kolb & Turner 1990, The Early Universe, eq. (3.54) ff.
 */
export function neutrinoDensityFactor(xi: number): number {
  const y = (xi / Math.PI) ** 2;
  return ((7 * Math.PI ** 2) / 120) * (1 + (30 / 7) * y + (15 / 7) * y * y);
}

/**
 * N_eff = (rho_nu + rho_dark)/rho_gamma / [7/8 (4/11)^(4/3)], meant after e+- annihilation.
 * @param rhoRelativistic energy density of everything but photons, same unit as rhoPhotons
 */
export function effectiveNeutrinoNumber(rhoRelativistic: number, rhoPhotons: number): number {
  return rhoRelativistic / rhoPhotons / RHO_PER_NEFF;
}

/** G_F in MeV^-2. */
const GF = FERMI_CONSTANT.value * 1e-6;
/** G_F^2/(2 pi^5) with MeV^5 turned into MeV^4/s. */
const PLASMA_RATE = GF ** 2 / (2 * Math.PI ** 5) / HBAR_MEV_S;
/** Massless integrals, A1 = 32 x 72 x 0.8841 and S1 = 56 x 8 x 0.8287, set the exchange among neutrinos. */
const MASSLESS = interpolatedExchange(0);
const NU_NU_ANNIHILATION = (GF ** 2 / Math.PI ** 5 / HBAR_MEV_S) * (MASSLESS.A1 / 72);
const NU_NU_SCATTERING = (GF ** 2 / Math.PI ** 5 / HBAR_MEV_S) * (MASSLESS.S1 / 8);

type Couplings = { readonly left: number; readonly right: number };

/** (gL^2 + gR^2) A1 + gL gR A2: the annihilation bracket of one flavour. */
function annihilationWeight({ left, right }: Couplings, { A1, A2 }: ExchangeIntegrals): number {
  return (left * left + right * right) * A1 + left * right * A2;
}

/** (gL^2 + gR^2) S1 - 2 gL gR S2: the scattering bracket of one flavour. */
function scatteringWeight({ left, right }: Couplings, { S1, S2 }: ExchangeIntegrals): number {
  return (left * left + right * right) * S1 - 2 * left * right * S2;
}

let table: GridTable | undefined;

/** Annihilation and scattering weights of nu_e, then of nu_mu (= nu_tau), over ln T of the photons; once a process. */
export function exchangeWeights(): GridTable {
  table ??= tabulateOverTemperature(4, (TMeV, out) => {
    const integrals = interpolatedExchange(ELECTRON_MASS.value / TMeV);
    const { electron, muTau } = NEUTRINO_COUPLINGS;
    out[0] = annihilationWeight(electron, integrals);
    out[1] = scatteringWeight(electron, integrals);
    out[2] = annihilationWeight(muTau, integrals);
    out[3] = scatteringWeight(muTau, integrals);
  });
  return table;
}

/**
 * Energy that one flavour (nu + nubar) gains from the e+- plasma per time and volume,
 * d rho/dt = (G_F^2/(2 pi^5)) {[(gL^2+gR^2) A1 + gL gR A2] (Tg^9 - Tnu^9)/9 + [(gL^2+gR^2) S1 - 2 gL gR S2] Tg^4 Tnu^4 (Tg - Tnu)}.
 * Degeneracies are neglected in the rate. Each distribution is taken as thermal.
 * @param annihilation with `scattering`, the brackets at m_e/Tg, from {@link exchangeWeights}
 * @param Tg with Tnu: photon and neutrino temperature [MeV]
 * @returns [MeV4/s]
 * @see Escudero 2020, JCAP 05, 048 (arXiv:2001.04466), sec. 2; matrix elements of Dolgov, Hansen & Semikoz 1997
 */
export function energyFromPlasma(annihilation: number, scattering: number, Tg: number, Tnu: number): number {
  const g4 = Tg ** 4;
  const n4 = Tnu ** 4;
  return PLASMA_RATE * ((annihilation * (g4 * g4 * Tg - n4 * n4 * Tnu)) / 9 + scattering * g4 * n4 * (Tg - Tnu));
}

/**
 * Energy F that nu_mu and nu_tau each lose to nu_e per time and volume by nu-nu reactions (nu_e gains 2F),
 * F = (G_F^2/pi^5) [32 x 0.8841 (Tmu^9 - Te^9) + 56 x 0.8287 Tmu^4 Te^4 (Tmu - Te)].
 * @param Te with Tmu: temperatures of nu_e and of nu_mu = nu_tau [MeV]
 * @returns [MeV4/s]
 * @see Escudero 2020, JCAP 05, 048 (arXiv:2001.04466), sec. 2
 */
export function energyToElectronNeutrinos(Te: number, Tmu: number): number {
  const e4 = Te ** 4;
  const m4 = Tmu ** 4;
  return NU_NU_ANNIHILATION * (m4 * m4 * Tmu - e4 * e4 * Te) + NU_NU_SCATTERING * m4 * e4 * (Tmu - Te);
}
