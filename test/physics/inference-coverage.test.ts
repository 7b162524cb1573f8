// Coverage: of 400 synthetic data sets with a known truth the 68 % interval holds it in 68 %, within binomial error.
import { expect, test } from "vitest";
import { likelihoodOf } from "../../src/inference/likelihood.ts";
import { gridPosterior } from "../../src/inference/posterior.ts";
import type { Prior } from "../../src/inference/priors.ts";
import { buildTheory, type Theory } from "../../src/inference/theory.ts";
import { loadRates } from "../../src/node/load-rates.ts";
import { ABUNDANCE_NAMES } from "../../src/nucleosynthesis/abundances.ts";
import { seededUniform } from "../../src/numerics/random.ts";
import { normalQuantile } from "../../src/numerics/statistics.ts";
import { askEngine } from "../../src/requests/infer.ts";
import { taskAnswerer } from "../../src/requests/tasks.ts";
import { singleThread } from "../../src/sweep/engine.ts";
import { measured } from "../unit/inference/gaussian-theory.ts";

const SETS = 400;
const SEED = 20260101;
/** Errors of the synthetic measurements. */
const SIGMA = { dToH: 0.03e-5, Yp: 0.003 } as const;
/**
 * Binomial standard deviations that are allowed: each of the six shares below is outside with a probability of 1 %. With
 * 4000 sets and another seed all six were within 1.7, so there is no bias that 400 could show.
 */
const ALLOWED = 2.576;

function theoryOver(priors: readonly Prior[]): Promise<Theory> {
  const { ask } = askEngine(singleThread(taskAnswerer(loadRates())), { network: "twelve" });
  return buildTheory(ask, { names: ABUNDANCE_NAMES }, priors, [
    { abundance: "dToH", relativeSigma: 0.012 },
    { abundance: "Yp", relativeSigma: 0.012 },
  ]);
}

/** Shares of data sets whose central 68 and 95 % intervals hold the truth, for each parameter. */
function coverage(
  theory: Theory,
  priors: readonly Prior[],
  truth: readonly number[],
  points?: { search: number; fine: number },
) {
  const random = seededUniform(SEED);
  const normal = () => normalQuantile(random());
  const values = new Float64Array(2);
  const covariance = new Float64Array(4);
  theory.predict(truth, values, covariance);
  const [sD, sY] = [Math.sqrt(covariance[0]), Math.sqrt(covariance[3])];
  const rho = covariance[1] / (sD * sY);
  const held = priors.map(() => ({ in68: 0, in95: 0 }));
  for (let i = 0; i < SETS; i++) {
    // What nature made differs from the prediction by the errors of the rates, correlated; the measurement by its own.
    const [u, v] = [normal(), normal()];
    const D = values[0] + sD * u + SIGMA.dToH * normal();
    const Y = values[1] + sY * (rho * u + Math.sqrt(1 - rho * rho) * v) + SIGMA.Yp * normal();
    const data = [measured("dToH", D, SIGMA.dToH), measured("Yp", Y, SIGMA.Yp)];
    const { estimates } = gridPosterior(likelihoodOf(theory, data), priors, points);
    estimates.forEach((e, d) => {
      if (e.lower68 <= truth[d] && truth[d] <= e.upper68) held[d].in68++;
      if (e.lower95 <= truth[d] && truth[d] <= e.upper95) held[d].in95++;
    });
  }
  return held.map(({ in68, in95 }) => ({ in68: in68 / SETS, in95: in95 / SETS }));
}

function expectCoverage(found: ReturnType<typeof coverage>, keys: readonly string[]): void {
  found.forEach(({ in68, in95 }, d) => {
    for (const [share, wanted] of [
      [in68, 0.68],
      [in95, 0.95],
    ]) {
      const binomial = Math.sqrt((wanted * (1 - wanted)) / SETS);
      expect(Math.abs(share - wanted), `${keys[d]}: ${share} of ${SETS} at ${wanted}, seed ${SEED}`).toBeLessThan(
        ALLOWED * binomial,
      );
    }
  });
}

test("omega_b", async () => {
  const priors: Prior[] = [{ key: "omegaB", min: 0.015, max: 0.03 }];
  const theory = await theoryOver(priors);
  expectCoverage(coverage(theory, priors, [0.0222], { search: 201, fine: 401 }), ["omegaB"]);
});

test("omega_b and N_eff together", async () => {
  const priors: Prior[] = [
    { key: "omegaB", min: 0.015, max: 0.03 },
    { key: "nEff", min: 1, max: 6 },
  ];
  const theory = await theoryOver(priors);
  expectCoverage(coverage(theory, priors, [0.0222, 3.044], { search: 41, fine: 61 }), ["omegaB", "nEff"]);
});
