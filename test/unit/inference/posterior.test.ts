// The posterior against closed forms: Gaussian, edges, two peaks; the sampler against the grid.
import { describe, expect, test } from "vitest";
import type { Fit } from "../../../src/inference/likelihood.ts";
import { likelihoodOf } from "../../../src/inference/likelihood.ts";
import { climb, gridPosterior } from "../../../src/inference/posterior.ts";
import type { Prior } from "../../../src/inference/priors.ts";
import { sampledPosterior } from "../../../src/inference/sampled-posterior.ts";
import { normalQuantile } from "../../../src/numerics/statistics.ts";
import { measured, powerLawTheory } from "./gaussian-theory.ts";

/** A Gaussian likelihood with the given inverse covariance. */
const gaussian =
  (centre: readonly number[], inverse: readonly (readonly number[])[]) =>
  (point: ArrayLike<number>): Fit => {
    const r = centre.map((c, d) => point[d] - c);
    const chi2 = r.reduce((sum, a, i) => sum + r.reduce((part, b, j) => part + a * b * inverse[i][j], 0), 0);
    return { chi2, lnLikelihood: -chi2 / 2 };
  };
const omegaB: Prior = { key: "omegaB", min: 0.005, max: 0.06 };
const nEff: Prior = { key: "nEff", min: 1, max: 6 };

describe("one parameter on a grid", () => {
  test.each([1e-2, 1e-4, 1e-6])("a Gaussian of sigma %s: mean, sigma and central intervals", (sigma) => {
    const { best, estimates, chi2, error } = gridPosterior(gaussian([0.022], [[1 / sigma ** 2]]), [
      { ...omegaB, min: -1, max: 1 },
    ]);
    const [e] = estimates;
    expect(Math.abs(best[0] - 0.022)).toBeLessThan(1e-3 * sigma);
    expect(Math.abs(e.mean - 0.022)).toBeLessThan(1e-6 * sigma);
    expect(Math.abs(e.sigma / sigma - 1)).toBeLessThan(1e-6);
    for (const [end, q] of [
      ["lower95", 0.025],
      ["lower68", 0.16],
      ["upper68", 0.84],
      ["upper95", 0.975],
    ] as const)
      expect(Math.abs((e[end] - 0.022) / sigma - normalQuantile(q)), end).toBeLessThan(1e-4);
    expect(chi2).toBeLessThan(1e-6);
    expect(error).toBeLessThan(1e-3);
  });

  test("a Gaussian prior multiplies: weighted mean and its error, and its pull counts in chi^2", () => {
    const prior = { ...omegaB, gaussian: { value: 0.0224, sigma: 0.0002 } };
    const { estimates, chi2 } = gridPosterior(gaussian([0.022], [[1 / 0.0003 ** 2]]), [prior]);
    const weight = 1 / 0.0003 ** 2 + 1 / 0.0002 ** 2;
    expect(estimates[0].sigma).toBeCloseTo(1 / Math.sqrt(weight), 9);
    expect(estimates[0].mean).toBeCloseTo((0.022 / 0.0003 ** 2 + 0.0224 / 0.0002 ** 2) / weight, 9);
    expect(chi2).toBeCloseTo(0.0004 ** 2 / (0.0003 ** 2 + 0.0002 ** 2), 6);
  });

  test("cut by the edge of its prior, the intervals are those of half a Gaussian", () => {
    const sigma = 0.001;
    const { estimates, best } = gridPosterior(gaussian([0.005], [[1 / sigma ** 2]]), [omegaB]);
    expect(best[0]).toBe(0.005);
    // Half a Gaussian: the share q lies below sigma times the normal quantile of (1 + q)/2.
    expect(Math.abs((estimates[0].upper68 - 0.005) / sigma - normalQuantile(0.92))).toBeLessThan(1e-4);
  });

  test("two narrow peaks far apart are both integrated", () => {
    const fitAt = (point: ArrayLike<number>): Fit => {
      const ln = Math.log(
        Math.exp(-(((point[0] - 0.01) / 2e-4) ** 2) / 2) + Math.exp(-(((point[0] - 0.05) / 2e-4) ** 2) / 2),
      );
      return { chi2: -2 * ln, lnLikelihood: ln };
    };
    const [e] = gridPosterior(fitAt, [omegaB]).estimates;
    expect(Math.abs(e.mean - 0.03)).toBeLessThan(1e-5);
    expect(Math.abs(e.sigma - 0.02)).toBeLessThan(1e-4);
  });
});

describe("two parameters on a grid", () => {
  const [s, t, rho] = [3e-4, 0.3, 0.8];
  const norm = 1 / (1 - rho * rho);
  const fitAt = gaussian(
    [0.022, 3],
    [
      [norm / (s * s), (-norm * rho) / (s * t)],
      [(-norm * rho) / (s * t), norm / (t * t)],
    ],
  );

  test("the marginals of a correlated Gaussian, and its contours", () => {
    const posterior = gridPosterior(fitAt, [omegaB, nEff]);
    const [a, b] = posterior.estimates;
    expect(Math.abs(a.sigma / s - 1)).toBeLessThan(1e-6);
    expect(Math.abs(b.sigma / t - 1)).toBeLessThan(1e-6);
    expect(Math.abs((b.lower68 - 3) / t - normalQuantile(0.16))).toBeLessThan(2e-3);
    expect(posterior.error).toBeLessThan(0.01);
    // In two dimensions the density falls to 1 - q of its peak at the edge of the region of highest density that holds q.
    expect(Math.abs((posterior.plane?.levels.sigma1 ?? 0) / (1 - 0.6827) - 1)).toBeLessThan(0.01);
  });

  test("draws carry the mean and the correlation", () => {
    const { draws } = gridPosterior(fitAt, [omegaB, nEff]);
    const average = (f: (x: number, y: number) => number) =>
      draws.reduce((sum, { point: [x, y], weight }) => sum + weight * f(x, y), 0);
    expect(Math.abs(draws.reduce((sum, { weight }) => sum + weight, 0) - 1)).toBeLessThan(1e-6);
    expect(Math.abs(average((x) => x) - 0.022)).toBeLessThan(0.01 * s);
    expect(Math.abs(average((x, y) => ((x - 0.022) / s) * ((y - 3) / t)) - rho)).toBeLessThan(0.01);
  });

  test("climbing along a narrow ridge reaches the top", () => {
    const top = climb((point) => fitAt(point).lnLikelihood, [0.0225, 2.5], [1e-4, 0.1], [omegaB, nEff]);
    expect(Math.abs(top[0] - 0.022) / s).toBeLessThan(0.01);
    expect(Math.abs(top[1] - 3) / t).toBeLessThan(0.01);
  });
});

// The sampler's error of a quantile is 1.5 sigma/sqrt(independent samples); 4 of them are allowed.
test("three parameters, sampled: the third known by a prior, the first two as on the grid (seed 7)", async () => {
  const laws = [
    { abundance: "dToH" as const, value: 2.5e-5, exponents: [-1.65, 0.4, 0.42], responses: [0.015, 0] },
    { abundance: "Yp" as const, value: 0.247, exponents: [0.04, 0.16, 0.73], responses: [0, 0.0004] },
  ];
  const data = [measured("dToH", 2.53e-5, 0.03e-5), measured("Yp", 0.245, 0.003)];
  const tauN: Prior = { key: "tauN", min: 860, max: 900, gaussian: { value: 878.4, sigma: 0.5 } };
  const theory3 = await powerLawTheory(laws, [omegaB, nEff, tauN], [0.022, 3, 878.4]);
  const theory2 = await powerLawTheory(laws, [omegaB, nEff], [0.022, 3]);
  const sampled = sampledPosterior(likelihoodOf(theory3, data), [omegaB, nEff, tauN], 7);
  const grid = gridPosterior(likelihoodOf(theory2, data), [omegaB, nEff]);
  for (const d of [0, 1])
    for (const end of ["lower95", "lower68", "upper68", "upper95"] as const) {
      const sigma = grid.estimates[d].sigma;
      const off = Math.abs(sampled.estimates[d][end] - grid.estimates[d][end]) / sigma;
      expect(off, `parameter ${d}, ${end}`).toBeLessThan(4 * sampled.error * (end.endsWith("95") ? 2 : 1) + 0.01);
    }
  expect(Math.abs(sampled.estimates[2].sigma / 0.5 - 1)).toBeLessThan(4 * sampled.error);
  expect(sampled.best[0]).toBeCloseTo(grid.best[0], 4);
}, 60_000);
