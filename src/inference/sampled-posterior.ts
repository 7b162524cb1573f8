/** The posterior of three or more parameters, by an ensemble of walkers. */
import { CalculationError } from "../numerics/check.ts";
import { highestDensityLevel, normalised } from "../numerics/density.ts";
import { type Ensemble, sampleEnsemble } from "../numerics/ensemble.ts";
import { seededUniform } from "../numerics/random.ts";
import { sortedQuantile } from "../numerics/statistics.ts";
import {
  climb,
  type FitAt,
  INTERVALS,
  type ParameterEstimate,
  type Plane,
  type Posterior,
  posteriorFunction,
} from "./posterior.ts";
import type { Prior } from "./priors.ts";

const WALKERS = 64;
/** Points thrown over the whole range to find where the posterior is. */
const THROWN = 4000;
/** Bins of a marginal, and of a plane along each axis. */
const BINS = { marginal: 60, plane: 48 } as const;
/** Draws kept for predictions. */
const DRAWS = 2000;

/**
 * Samples the posterior within the ranges of the priors.
 * @param seed of the walkers: the same seed gives the same numbers
 * @throws {CalculationError} if the walkers do not converge
 */
export function sampledPosterior(fitAt: FitAt, priors: readonly Prior[], seed: number): Posterior {
  const { at, count } = posteriorFunction(fitAt, priors);
  const ln = (point: ArrayLike<number>) => {
    for (let d = 0; d < priors.length; d++)
      if (!(point[d] >= priors[d].min && point[d] <= priors[d].max)) return Number.NEGATIVE_INFINITY;
    return at(point).ln;
  };
  const random = seededUniform(seed);
  const anywhere = () => priors.map(({ min, max }) => min + (max - min) * random());
  let start = anywhere();
  let height = ln(start);
  for (let i = 1; i < THROWN; i++) {
    const point = anywhere();
    const found = ln(point);
    if (found > height) [start, height] = [point, found];
  }
  const top = climb(
    ln,
    start,
    priors.map(({ min, max }) => (max - min) / 20),
    priors,
  );
  const widths = priors.map((prior, d) => halfWidth(ln, top, d, prior));
  const starts = Array.from({ length: WALKERS }, () => {
    for (let tries = 0; tries < 1000; tries++) {
      const point = Float64Array.from(top, (x, d) => x + (2 * random() - 1) * widths[d]);
      if (Number.isFinite(ln(point))) return point;
    }
    throw new CalculationError("sampler", "no place for the walkers near the best point");
  });
  const ensemble = sampleEnsemble(ln, starts, { seed, walkers: WALKERS, lengths: 100 });
  const best = climb(
    ln,
    ensemble.best,
    widths.map((width) => width / 4),
    priors,
  );
  const estimates = ensemble.samples.map((samples, d) => estimateOf(samples, best[d]));
  return {
    keys: priors.map(({ key }) => key),
    best: [...best],
    chi2: at(best).chi2,
    estimates,
    marginals: ensemble.samples.map(marginalOf),
    plane: planeOf(ensemble.samples[0], ensemble.samples[1]),
    draws: drawsOf(ensemble),
    method: "sampler",
    evaluations: count(),
    // Standard error of the 16 % quantile of a Gaussian: sqrt(q (1 - q))/density = 1.51 sigma/sqrt(n).
    error: 1.51 / Math.sqrt(ensemble.independent),
  };
}

/** Distance from the top at which ln posterior has fallen by 1/2 along one axis, on its shorter side. */
function halfWidth(
  ln: (point: ArrayLike<number>) => number,
  top: Float64Array,
  d: number,
  { min, max }: Prior,
): number {
  const height = ln(top);
  const point = top.slice();
  for (let width = (max - min) / 2; width > (max - min) * 1e-6; width /= 1.5) {
    const falls = [-1, 1].every((side) => {
      point[d] = top[d] + side * width;
      return !(ln(point) < height - 0.5) && Number.isFinite(ln(point));
    });
    if (falls) return width;
  }
  return (max - min) * 1e-6;
}

function estimateOf(samples: Float64Array, best: number): ParameterEstimate {
  const sorted = samples.slice().sort();
  const mean = samples.reduce((sum, x) => sum + x, 0) / samples.length;
  const variance = samples.reduce((sum, x) => sum + (x - mean) ** 2, 0) / (samples.length - 1);
  const ends = Object.fromEntries(Object.entries(INTERVALS).map(([name, q]) => [name, sortedQuantile(sorted, q)]));
  return { best, mean, sigma: Math.sqrt(variance), ...(ends as Record<keyof typeof INTERVALS, number>) };
}

function binned(samples: Float64Array, bins: number): { edges: readonly [number, number]; of: (x: number) => number } {
  const low = samples.reduce((a, b) => Math.min(a, b));
  const high = samples.reduce((a, b) => Math.max(a, b));
  return { edges: [low, high], of: (x) => Math.min(bins - 1, Math.floor(((x - low) / (high - low)) * bins)) };
}

const centres = ([low, high]: readonly [number, number], bins: number) =>
  Float64Array.from({ length: bins }, (_, i) => low + ((high - low) * (i + 0.5)) / bins);

function marginalOf(samples: Float64Array) {
  const bins = BINS.marginal;
  const { edges, of } = binned(samples, bins);
  const counts = new Float64Array(bins);
  for (const x of samples) counts[of(x)]++;
  return normalised(centres(edges, bins), counts);
}

/** Weights of a binomial filter over five neighbours: evens out the counts of a plane. */
const FILTER = [1 / 16, 4 / 16, 6 / 16, 4 / 16, 1 / 16] as const;

function planeOf(xs: Float64Array, ys: Float64Array): Plane {
  const n = BINS.plane;
  const [bx, by] = [binned(xs, n), binned(ys, n)];
  let cells = new Float64Array(n * n);
  xs.forEach((x, i) => {
    cells[bx.of(x) * n + by.of(ys[i])]++;
  });
  for (const stride of [n, 1])
    cells = cells.map((_, at) => {
      const index = stride === n ? Math.floor(at / n) : at % n;
      return FILTER.reduce((sum, w, k) => {
        const to = index + k - 2;
        return to < 0 || to >= n ? sum : sum + w * cells[at + (k - 2) * stride];
      }, 0);
    });
  return {
    x: centres(bx.edges, n),
    y: centres(by.edges, n),
    density: cells,
    levels: { sigma1: highestDensityLevel(cells, 0.6827), sigma2: highestDensityLevel(cells, 0.9545) },
  };
}

function drawsOf({ samples }: Ensemble): Posterior["draws"] {
  const total = samples[0].length;
  const count = Math.min(DRAWS, total);
  return Array.from({ length: count }, (_, i) => {
    const at = Math.floor((i * total) / count);
    return { point: samples.map((each) => each[at]), weight: 1 / count };
  });
}
