/** Saha equilibrium: closed forms, independent quadratures of the equilibrium algebra, and identities. */
import { describe, expect, test } from "vitest";
import { BOLTZMANN, HBAR, LIGHT_SPEED } from "../../../src/constants/codata.ts";
import { seededUniform as seededRandom } from "../../../src/numerics/random.ts";
import { findRoot } from "../../../src/numerics/roots.ts";
import { sahaCoefficients, sahaEquilibrium, sahaFactor, sahaHydrogen } from "../../../src/recombination/saha.ts";

const ETA = 6.1e-10;
const T0 = 2.7255;

/** Photons [cm^-3] at T, 2 zeta(3)/pi^2 (kT/hbar c)^3. */
function photons(T: number): number {
  return (
    (((2 * 1.2020569031595942) / Math.PI ** 2) * ((BOLTZMANN.value * T) / (HBAR.value * LIGHT_SPEED.value)) ** 3) / 1e6
  );
}

describe("pure hydrogen, eta = 6.1e-10 (independent evaluation of the Saha equation made for this project)", () => {
  // Rows saha-X05, saha-X0.9, saha-X0.1, saha-X0.01: temperature at which a fraction X is ionised, relative 1e-6.
  test.each([
    ["saha-X05", 0.5, 3759.64],
    ["saha-X0.9", 0.9, 4037.87],
    ["saha-X0.1", 0.1, 3436.91],
    ["saha-X0.01", 0.01, 3108.48],
  ])("%s: X = %f", (_id, X, published) => {
    const T = findRoot((t) => sahaHydrogen(t, ETA * photons(t)) - X, 2500, 6000);
    // The value has six digits; its last one is worth up to 1.6e-6.
    expect(Math.abs(T - published)).toBeLessThan(1e-6 * published + 0.005);
  });

  // Rows saha-z1600 ... saha-z1000, T0 = 2.7255 K, relative 1e-5.
  test.each([
    [1600, 0.992606],
    [1400, 0.606017],
    [1200, 0.034116],
    [1100, 0.00414096],
    [1000, 0.000322229],
  ])("saha-z%i", (z, published) => {
    const T = T0 * (1 + z);
    const digit = 0.5 * 10 ** (Math.floor(Math.log10(published)) - 5);
    expect(Math.abs(sahaHydrogen(T, ETA * photons(T)) - published)).toBeLessThan(1e-5 * published + digit);
  });
});

// Row saha-X05-He: half of hydrogen ionised, Y_p = 0.2471, helium neutral: 3733.46 K, relative 1e-6.
test("with helium, half of the hydrogen is ionised at 3733.46 K", () => {
  const Yp = 0.2471;
  const T = findRoot((t) => sahaEquilibrium(t, (1 - Yp) * ETA * photons(t), Yp / 4 / (1 - Yp)).xp - 0.5, 2500, 6000);
  expect(Math.abs(T - 3733.46)).toBeLessThan(1e-6 * 3733.46 + 0.005);
});

// Row rec-HeI-saha: He II to He I half recombined at 6790 K, relative 1e-3; row rec-HeII-textbook: He III to He II at
// 15600 K by 15000 (1 + 0.023 ln eta10) K, Mukhanov 2005, Physical Foundations of Cosmology, eq. 3.181, relative 0.05.
test.each([
  ["He I", (s: ReturnType<typeof sahaEquilibrium>) => s.he1, 4000, 12000, 6790, 1e-3],
  ["He III", (s: ReturnType<typeof sahaEquilibrium>) => s.he3, 9000, 30000, 15600, 0.05],
] as const)("half recombination of %s", (_name, share, low, high, published, tolerance) => {
  const Yp = 0.2471;
  const state = (t: number) => sahaEquilibrium(t, (1 - Yp) * ETA * photons(t), Yp / 4 / (1 - Yp));
  const T = findRoot((t) => share(state(t)) - 0.5, low, high);
  expect(Math.abs(T / published - 1)).toBeLessThan(tolerance);
});

test("S = 1/2 gives exactly half ionisation, and small S keeps its digits", () => {
  const c = sahaCoefficients();
  const T = 3800;
  const factor = sahaFactor(c.thermal, T, 1, c.hIonisation);
  expect(sahaHydrogen(T, factor * 2)).toBeCloseTo(0.5, 14);
  // S = 1e-20: x = sqrt(S) - S/2 + O(S^1.5).
  expect(Math.abs(sahaHydrogen(T, factor * 1e20) / (1e-10 - 5e-21) - 1)).toBeLessThan(1e-14);
});

test("every_stage_satisfies_its_own_saha_equation over 500 random states", () => {
  const random = seededRandom(20260301);
  const c = sahaCoefficients();
  for (let trial = 0; trial < 500; trial++) {
    const T = 10 ** (3 + 1.6 * random());
    const nH = 10 ** (-1 + 7 * random());
    const fHe = random() < 0.1 ? 0 : 10 ** (-3 + 4 * random());
    const s = sahaEquilibrium(T, nH, fHe, c);
    const where = `T = ${T}, nH = ${nH}, fHe = ${fHe}, seed 20260301, trial ${trial}`;
    const ratio = (up: number, low: number, weight: number, energy: number) =>
      (s.xe * nH * up) / low / sahaFactor(c.thermal, T, weight, energy);
    expect(Math.abs(ratio(s.xp, s.neutralH, 1, c.hIonisation) - 1), where).toBeLessThan(1e-12);
    if (s.he2 > 1e-250) expect(Math.abs(ratio(s.he2, s.he1, 4, c.he1Ionisation) - 1), where).toBeLessThan(1e-12);
    if (s.he3 > 1e-250) expect(Math.abs(ratio(s.he3, s.he2, 1, c.he2Ionisation) - 1), where).toBeLessThan(1e-12);
    expect(Math.abs(s.xp + fHe * (s.he2 + 2 * s.he3) - s.xe) / s.xe, where).toBeLessThan(1e-12);
    expect(Math.abs(s.he1 + s.he2 + s.he3 - 1), where).toBeLessThan(1e-12);
  }
});

test("deep equilibrium at 100 K underflows to neutral gas, not to NaN", () => {
  expect(sahaEquilibrium(100, 1, 0.08)).toMatchObject({ neutralH: 1, he1: 1 });
  expect(Number.isFinite(sahaEquilibrium(100, 1, 0.08).xe)).toBe(true);
});

test("a negative temperature is refused with its name and unit", () => {
  expect(() => sahaHydrogen(-3, 1)).toThrow("T = -3 K: must be positive and finite");
});
