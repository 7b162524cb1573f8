// The ensemble sampler against densities whose moments are known; its autocorrelation time against an exact one.
import { expect, test } from "vitest";
import { CalculationError } from "../../../src/numerics/check.ts";
import { autocorrelationTime, sampleEnsemble } from "../../../src/numerics/ensemble.ts";
import { seededUniform } from "../../../src/numerics/random.ts";
import { covariance, mean } from "../../../src/numerics/statistics.ts";

const around = (centre: readonly number[], width: number, walkers = 64) => {
  const random = seededUniform(5);
  return Array.from({ length: walkers }, () => centre.map((x) => x + width * (random() - 0.5)));
};

// Errors: a mean to sigma/sqrt(n), a variance to sigma^2 sqrt(2/n) of n independent samples; 4 of them are allowed.
test("a correlated Gaussian of three variables whose scales differ by 1e6 (seed 11)", () => {
  const scale = [1e-3, 1, 1e3];
  const rho = 0.9;
  const lnDensity = (x: Float64Array) => {
    const [a, b, c] = x.map((v, d) => v / scale[d]);
    return -(a * a - 2 * rho * a * b + b * b) / (2 * (1 - rho * rho)) - (c * c) / 2;
  };
  const ensemble = sampleEnsemble(lnDensity, around([0, 0, 0], 1e-3), { seed: 11, lengths: 100 });
  const n = ensemble.independent;
  expect(n).toBeGreaterThan(3000);
  ensemble.samples.forEach((samples, d) => {
    expect(Math.abs(mean(samples)) / scale[d]).toBeLessThan(4 / Math.sqrt(n));
    expect(Math.abs(covariance(samples, samples) / scale[d] ** 2 - 1)).toBeLessThan(4 * Math.sqrt(2 / n));
  });
  const correlation = covariance(ensemble.samples[0], ensemble.samples[1]) / (scale[0] * scale[1]);
  expect(Math.abs(correlation - rho)).toBeLessThan(4 * Math.sqrt(2 / n));
  expect(ensemble.acceptance).toBeGreaterThan(0.2);
});

test("a density with an edge: the exponential of two variables has mean 1 (seed 12)", () => {
  const lnDensity = ([a, b]: Float64Array) => (a >= 0 && b >= 0 ? -a - b : Number.NEGATIVE_INFINITY);
  const { samples, independent } = sampleEnsemble(lnDensity, around([1, 1], 0.5), { seed: 12, lengths: 100 });
  for (const each of samples) expect(Math.abs(mean(each) - 1)).toBeLessThan(4 / Math.sqrt(independent));
});

test("the same seed gives the same samples, another seed others", () => {
  const run = (seed: number) =>
    sampleEnsemble(([x]) => (-x * x) / 2, around([0], 1), { seed, lengths: 20 }).samples[0].slice(0, 50);
  expect(run(3)).toEqual(run(3));
  expect(run(3)).not.toEqual(run(4));
});

// x_t = a x_(t-1) + noise has the autocorrelation time (1 + a)/(1 - a).
test("the autocorrelation time of a first-order process", () => {
  const random = seededUniform(21);
  for (const a of [0, 0.5, 0.9]) {
    const x = new Float64Array(32).fill(0);
    const rows = Array.from({ length: 8000 }, () => {
      for (let k = 0; k < x.length; k++) x[k] = a * x[k] + (random() - 0.5);
      return x.slice();
    });
    const exact = (1 + a) / (1 - a);
    expect(Math.abs(autocorrelationTime(rows) / exact - 1), `a = ${a}`).toBeLessThan(0.1);
  }
});

test("walkers that start where the density is zero, or never converge, are refused", () => {
  expect(() => sampleEnsemble(() => Number.NEGATIVE_INFINITY, around([0], 1), { seed: 1 })).toThrow(CalculationError);
  expect(() => sampleEnsemble(([x]) => -x * x, around([0], 1), { seed: 1, maxSteps: 100 })).toThrow(/not converged/);
  expect(() => sampleEnsemble(([x]) => -x * x, around([0], 1, 3), { seed: 1, walkers: 3 })).toThrow(RangeError);
});
