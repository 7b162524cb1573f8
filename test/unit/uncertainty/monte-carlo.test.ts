// Samples: their dependence on plan and number alone, their distribution, and an error of sigma that can be believed.
import { describe, expect, test } from "vitest";
import { SOBOL_DIMENSIONS } from "../../../src/numerics/sobol.ts";
import { covariance, mean } from "../../../src/numerics/statistics.ts";
import {
  planSamples,
  QUANTILES,
  REPETITIONS,
  type SamplePlan,
  standardNormals,
  summariseSamples,
} from "../../../src/uncertainty/monte-carlo.ts";

const plan = (seed: number, sources: number, leading = sources): SamplePlan => ({
  seed,
  sources,
  leading: Array.from({ length: Math.min(leading, SOBOL_DIMENSIONS) }, (_, s) => s),
});

test("a sample depends on the plan and its number alone", () => {
  const backwards = Array.from({ length: 50 }, (_, i) => standardNormals(plan(3, 40), 49 - i)).reverse();
  backwards.forEach((x, i) => {
    expect(standardNormals(plan(3, 40), i)).toEqual(x);
  });
  expect(standardNormals(plan(4, 40), 7)).not.toEqual(standardNormals(plan(3, 40), 7));
});

test("seeds beyond 32 bits, and neighbouring ones, give different samples", () => {
  const seeds = [0, 1, 2, 2 ** 32, 2 ** 32 + 1, Number.MAX_SAFE_INTEGER, Number.MAX_SAFE_INTEGER - 1];
  const first = seeds.map((seed) => standardNormals(plan(seed, 40), 0).join());
  expect(new Set(first).size).toBe(seeds.length);
  // Of the sources at random and of the leading ones alike.
  expect(new Set(first.map((row) => row.split(",")[39])).size).toBe(seeds.length);
  expect(new Set(first.map((row) => row.split(",")[0])).size).toBe(seeds.length);
});

describe("4096 samples of 40 sources, 32 of them leading (seed 5)", () => {
  const n = 4096;
  const rows = Array.from({ length: n }, (_, i) => standardNormals(plan(5, 40), i));
  const column = (s: number) => Float64Array.from(rows, (row) => row[s]);

  test("every source has mean 0 and variance 1; the leading ones much more closely than chance", () => {
    for (let s = 0; s < 40; s++) {
      const x = column(s);
      const leading = s < SOBOL_DIMENSIONS;
      expect(Math.abs(mean(x)), `source ${s}`).toBeLessThan((leading ? 0.5 : 4.5) / Math.sqrt(n));
      expect(Math.abs(covariance(x, x) - 1), `source ${s}`).toBeLessThan((leading ? 1 : 4.5) * Math.sqrt(2 / n));
    }
  });

  test("no two sources are correlated beyond chance", () => {
    for (let s = 0; s < 40; s++)
      for (let t = 0; t < s; t++)
        expect(Math.abs(covariance(column(s), column(t))), `${s} and ${t}`).toBeLessThan(4.5 / Math.sqrt(n));
  });
});

test("the leading sources are those with the largest share in any variance", () => {
  const response = Array.from({ length: 50 }, (_, s) => (s === 17 ? [0, 1e-9] : s === 4 ? [1, 0] : [1e-3, 0]));
  const { leading, sources } = planSamples(1, response);
  expect(sources).toBe(50);
  expect(leading).toHaveLength(SOBOL_DIMENSIONS);
  expect(leading.slice(0, 2).sort((a, b) => a - b)).toEqual([4, 17]);
});

describe("summary", () => {
  test("a sample of five by hand", () => {
    const {
      mean: m,
      sigma,
      correlation,
      quantiles,
      sigmaError,
    } = summariseSamples([Float64Array.of(1, 2, 3, 4, 5), Float64Array.of(5, 4, 3, 2, 1)]);
    expect(m).toEqual([3, 3]);
    expect(sigma[0]).toBeCloseTo(Math.sqrt(2.5), 14);
    expect(correlation[0][1]).toBeCloseTo(-1, 14);
    expect(quantiles[0]["0.5"]).toBe(3);
    expect(Object.keys(quantiles[0])).toEqual([...QUANTILES]);
    expect(sigmaError[0]).toBeCloseTo(Math.sqrt(2.5) / Math.sqrt(8), 14);
  });

  // The error of sigma is known from 8 repetitions to 1/sqrt(2 * 7) = 27 %; its mean over 40 seeds to 4 %, the scatter of
  // 40 sigmas to 11 %: together 12 %, of which 3 are allowed.
  test("the error quoted for sigma is the scatter over seeds, and far below that of independent samples", () => {
    const n = 512;
    const sigmas: number[] = [];
    const errors: number[] = [];
    for (let seed = 0; seed < 40; seed++) {
      const x = Float64Array.from({ length: n }, (_, i) => {
        const p = standardNormals(plan(seed, 12), i);
        return Math.exp(0.02 * p[0] + 0.015 * p[1] - 0.01 * p[2] + 0.005 * p[3] * p[4]);
      });
      const summary = summariseSamples([x]);
      sigmas.push(summary.sigma[0]);
      errors.push(summary.sigmaError[0]);
    }
    const scatter = Math.sqrt(covariance(sigmas, sigmas));
    const quoted = Math.sqrt(mean(errors.map((e) => e * e)));
    expect(Math.abs(quoted / scatter - 1)).toBeLessThan(0.36);
    expect(quoted).toBeLessThan(0.4 * (mean(sigmas) / Math.sqrt(2 * n)));
  });

  test("samples that do not vary have no error and no correlation", () => {
    const { sigma, sigmaError, correlation } = summariseSamples([
      new Float64Array(100).fill(2),
      Float64Array.from({ length: 100 }, (_, i) => i),
    ]);
    expect([sigma[0], sigmaError[0], correlation[0][1]]).toEqual([0, 0, 0]);
  });

  test("repetitions are dealt out in turn", () => expect(REPETITIONS).toBe(8));
});
