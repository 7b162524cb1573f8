// The interpolated theory: exact for power laws, measured error honest for what is not, refused outside, doubled where it errs.
import { expect, test } from "vitest";
import type { Prior } from "../../../src/inference/priors.ts";
import { ALLOWED_SIGMA, buildTheory } from "../../../src/inference/theory.ts";
import type { AskTheory } from "../../../src/inference/theory-points.ts";
import { CalculationError } from "../../../src/numerics/check.ts";
import { powerLawTheory } from "./gaussian-theory.ts";

const omegaB: Prior = { key: "omegaB", min: 0.005, max: 0.06 };
const nEff: Prior = { key: "nEff", min: 1, max: 6 };
const laws = [
  { abundance: "dToH" as const, value: 2.5e-5, exponents: [-1.6, 0], responses: [0.01, 0.02, 1e-9] },
  { abundance: "Yp" as const, value: 0.247, exponents: [0.04, 0], responses: [0.001, 0, 0] },
];

function predict(theory: Awaited<ReturnType<typeof buildTheory>>, point: number[]) {
  const values = new Float64Array(2);
  const covariance = new Float64Array(4);
  theory.predict(point, values, covariance);
  return { values, covariance };
}

test("power laws and their covariance come back; sources that never matter are left out", async () => {
  const theory = await powerLawTheory(laws, [omegaB, nEff], [0.02, 3]);
  const { values, covariance } = predict(theory, [0.0317, 4.4]);
  const D = 2.5e-5 * (0.0317 / 0.02) ** -1.6;
  const Y = 0.247 * (0.0317 / 0.02) ** 0.04;
  expect(values[0]).toBeCloseTo(D, 15);
  expect(values[1]).toBeCloseTo(Y, 12);
  expect(Math.abs(covariance[0] / (D * D * 5e-4) - 1)).toBeLessThan(1e-10);
  expect(Math.abs(covariance[1] / (D * Y * 1e-5) - 1)).toBeLessThan(1e-10);
  expect(covariance[2]).toBe(covariance[1]);
  expect(Math.abs(covariance[3] / (Y * Y * 1e-6) - 1)).toBeLessThan(1e-10);
  expect(theory.accuracy.inSigma).toBeLessThan(1e-9);
  expect(theory.accuracy.sigma).toBeLessThan(1e-9);
});

test("outside the range of its prior it refuses", async () => {
  const theory = await powerLawTheory(laws, [omegaB, nEff], [0.02, 3]);
  for (const point of [
    [0.0049, 3],
    [0.061, 3],
    [0.02, 0.9],
    [0.02, 6.1],
  ])
    expect(() => predict(theory, point)).toThrow(RangeError);
  expect(() => predict(theory, [omegaB.max, nEff.max])).not.toThrow();
});

test("a free parameter's own source of error does not count", async () => {
  const ask: AskTheory = async (questions) => questions.map(() => ({ values: [1], responses: [[0.3], [0.4]] }));
  const build = (freeSource?: number) =>
    buildTheory(ask, { names: ["Yp"], freeSource }, [omegaB], [{ abundance: "Yp", relativeSigma: 0.01 }]);
  const sigma = async (freeSource?: number) => {
    const covariance = new Float64Array(1);
    (await build(freeSource)).predict([0.02], new Float64Array(1), covariance);
    return Math.sqrt(covariance[0]);
  };
  expect(await sigma()).toBeCloseTo(0.5, 12);
  expect(await sigma(0)).toBeCloseTo(0.4, 12);
});

test("a feature too sharp for the first points is found and resolved by more of them", async () => {
  let asked = 0;
  const feature = (x: number) => Math.exp(0.5 * Math.tanh(4 * Math.log(x / 0.02)));
  const ask: AskTheory = async (questions) => {
    asked += questions.length;
    return questions.map(({ overrides }) => ({ values: [feature(overrides.omegaB as number)], responses: [[0.1]] }));
  };
  const theory = await buildTheory(ask, { names: ["Yp"] }, [omegaB], [{ abundance: "Yp", relativeSigma: 0.001 }]);
  expect(theory.accuracy.inSigma).toBeLessThanOrEqual(ALLOWED_SIGMA);
  expect(asked).toBeGreaterThan(33);
  let worst = 0;
  const values = new Float64Array(1);
  for (let x = 0.0051; x < 0.06; x += 0.0007) {
    theory.predict([x], values, new Float64Array(1));
    worst = Math.max(worst, Math.abs(Math.log(values[0] / feature(x))));
  }
  // The error stated is the largest of six places, at most; between them it may be a few times larger, not more.
  expect(worst).toBeLessThan(3 * Math.max(theory.accuracy.values.Yp, 1e-9));
});

test("an abundance that is zero somewhere is refused with the place", async () => {
  const ask: AskTheory = async (questions) => questions.map(() => ({ values: [0], responses: [[0]] }));
  const building = buildTheory(ask, { names: ["li6ToH"] }, [omegaB], [{ abundance: "li6ToH", relativeSigma: 1 }]);
  await expect(building).rejects.toThrow(CalculationError);
  await expect(building).rejects.toThrow(/li6ToH = 0 at omegaB = /);
});
