/** Late-time background: closed forms, limits of the massive neutrino, published densities. */
import { describe, expect, test } from "vitest";
import {
  ageAt,
  hubbleFromDensity,
  type LateCosmology,
  lateBackground,
  neutrinoTemperature,
  photonDensity,
  unitDensity,
} from "../../../src/background/expansion.ts";
import { massiveDensityRatio, tabulatedDensityRatio } from "../../../src/background/massive-neutrino.ts";
import { HUNDRED_KM_S_MPC, KELVIN_PER_MEV, SECONDS_PER_JULIAN_YEAR } from "../../../src/constants/units.ts";
import { comovingDistance, conformalTime, HUBBLE_LENGTH_MPC } from "../../../src/lineofsight/distances.ts";
import { integrateAdaptive } from "../../../src/numerics/quadrature.ts";

const PLANCK18: LateCosmology = { omegaB: 0.02237, omegaC: 0.12, h0: 67.36, tCmb: 2.7255, nEff: 3.046, sumMnu: 0.06 };

describe("densities today", () => {
  // Closed forms in T0 with CODATA 2022 and the IAU parsec; PDG lists 2.473e-5.
  test("photon density 2.47298e-5 and 4.645092e-31 kg/m3 at 2.7255 K", () => {
    expect(Math.abs(photonDensity(2.7255) / 2.47298e-5 - 1)).toBeLessThan(2e-6);
    expect(Math.abs((photonDensity(2.7255) * unitDensity() * 1000) / 4.645092e-31 - 1)).toBeLessThan(1e-6);
  });

  test("flatness: the densities add to h^2", () => {
    const b = lateBackground(PLANCK18);
    const relativistic = b.omegaGamma + (2 / 3) * b.omegaNuMassless;
    expect(b.omegaM + relativistic + b.omegaLambda).toBeCloseTo(0.6736 ** 2, 14);
    expect(b.hubble(0) / (0.6736 * HUNDRED_KM_S_MPC)).toBeCloseTo(1, 14);
  });

  // Planck 2018 VI, Table 2: omega_m = 0.1430 with one neutrino of 0.06 eV (0.02237 + 0.1200 + 0.00064).
  test("one neutrino of 0.06 eV adds 0.00064 to omega_m", () => {
    const b = lateBackground(PLANCK18);
    expect(Math.abs(b.omegaM - 0.14302)).toBeLessThan(1e-5);
  });

  test("neutrinos of N_eff = 3 have (4/11)^(1/3) of the photon temperature", () => {
    expect(neutrinoTemperature(2.7255, 3)).toBeCloseTo(2.7255 * (4 / 11) ** (1 / 3), 12);
  });
});

describe("massive neutrino", () => {
  test("limits: massless at y = 0, and n m at large y", () => {
    expect(massiveDensityRatio(0)).toBeCloseTo(1, 12);
    // int x^2 y/(e^x + 1) = 1.5 zeta(3) y, next term relative <x^2>/(2 y^2) = 12.94/(2 y^2).
    const y = 1e4;
    const nonRelativistic = (1.5 * 1.2020569031595942 * y) / ((7 * Math.PI ** 4) / 120);
    expect(Math.abs(massiveDensityRatio(y) / nonRelativistic - 1)).toBeLessThan(12.94 / 2 / y ** 2 + 1e-12);
  });

  test("small masses: 1 + 5 y^2/(7 pi^2)", () => {
    const y = 1e-2;
    expect(Math.abs(massiveDensityRatio(y) - 1 - (5 * y * y) / (7 * Math.PI ** 2))).toBeLessThan(1e-8);
  });

  test("the table agrees with quadrature to 1e-9, its slope to 1e-6, across its ends too", () => {
    const out = new Float64Array(2);
    for (let logY = -8; logY < 13; logY += 0.173) {
      const y = Math.exp(logY);
      tabulatedDensityRatio(logY, out);
      const exact = integrateAdaptive(
        (x) => (x * x * Math.sqrt(x * x + y * y)) / (Math.exp(x) + 1) / ((7 * Math.PI ** 4) / 120),
        0,
        60,
        1e-12,
      ).value;
      expect(Math.abs(out[0] / exact - 1), `y = ${y}`).toBeLessThan(1e-9);
      const above = Math.log(massiveDensityRatio(y * 1.001));
      const below = Math.log(massiveDensityRatio(y / 1.001));
      expect(Math.abs(out[1] / out[0] - (above - below) / (2 * Math.log(1.001))), `slope, y = ${y}`).toBeLessThan(1e-6);
    }
  });

  test("rho(z) is that of quadrature: 3 eV at z = 0, 500 and 1e5", () => {
    const b = lateBackground({ ...PLANCK18, h0: 100, sumMnu: 3 });
    for (const z of [0, 500, 1e5]) {
      const y = (3e-6 * KELVIN_PER_MEV) / neutrinoTemperature(2.7255, 3.046) / (1 + z);
      const density =
        (b.omegaGamma + (b.omegaNuMassless / 3) * (2 + massiveDensityRatio(y))) * (1 + z) ** 4 +
        0.14237 * (1 + z) ** 3 +
        b.omegaLambda;
      expect(Math.abs(b.hubble(z) / (HUNDRED_KM_S_MPC * Math.sqrt(density)) - 1)).toBeLessThan(1e-9);
    }
  });
});

describe("integrals over time", () => {
  test("radiation and matter only: age and conformal time in closed form", () => {
    // Einstein-de Sitter with radiation: eta = 2 (sqrt(w_r + w_m a) - sqrt(w_r))/w_m in units of c/(100 km/s/Mpc).
    const bare = { omegaB: 0.05, omegaC: 0.5, h0: 100, tCmb: 2.7255, nEff: 0, sumMnu: 0 };
    const radiation = photonDensity(2.7255);
    const matter = 1 - radiation;
    const b = lateBackground({ ...bare, omegaC: matter - 0.05 - 1e-15 });
    for (const z of [0, 9, 1100, 1e5]) {
      const a = 1 / (1 + z);
      const eta = (2 * (Math.sqrt(radiation + matter * a) - Math.sqrt(radiation))) / matter;
      expect(Math.abs(conformalTime(b, z) / (HUBBLE_LENGTH_MPC * eta) - 1), `z = ${z}`).toBeLessThan(1e-9);
      const e = Math.sqrt(radiation + matter * a);
      const time = ((2 / 3) * (e ** 3 - radiation ** 1.5) - 2 * radiation * (e - Math.sqrt(radiation))) / matter ** 2;
      // At early times the closed form cancels to 1e-16/(a/a_eq)^2.
      if (z < 2000) expect(Math.abs((ageAt(b, z) * HUNDRED_KM_S_MPC) / time - 1), `z = ${z}`).toBeLessThan(1e-9);
    }
  });

  test("agree with an adaptive integral in ln a over masses, Lambda and early times", () => {
    for (const sumMnu of [0, 0.06, 3])
      for (const z of [0, 3, 1100]) {
        const b = lateBackground({ ...PLANCK18, sumMnu, h0: 75 });
        const exact = integrateAdaptive((x) => 1 / b.hubble(Math.expm1(-x)), -25, -Math.log1p(z), 1e-12).value;
        expect(Math.abs(ageAt(b, z) / exact - 1), `${sumMnu} eV, z = ${z}`).toBeLessThan(1e-9);
      }
  });

  test("distance and conformal time add up to the horizon today", () => {
    const b = lateBackground(PLANCK18);
    expect(conformalTime(b, 1100) + comovingDistance(b, 1100)).toBeCloseTo(conformalTime(b, 0), 5);
  });

  test("age in years uses the Julian year", () => {
    expect(SECONDS_PER_JULIAN_YEAR).toBe(31557600);
  });
});

test("hubbleFromDensity inverts the critical density", () => {
  expect(hubbleFromDensity(unitDensity()) / HUNDRED_KM_S_MPC).toBeCloseTo(1, 14);
});

test("a flat Universe that needs negative Lambda is refused, with what to change", () => {
  expect(() => lateBackground({ ...PLANCK18, omegaC: 0.5 })).toThrow(
    /exceed h\^2 = 0.45374, and a negative cosmological constant is refused; raise h0 above/,
  );
});
