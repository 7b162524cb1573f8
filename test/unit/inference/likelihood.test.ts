// The likelihood against closed forms: one and two data, correlated theory errors, upper limits.
import { expect, test } from "vitest";
import { gaussianFit } from "../../../src/inference/likelihood.ts";
import { CalculationError } from "../../../src/numerics/check.ts";
import { measured } from "./gaussian-theory.ts";

const at = (index: number, observation: ReturnType<typeof measured>) => ({ index, observation });

test("one datum: chi^2 = (X - x)^2/(sigma^2 + theory^2)", () => {
  const { chi2, lnLikelihood } = gaussianFit([at(0, measured("dToH", 2.5, 0.3))], [3.1], [0.16]);
  expect(chi2).toBeCloseTo(0.36 / (0.09 + 0.16), 12);
  expect(lnLikelihood).toBeCloseTo(-(0.36 / 0.25 + Math.log(0.25)) / 2, 12);
});

test("two data with correlated theory errors: the inverse of a two by two matrix", () => {
  const covariance = [0.2, 0.1, 0.1, 0.4];
  const data = [at(0, measured("dToH", 1, 0.3)), at(1, measured("Yp", 2, 0.5))];
  const [a, b, c] = [0.2 + 0.09, 0.1, 0.4 + 0.25];
  const [r, s] = [1.4 - 1, 1.7 - 2];
  const det = a * c - b * b;
  const { chi2, lnLikelihood } = gaussianFit(data, [1.4, 1.7], covariance);
  expect(chi2).toBeCloseTo((c * r * r - 2 * b * r * s + a * s * s) / det, 12);
  expect(lnLikelihood).toBeCloseTo(-(chi2 + Math.log(det)) / 2, 12);
  // The order of the data does not matter, nor predictions that are not observed.
  expect(gaussianFit([...data].reverse(), [1.4, 1.7], covariance).chi2).toBeCloseTo(chi2, 12);
  const wider = [0.2, 0, 0.1, 0, 9, 0, 0.1, 0, 0.4];
  expect(gaussianFit([at(0, data[0].observation), at(2, data[1].observation)], [1.4, 7, 1.7], wider).chi2).toBeCloseTo(
    chi2,
    12,
  );
});

test("an upper limit counts only above it", () => {
  const limit = { ...measured("he3ToH", 1.1, 0.2), kind: "upper-limit" as const };
  expect(gaussianFit([at(0, limit)], [1.0], [0]).chi2).toBe(0);
  expect(gaussianFit([at(0, limit)], [1.5], [0]).chi2).toBeCloseTo(4, 12);
});

test("a covariance that is not positive definite is refused", () => {
  const data = [at(0, measured("dToH", 1, 1e-9)), at(1, measured("Yp", 2, 1e-9))];
  expect(() => gaussianFit(data, [1, 2], [1, 2, 2, 1])).toThrow(CalculationError);
});
