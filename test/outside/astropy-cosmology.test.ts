/** Astropy reproduces H(z), comoving distances and ages of the late-time background. */
import { describe, expect, test } from "vitest";
import { ageAt, lateBackground } from "../../src/background/expansion.ts";
import { HUNDRED_KM_S_MPC, SECONDS_PER_JULIAN_YEAR } from "../../src/constants/units.ts";
import { comovingDistance } from "../../src/lineofsight/distances.ts";
import { runPython } from "./python.ts";

interface Answer {
  readonly H: readonly number[];
  readonly distance: readonly number[];
  readonly age: readonly number[];
}

const Z = [0.1, 0.5, 1, 3, 10, 100, 1089.92, 3000, 1e4];
const PLANCK18 = { omegaB: 0.02237, omegaC: 0.12, h0: 67.36, tCmb: 2.7255, nEff: 3.046 };
const CASES = [
  { name: "massless neutrinos", ...PLANCK18, sumMnu: 0, tolerance: 1e-5 },
  { name: "massless, N_eff = 4, T = 2.6 K", ...PLANCK18, nEff: 4, tCmb: 2.6, h0: 80, sumMnu: 0, tolerance: 1e-5 },
  { name: "no neutrinos", ...PLANCK18, nEff: 0, sumMnu: 0, tolerance: 1e-5 },
  // Astropy's density of a massive neutrino is the fit of Komatsu et al. 2011, ApJS 192, 18, eq. 26 (up to 3e-4 of that
  // density), and it scales the number of neutrinos with N_eff instead of their temperature: 4e-3 of 0.0045 of omega_m.
  { name: "one neutrino of 0.06 eV", ...PLANCK18, sumMnu: 0.06, tolerance: 3e-5 },
];

describe("Astropy", () => {
  const answers = runPython<Answer[]>(
    "astropy_cosmology.py",
    ["astropy"],
    CASES.map((c) => ({ ...c, z: Z })),
  );

  test.each(CASES.map((c, i) => [c.name, c, answers[i]] as const))("%s", (_name, c, outside) => {
    const background = lateBackground(c);
    Z.forEach((z, i) => {
      const H = (background.hubble(z) / HUNDRED_KM_S_MPC) * 100;
      const age = ageAt(background, z) / SECONDS_PER_JULIAN_YEAR / 1e9;
      expect(Math.abs(H / outside.H[i] - 1), `H, z = ${z}`).toBeLessThan(c.tolerance);
      expect(Math.abs(comovingDistance(background, z) / outside.distance[i] - 1), `D_M, z = ${z}`).toBeLessThan(
        c.tolerance,
      );
      // Astropy integrates ages to an absolute 1.5e-8 of the Hubble time, which is 2 % of the age at z = 1e4.
      if (z <= 3000) expect(Math.abs(age / outside.age[i] - 1), `age, z = ${z}`).toBeLessThan(c.tolerance);
    });
  });
});
