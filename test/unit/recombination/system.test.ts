/** The equations of recombination: exact derivatives, equilibrium as their fixed point, limits of each switch. */
import { describe, expect, test } from "vitest";
import { lateBackground } from "../../../src/background/expansion.ts";
import { seededUniform } from "../../../src/numerics/random.ts";
import { RECOMBINATION_VALUES } from "../../../src/recombination/atomic.ts";
import { sahaEquilibrium } from "../../../src/recombination/saha.ts";
import { RECOMBINATION_SWITCH_NAMES } from "../../../src/recombination/switches.ts";
import { recombinationSystem } from "../../../src/recombination/system.ts";
import { STANDARD } from "./cosmologies.ts";

const NH0 = 1.9e-7;

function makeSystem(without: readonly string[] = [], fHe = STANDARD.fHe) {
  return recombinationSystem({
    background: lateBackground(STANDARD),
    nH0: NH0,
    fHe,
    alphaFactor: 1,
    twoPhotonFactor: 1,
    without,
    values: RECOMBINATION_VALUES,
  });
}

describe("analytic Jacobian and time derivative equal central differences", () => {
  test.each([[], ...RECOMBINATION_SWITCH_NAMES.map((name) => [name])].map((w) => [w] as const))(
    "without %j",
    (without) => {
      const system = makeSystem(without);
      const random = seededUniform(20260302);
      const J = new Float64Array(9);
      const dfdt = new Float64Array(3);
      const above = new Float64Array(3);
      const below = new Float64Array(3);
      for (let trial = 0; trial < 40; trial++) {
        const logA = -Math.log(200 + 8000 * random() ** 2);
        const y = Float64Array.of(-8 + 20 * random(), -12 + 20 * random(), 10 ** (-6 + 5.5 * random()));
        system.jacobian?.(logA, y, J);
        system.timeDerivative?.(logA, y, dfdt);
        for (let j = 0; j < 4; j++) {
          const step = j === 2 ? 1e-4 * y[2] : 1e-5;
          const up = Float64Array.from(y);
          const down = Float64Array.from(y);
          if (j < 3) {
            up[j] += step;
            down[j] -= step;
          }
          system.rhs(logA + (j === 3 ? step : 0), up, above);
          system.rhs(logA - (j === 3 ? step : 0), down, below);
          for (let i = 0; i < 3; i++) {
            const numeric = (above[i] - below[i]) / (2 * step);
            const analytic = j < 3 ? J[3 * i + j] : dfdt[i];
            // Truncation of the difference, and rounding of the terms of f that nearly cancel (as large as J_ii).
            const rounding = (1e-14 * (Math.abs(above[i]) + Math.abs(J[4 * i]))) / step;
            const allowed = 2e-6 * Math.abs(analytic) + rounding + 1e-7;
            expect(Math.abs(numeric - analytic), `d f_${i}/d ${j}, trial ${trial}, seed 20260302`).toBeLessThan(
              allowed,
            );
          }
        }
      }
    },
  );
});

test("saha_equilibrium_is_a_fixed_point of the hydrogen and helium equations, whatever the bottlenecks", () => {
  for (const without of [[], ["two-photon"], ["helium-triplet"], ["helium-bottleneck", "hydrogen-bottleneck"]]) {
    const system = makeSystem(without);
    for (const z of [1200, 1700, 2200, 3000, 5000]) {
      const e = sahaEquilibrium(STANDARD.tCmb * (1 + z), NH0 * (1 + z) ** 3, STANDARD.fHe);
      const y = Float64Array.of(Math.log(e.xp / e.neutralH), Math.log((e.he2 + e.he3) / e.he1), 0);
      const f = new Float64Array(3);
      const J = new Float64Array(9);
      system.rhs(-Math.log1p(z), y, f);
      system.jacobian?.(-Math.log1p(z), y, J);
      // The distance to the fixed point, f/J, in units of the logit: rounding only.
      expect(Math.abs(f[0] / J[0]), `H, z = ${z}`).toBeLessThan(1e-12);
      expect(Math.abs(f[1] / J[4]), `He, z = ${z}`).toBeLessThan(1e-12);
    }
  }
});

test("x_e is the root of x_e = x_p + He II + 2 He III with He III in equilibrium", () => {
  const system = makeSystem();
  const random = seededUniform(20260303);
  for (let trial = 0; trial < 200; trial++) {
    const z = 3000 + 6500 * random();
    const s = system.fill(-Math.log1p(z), Float64Array.of(20, -3 + 10 * random(), 1e-7));
    const he2 = STANDARD.fHe * s.ionisedHe * s.singlyShare;
    const he3 = STANDARD.fHe * s.ionisedHe * (1 - s.singlyShare);
    expect(Math.abs(s.xp + he2 + 2 * he3 - s.xe) / s.xe).toBeLessThan(1e-14);
  }
});

test("without helium the helium equation stays finite and does not touch x_e", () => {
  const system = makeSystem([], 0);
  const f = new Float64Array(3);
  system.rhs(-Math.log1p(1500), Float64Array.of(2, 1, 1e-6), f);
  expect(f.every(Number.isFinite)).toBe(true);
  expect(system.fill(-Math.log1p(1500), Float64Array.of(2, 1, 1e-6)).xe).toBeCloseTo(1 / (1 + Math.exp(-2)), 15);
});
