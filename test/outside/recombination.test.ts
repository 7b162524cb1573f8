/** SciPy integrates the three-level equations from the published formulas alone, in other variables. */
import { expect, test } from "vitest";
import { computeLineOfSight } from "../../src/lineofsight/summary.ts";
import { heliumToHydrogen } from "../../src/parameters/helium.ts";
import { computeIonisationHistory } from "../../src/recombination/history.ts";
import { STANDARD } from "../unit/recombination/cosmologies.ts";
import { runPython } from "./python.ts";

interface Answer {
  readonly xe: readonly number[];
  readonly ratio: readonly number[];
  readonly zStar: number;
  readonly zDrag: number;
}

const Z = [
  3000, 2500, 2200, 2000, 1900, 1800, 1700, 1600, 1500, 1400, 1300, 1200, 1100, 1000, 900, 800, 600, 400, 200, 100, 20,
  0,
];
const COSMOLOGIES = [
  { ...STANDARD, ypMass: 0.2454 },
  { ...STANDARD, ypMass: 0.35, omegaB: 0.05, omegaC: 0.2, h0: 80, alphaFactor: 1.14 },
  { ...STANDARD, ypMass: 0.1, omegaB: 0.005, omegaC: 0.05, tCmb: 2.4, nEff: 1, sumMnu: 1 },
  { ...STANDARD, ypMass: 0.24, omegaC: 0.3, h0: 90, nEff: 0, sumMnu: 0 },
];

test("x_e, T_m, z_star and z_drag agree with SciPy's Radau on the published equations", () => {
  const answers = runPython<Answer[]>(
    "integrate_recombination.py",
    ["scipy"],
    COSMOLOGIES.map((p) => ({ ...p, z: Z })),
  );
  answers.forEach((outside, i) => {
    const inputs = { ...COSMOLOGIES[i], fHe: heliumToHydrogen(COSMOLOGIES[i].ypMass) };
    const history = computeIonisationHistory(inputs);
    const { summary } = computeLineOfSight(inputs, history);
    Z.forEach((z, j) => {
      const where = `cosmology ${i}, z = ${z}`;
      // The outside integration is good to about 1e-7; sigma_T, m_e and G of its CODATA edition differ from ours by 1e-9.
      expect(Math.abs(history.xeAt(Math.log1p(z)) / outside.xe[j] - 1), `x_e, ${where}`).toBeLessThan(2e-6);
      expect(Math.abs(history.temperatureRatioAt(Math.log1p(z)) / outside.ratio[j] - 1), `T_m, ${where}`).toBeLessThan(
        2e-6,
      );
    });
    expect(Math.abs(summary.zStar - outside.zStar), `z_star, cosmology ${i}`).toBeLessThan(2e-4);
    expect(Math.abs(summary.zDrag - outside.zDrag), `z_drag, cosmology ${i}`).toBeLessThan(2e-4);
  });
});
