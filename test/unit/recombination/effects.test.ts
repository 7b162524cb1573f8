/** The generated tables of effects: remade here, and compared with sizes known from independent calculations. */
import { describe, expect, test } from "vitest";
import { ATOMIC_MASS_CONSTANT, PROTON_MASS } from "../../../src/constants/codata.ts";
import { computeLineOfSight } from "../../../src/lineofsight/summary.ts";
import { findRoot } from "../../../src/numerics/roots.ts";
import { heliumToHydrogen } from "../../../src/parameters/helium.ts";
import { RECOMBINATION_CONSTANTS, RECOMBINATION_VALUES as V } from "../../../src/recombination/atomic.ts";
import { CONSTANT_EFFECTS, SWITCH_EFFECTS } from "../../../src/recombination/effects.generated.ts";
import { computeIonisationHistory } from "../../../src/recombination/history.ts";
import type { RecombinationInputs } from "../../../src/recombination/inputs.ts";
import { RECOMBINATION_SWITCH_NAMES } from "../../../src/recombination/switches.ts";
import { allEffects } from "../../../src/scripts/recombination-effects.ts";
import { STANDARD } from "./cosmologies.ts";

describe("effects.generated.ts", () => {
  const remade = allEffects();

  test("holds every constant and every switch", () => {
    expect(Object.keys(CONSTANT_EFFECTS)).toEqual(Object.keys(RECOMBINATION_CONSTANTS));
    expect(Object.keys(SWITCH_EFFECTS)).toEqual(RECOMBINATION_SWITCH_NAMES);
  });

  test("equals what its script makes now, to its four digits", () => {
    for (const [kept, made] of [
      [CONSTANT_EFFECTS, remade.constants],
      [SWITCH_EFFECTS, remade.switches],
    ])
      for (const [name, effect] of Object.entries(kept)) {
        const near = (a: number, b: number) => Math.abs(a - b) < 1e-3 * Math.abs(b) + 4e-6;
        expect(near(effect.zStar, made[name].zStar), `${name}: ${effect.zStar}, ${made[name].zStar}`).toBe(true);
        expect(near(effect.zDrag, made[name].zDrag), `${name}: ${effect.zDrag}, ${made[name].zDrag}`).toBe(true);
        for (const [z, change] of Object.entries(effect.xe))
          expect(near(change, made[name].xe[z]), `${name}, z = ${z}: ${change}, ${made[name].xe[z]}`).toBe(true);
      }
  });

  test("every switch changes a number by more than the error of the integration", () => {
    for (const [name, { zStar, xe }] of Object.entries(SWITCH_EFFECTS))
      expect(Math.max(Math.abs(zStar) / 1000, ...Object.values(xe).map(Math.abs)), name).toBeGreaterThan(1e-4);
  });
});

// Sizes of common mistakes and choices, from an independent calculation made for this project.
describe("known sizes", () => {
  const run = (changes: Partial<RecombinationInputs>) => {
    const inputs = { ...STANDARD, ...changes };
    const history = computeIonisationHistory(inputs);
    return { history, ...computeLineOfSight(inputs, history) };
  };
  const standard = run({});
  const shift = (changes: Partial<RecombinationInputs>) => run(changes).summary.zStar - standard.summary.zStar;

  test("reduced mass instead of the electron mass: +0.056 in z_star", () => {
    const values = { ...V, electronMass: V.electronMass / (1 + V.electronMass / PROTON_MASS.value) };
    expect(Math.abs(shift({ values }) - 0.056)).toBeLessThan(0.0005);
  });

  test("proton mass for the hydrogen atom at fixed mass fraction and n_He/n_H: -0.017", () => {
    // n_H larger by the mass ratio: the same as a smaller mass of both atoms at fixed f_He.
    const ratio = PROTON_MASS.value / ATOMIC_MASS_CONSTANT.value / V.hydrogenMass;
    const values = { ...V, hydrogenMass: V.hydrogenMass * ratio, heliumMass: V.heliumMass * ratio };
    expect(Math.abs(shift({ values }) + 0.017)).toBeLessThan(0.0005);
  });

  test("nucleon fraction for the mass fraction of helium: +0.054", () => {
    // Mass fraction Y of nucleon fraction X: Y/(1 - Y) = (m_He/4 m_H) X/(1 - X); taking X for Y.
    const Y = 0.2454;
    const odds = (Y / (1 - Y)) * ((4 * V.hydrogenMass) / V.heliumMass);
    expect(Math.abs(shift({ fHe: heliumToHydrogen(odds / (1 + odds)) }) - 0.054)).toBeLessThan(0.002);
  });

  test("photo-ionisation at T_r: -0.030 in z_star, +5e-4 in x_e(200)", () => {
    expect(Math.abs(SWITCH_EFFECTS["matter-temperature-rates"].zStar + 0.03)).toBeLessThan(0.0006);
    expect(Math.abs(SWITCH_EFFECTS["matter-temperature-rates"].xe[200] - 5e-4)).toBeLessThan(5e-5);
  });

  test("optical depth started at z = 200: 0.157 in z_star", () => {
    const { sight, summary } = standard;
    const before = sight.opticalDepth(Math.log1p(200));
    const x = findRoot((at) => sight.opticalDepth(at) - before - 1, Math.log1p(900), Math.log1p(1400));
    expect(Math.abs(Math.expm1(x) - summary.zStar - 0.157)).toBeLessThan(0.0005);
  });

  test("with reionisation in the depth z_star would be about 5 lower", () => {
    const { sight, summary } = run({ tauReion: 0.054 });
    expect(summary.zStar).toBeCloseTo(standard.summary.zStar, 5);
    const x = findRoot((at) => sight.opticalDepth(at) - 1, Math.log1p(900), Math.log1p(1400));
    expect(Math.abs(summary.zStar - Math.expm1(x) - 5)).toBeLessThan(0.5);
  });
});
