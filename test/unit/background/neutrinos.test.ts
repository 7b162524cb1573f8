/** Neutrino energy densities, energy exchange and N_eff: closed forms, signs, detailed balance. */
import { expect, test } from "vitest";
import { exchangeIntegrals } from "../../../src/background/exchange.ts";
import {
  effectiveNeutrinoNumber,
  energyFromPlasma,
  energyToElectronNeutrinos,
  exchangeWeights,
  neutrinoDensityFactor,
} from "../../../src/background/neutrinos.ts";
import { ELECTRON_MASS } from "../../../src/constants/codata.ts";
import { FERMI_CONSTANT, NEUTRINO_COUPLINGS } from "../../../src/constants/particle.ts";
import { HBAR_MEV_S } from "../../../src/constants/units.ts";
import { integrateAdaptive } from "../../../src/numerics/quadrature.ts";

const relative = (value: number, reference: number) => Math.abs(value / reference - 1);

test("energy density of a degenerate flavour equals the Fermi-Dirac integral at mu = +-xi T", () => {
  for (const xi of [-3, -0.2, 0, 0.7, 3]) {
    const f = (k: number) => k ** 3 * (1 / (Math.exp(k - xi) + 1) + 1 / (Math.exp(k + xi) + 1));
    const integral = integrateAdaptive(f, 0, 70, 1e-12).value / (2 * Math.PI ** 2);
    expect(relative(neutrinoDensityFactor(xi), integral)).toBeLessThan(1e-11);
  }
});

test("three flavours at (4/11)^(1/3) T count as N_eff = 3", () => {
  const rho = 3 * neutrinoDensityFactor(0) * (4 / 11) ** (4 / 3);
  expect(effectiveNeutrinoNumber(rho, Math.PI ** 2 / 15)).toBeCloseTo(3, 12);
});

test("exchange weights are the couplings' combinations of the collision integrals", () => {
  const out = new Float64Array(4);
  for (const T of [0.1, 0.8, 3, 10]) {
    exchangeWeights().evaluate(Math.log(T), out);
    const { A1, A2, S1, S2 } = exchangeIntegrals(ELECTRON_MASS.value / T);
    const expected = [NEUTRINO_COUPLINGS.electron, NEUTRINO_COUPLINGS.muTau].flatMap(({ left, right }) => [
      (left ** 2 + right ** 2) * A1 + left * right * A2,
      (left ** 2 + right ** 2) * S1 - 2 * left * right * S2,
    ]);
    for (let c = 0; c < 4; c++) expect(relative(out[c], expected[c])).toBeLessThan(1e-5);
  }
});

test("no energy flows at equal temperatures, and it flows from hot to cold otherwise", () => {
  const out = new Float64Array(4);
  for (const T of [0.2, 1, 5]) {
    exchangeWeights().evaluate(Math.log(T), out);
    expect(energyFromPlasma(out[0], out[1], T, T)).toBe(0);
    expect(energyFromPlasma(out[0], out[1], T, 0.99 * T)).toBeGreaterThan(0);
    expect(energyFromPlasma(out[2], out[3], T, 1.01 * T)).toBeLessThan(0);
    expect(energyToElectronNeutrinos(T, T)).toBe(0);
    expect(energyToElectronNeutrinos(T, 1.01 * T)).toBeGreaterThan(0);
  }
});

test("massless exchange among neutrinos has the published coefficients", () => {
  // Escudero 2020, JCAP 05, 048: F = (G_F^2/pi^5) [32 f_a (Tmu^9 - Te^9) + 56 f_s Tmu^4 Te^4 (Tmu - Te)]
  const [Te, Tmu] = [1, 1.1];
  const scale = (FERMI_CONSTANT.value * 1e-6) ** 2 / Math.PI ** 5 / HBAR_MEV_S;
  const published = scale * (32 * 0.8841 * (Tmu ** 9 - Te ** 9) + 56 * 0.8287 * Tmu ** 4 * Te ** 4 * (Tmu - Te));
  expect(relative(energyToElectronNeutrinos(Te, Tmu), published)).toBeLessThan(1e-4);
});
