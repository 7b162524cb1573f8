/** The wrapper of the non-stiff integrator: accuracy, dense output, and that no failure passes for an answer. */
import { describe, expect, test } from "vitest";
import { CalculationError } from "../../../src/numerics/check.ts";
import { integrateSmooth } from "../../../src/numerics/ode-smooth.ts";

/** Kepler's problem, eccentricity 0.3, from perihelion: period 2 pi, energy -1/2. */
function kepler(_t: number, [x, y, vx, vy]: number[]): number[] {
  const r3 = Math.hypot(x, y) ** 3;
  return [vx, vy, -x / r3, -y / r3];
}
const start = [0.7, 0, 0, Math.sqrt(1.3 / 0.7)];

describe("accuracy", () => {
  test("one orbit closes, with an error that follows the tolerance", () => {
    const errors = [1e-6, 1e-8, 1e-10, 1e-12].map((rtol) => {
      const { y } = integrateSmooth(kepler, 0, start, 2 * Math.PI, [], undefined, { rtol, atol: rtol });
      const error = Math.hypot(y[0] - start[0], y[1] - start[1]);
      expect(error, `rtol ${rtol}`).toBeLessThan(1000 * rtol);
      return error;
    });
    for (let i = 1; i < errors.length; i++) expect(errors[i]).toBeLessThan(errors[i - 1]);
  });

  test("backwards: from 1 to 0", () => {
    const { y } = integrateSmooth((_x, v) => [v[0]], 1, [Math.E], 0);
    expect(Math.abs(y[0] - 1)).toBeLessThan(1e-9);
  });

  test("a time-dependent right-hand side", () => {
    const { y } = integrateSmooth((x) => [Math.cos(x)], 0, [0], 2);
    expect(Math.abs(y[0] - Math.sin(2))).toBeLessThan(1e-10);
  });
});

describe("dense output", () => {
  test("every point asked for comes once, in order, first and last included, within 1e-7", () => {
    const xOut = [0, 0.1, 0.5, 1.7, 3, 5];
    const seen: number[] = [];
    integrateSmooth(
      (x) => [Math.cos(x)],
      0,
      [0],
      5,
      xOut,
      (i, x, y) => {
        seen.push(i);
        expect(x).toBe(xOut[i]);
        expect(Math.abs(y[0] - Math.sin(x)), `at ${x}`).toBeLessThan(1e-7);
      },
    );
    expect(seen).toEqual([0, 1, 2, 3, 4, 5]);
  });

  test("points on the way down", () => {
    const seen: number[] = [];
    integrateSmooth(
      (x) => [2 * x],
      2,
      [4],
      0,
      [2, 1.5, 0.25, 0],
      (_i, x, y) => {
        seen.push(x);
        expect(Math.abs(y[0] - x * x)).toBeLessThan(1e-8);
      },
    );
    expect(seen).toEqual([2, 1.5, 0.25, 0]);
  });
});

describe("failures throw", () => {
  test("a derivative that is not finite names component and place", () => {
    const run = () => integrateSmooth((x) => [1, x > 0.5 ? Number.NaN : 0], 0, [0, 0], 1);
    expect(run).toThrow(CalculationError);
    expect(run).toThrow(/derivative of component 1 is not finite at x = 0\.[5-9]/);
  });

  test("running out of steps is no answer", () => {
    const stiff = (x: number, [y]: number[]) => [-1e6 * (y - Math.cos(x))];
    expect(() => integrateSmooth(stiff, 0, [1], 10, [], undefined, { maxSteps: 100 })).toThrow(
      /smooth integration stopped after \d+ steps before x = 10/,
    );
  });
});
