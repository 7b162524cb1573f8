/** The ionisation history: step control, continuity, limits, and what each switch does. */
import { describe, expect, test } from "vitest";
import { heliumMassFraction, heliumToHydrogen } from "../../../src/parameters/helium.ts";
import { computeIonisationHistory } from "../../../src/recombination/history.ts";
import { sahaEquilibrium } from "../../../src/recombination/saha.ts";
import { STANDARD } from "./cosmologies.ts";

const REDSHIFTS = Array.from({ length: 401 }, (_, i) => Math.expm1((Math.log(10001) * i) / 400));

describe("step control", () => {
  const tolerance = computeIonisationHistory(STANDARD).tolerance;
  const at = (factor: number) => {
    const h = computeIonisationHistory({ ...STANDARD, tolerance: tolerance * factor });
    return REDSHIFTS.map((z) => [h.xeAt(Math.log1p(z)), h.temperatureRatioAt(Math.log1p(z))]);
  };
  const standard = at(1);

  test("halving the default tolerance moves x_e and T_m by less than 1e-6 at every redshift", () => {
    const halved = at(0.5);
    REDSHIFTS.forEach((z, i) => {
      expect(Math.abs(halved[i][0] / standard[i][0] - 1), `x_e, z = ${z}`).toBeLessThan(1e-6);
      expect(Math.abs(halved[i][1] / standard[i][1] - 1), `T_m, z = ${z}`).toBeLessThan(1e-6);
    });
  });

  test("the default is within 1e-6 of a hundred times tighter tolerance", () => {
    const tight = at(0.01);
    REDSHIFTS.forEach((z, i) => {
      expect(Math.abs(tight[i][0] / standard[i][0] - 1), `x_e, z = ${z}`).toBeLessThan(1e-6);
      expect(Math.abs(tight[i][1] / standard[i][1] - 1), `T_m, z = ${z}`).toBeLessThan(1e-6);
    });
  });
});

test("x_e and T_m are continuous through the start of the equations and through the end of helium", () => {
  const h = computeIonisationHistory(STANDARD);
  // The start of the integration, and every step with its neighbourhood.
  for (const x of h.logZ.slice(1)) {
    for (const quantity of [h.xeAt, h.temperatureRatioAt]) {
      const below = quantity(x - 1e-9);
      const above = quantity(x + 1e-9);
      expect(Math.abs(above / below - 1), `z = ${Math.expm1(x)}`).toBeLessThan(1e-6);
    }
  }
});

test("above the start of the equations x_e is the equilibrium value, and at 1e4 everything is ionised", () => {
  const h = computeIonisationHistory(STANDARD);
  expect(h.zStart).toBeGreaterThan(2500);
  const z = h.zStart * 1.2;
  const e = sahaEquilibrium(STANDARD.tCmb * (1 + z), h.nH0 * (1 + z) ** 3, STANDARD.fHe);
  expect(h.xeAt(Math.log1p(z))).toBe(e.xe);
  // He II at 27,000 K: 54.4 eV/kT = 23.2, of order 1e-7 of helium.
  expect(Math.abs(h.xeAt(Math.log1p(1e4)) - (1 + 2 * STANDARD.fHe))).toBeLessThan(1e-6 * STANDARD.fHe);
});

test("starting the equations later than equilibrium allows changes nothing", () => {
  // Alpha ten times smaller in effect on the bottleneck would start earlier; the tolerance of the start is 1e-10 in x_e.
  const h = computeIonisationHistory(STANDARD);
  const x = Math.log1p(h.zStart);
  const z = h.zStart;
  expect(Math.abs(h.xeAt(x) / h.sahaXe(z) - 1)).toBeLessThan(1e-9);
});

test("matter follows the radiation early and cools as (1 + z)^2 late", () => {
  const h = computeIonisationHistory(STANDARD);
  expect(1 - h.temperatureRatioAt(Math.log1p(1500))).toBeLessThan(2e-6);
  const slope =
    (Math.log(h.temperatureRatioAt(Math.log1p(2))) - Math.log(h.temperatureRatioAt(Math.log1p(1)))) / Math.log(1.5);
  // T_m/T_r goes as (1 + z) once Compton heating is gone; what is left of it is 1 % of the expansion rate at z = 1.
  expect(slope).toBeGreaterThan(0.97);
  expect(slope).toBeLessThanOrEqual(1);
});

// Residual ionisation 1.7e-4 to 2.6e-4 at z of order 10: common review value (from memory), for the multi-level atom.
// Seager, Sasselov & Scott 2000, ApJS 128, 407: below z = 800 the multi-level atom has about 10 % less ionisation than
// the plain three-level atom; the factor 1.14 of Seager, Sasselov & Scott 1999, ApJ 523, L1 stands for it.
test("residual ionisation, and the size and sign of the multi-level correction at low redshift", () => {
  const plain = computeIonisationHistory(STANDARD);
  const faster = computeIonisationHistory({ ...STANDARD, alphaFactor: 1.14 });
  for (const z of [10, 20, 40]) {
    const xe = faster.xeAt(Math.log1p(z));
    expect(xe).toBeGreaterThan(1.7e-4);
    expect(xe).toBeLessThan(2.6e-4);
  }
  for (const z of [20, 200, 600]) {
    const change = faster.xeAt(Math.log1p(z)) / plain.xeAt(Math.log1p(z)) - 1;
    expect(change).toBeGreaterThan(-0.13);
    expect(change).toBeLessThan(-0.07);
  }
});

test("helium is given by number or by mass, and the two conversions are inverse", () => {
  expect(heliumToHydrogen(0.25)).toBeCloseTo(0.25 / (3.971525936 * 0.75), 9);
  for (const y of [0, 0.1, 0.2454, 0.9]) expect(heliumMassFraction(heliumToHydrogen(y))).toBeCloseTo(y, 14);
});

test("the saha model is equilibrium at every redshift", () => {
  const h = computeIonisationHistory({ ...STANDARD, model: "saha" });
  for (const z of [6000, 2500, 1400, 1000, 200])
    expect(h.xeAt(Math.log1p(z))).toBe(h.sahaXe(Math.expm1(Math.log1p(z))));
});

describe("bad input", () => {
  test("an unknown switch is refused with the list of names", () => {
    expect(() => computeIonisationHistory({ ...STANDARD, without: ["nosuch"] })).toThrow(
      /without = nosuch: accepted are hydrogen-bottleneck, two-photon/,
    );
  });

  test("a switch without a part in the model is refused", () => {
    expect(() => computeIonisationHistory({ ...STANDARD, model: "saha", without: ["two-photon"] })).toThrow(
      "without = two-photon: has no part in model saha; accepted there are matter-cooling, helium-double-ionisation",
    );
  });

  test("matter above critical density needs negative Lambda and is refused", () => {
    expect(() => computeIonisationHistory({ ...STANDARD, omegaC: 0.6 })).toThrow(
      /h0 = 67.36 km\/s\/Mpc: .* negative cosmological constant is refused/,
    );
  });
});

// No machine changes these: measured 325 steps, 4 rejected, 2608 right-hand sides at the default tolerance; 10 % margin.
test("cost in steps and right-hand sides", () => {
  const { counts } = computeIonisationHistory(STANDARD);
  expect(counts.steps).toBeLessThan(358);
  expect(counts.rejected).toBeLessThan(10);
  expect(counts.rhs).toBeLessThan(2870);
});
