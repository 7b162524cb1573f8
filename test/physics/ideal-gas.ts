/** Textbook thermal history for tests: photons, e+- and three decoupled neutrinos as ideal gases, by entropy conservation. */
import { ELECTRON_MASS, NEWTON_G } from "../../src/constants/codata.ts";
import { G_CM3_PER_MEV4 } from "../../src/constants/units.ts";
import { integratePanels } from "../../src/numerics/quadrature.ts";

const PANELS = [0, 1, 2, 3, 4, 5, 6.5];

/** Energy density and pressure of e+- [MeV^4], E = m + T v^2. @param T [MeV] */
function pairs(T: number): { rho: number; p: number } {
  const m = ELECTRON_MASS.value;
  const moment = (power: number) =>
    integratePanels(
      (v) => {
        const E = m + T * v * v;
        const momentum = Math.sqrt(T * v * v * (E + m));
        return (momentum ** (1 + 2 * power) * E ** (2 - 2 * power) * 2 * T * v) / (Math.exp(E / T) + 1);
      },
      PANELS,
      24,
    );
  return { rho: (2 / Math.PI ** 2) * moment(0), p: (2 / (3 * Math.PI ** 2)) * moment(1) };
}

/** T_nu/T_gamma after instantaneous decoupling at T >> m_e: the entropy of photons and e+- in a comoving volume stays. */
export function neutrinoRatio(T: number): number {
  const { rho, p } = pairs(T);
  const photons = ((4 * Math.PI ** 2) / 45) * T ** 3;
  return ((photons + (rho + p) / T) / (photons * (11 / 4))) ** (1 / 3);
}

/** Expansion rate [1/s]: H^2 = (8 pi G/3) rho. */
export function hubbleRate(T: number): number {
  const photons = (Math.PI ** 2 / 15) * T ** 4;
  const neutrinos = 3 * (7 / 8) * photons * neutrinoRatio(T) ** 4;
  const rho = (photons + neutrinos + pairs(T).rho) * G_CM3_PER_MEV4 * 1000; // kg/m^3
  return Math.sqrt(((8 * Math.PI) / 3) * NEWTON_G.value * rho);
}

/** dt/dx [s] along x = -ln T: a T_nu is constant, so dx/dt = H/(1 + d ln(T_nu/T)/dx). */
export function timeStep(T: number): number {
  const h = 1e-3;
  const slope = Math.log(neutrinoRatio(T * Math.exp(-h)) / neutrinoRatio(T * Math.exp(h))) / (2 * h);
  return (1 - slope) / hubbleRate(T);
}
