/** The posterior of the free parameters: integrated on a grid in one and two dimensions, sampled in more. */
import {
  type Density,
  densityMoments,
  densityQuantile,
  highestDensityLevel,
  normalised,
  trapezoid,
} from "../numerics/density.ts";
import type { Fit } from "./likelihood.ts";
import { type FreeKey, lnPrior, type Prior } from "./priors.ts";

/** Central intervals: 16 % to 84 % and 2.5 % to 97.5 % of the marginal posterior. `best`: the point of highest posterior. */
export interface ParameterEstimate {
  readonly best: number;
  readonly mean: number;
  readonly sigma: number;
  readonly lower68: number;
  readonly upper68: number;
  readonly lower95: number;
  readonly upper95: number;
}

/** A posterior of two parameters on a grid, y running fastest. */
export interface Plane {
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly density: Float64Array;
  /** Densities above which 68.27 and 95.45 % of the posterior lie. */
  readonly levels: { readonly sigma1: number; readonly sigma2: number };
}

export interface Posterior {
  readonly keys: readonly FreeKey[];
  readonly best: readonly number[];
  /** chi^2 at the best point, Gaussian priors included. */
  readonly chi2: number;
  readonly estimates: readonly ParameterEstimate[];
  readonly marginals: readonly Density[];
  /** Of the first two parameters, if there are two. */
  readonly plane?: Plane;
  /** Points that stand for the posterior, with weights that add to 1. */
  readonly draws: readonly { readonly point: readonly number[]; readonly weight: number }[];
  readonly method: "grid" | "sampler";
  /** Evaluations of the likelihood. */
  readonly evaluations: number;
  /** Largest shift of an interval's end when every second point is left out, or its sampling error [sigma]. */
  readonly error: number;
}

export type FitAt = (point: ArrayLike<number>) => Fit;

/** ln posterior up to a constant, and chi^2 with the Gaussian priors; counts its calls. */
export function posteriorFunction(fitAt: FitAt, priors: readonly Prior[]) {
  let evaluations = 0;
  const at = (point: ArrayLike<number>) => {
    evaluations++;
    const prior = lnPrior(priors, point);
    const { chi2, lnLikelihood } = fitAt(point);
    return { ln: lnLikelihood + prior, chi2: chi2 - 2 * prior };
  };
  return { at, count: () => evaluations };
}

/** Points of a grid over a range, its ends to the last bit. */
function evenPoints(min: number, max: number, n: number): Float64Array {
  const x = Float64Array.from({ length: n }, (_, i) => min + ((max - min) * i) / (n - 1));
  x[n - 1] = max;
  return x;
}

/** Drop of ln posterior below its maximum beyond which nothing is left: 8 sigma of a Gaussian. */
const DEEP = 32;
/** Points along each axis: to find the region, and to integrate over it. Odd, so that every second makes a grid too. */
export interface GridPoints {
  readonly search: number;
  readonly fine: number;
}
const POINTS: Readonly<Record<1 | 2, GridPoints>> = { 1: { search: 801, fine: 2001 }, 2: { search: 121, fine: 261 } };
/** How often the search may close in on a region smaller than its grid resolves. */
const ZOOMS = 4;
/** A region is resolved when it is this many points wide. */
const RESOLVED = 24;

interface Grid {
  readonly axes: readonly Float64Array[];
  readonly ln: Float64Array;
  readonly top: number;
}

function gridOf(axes: readonly Float64Array[], ln: (point: ArrayLike<number>) => number): Grid {
  const [x, y = Float64Array.of(0)] = axes;
  const values = new Float64Array(x.length * y.length);
  const point = new Float64Array(axes.length);
  let top = 0;
  for (let i = 0; i < x.length; i++) {
    point[0] = x[i];
    for (let j = 0; j < y.length; j++) {
      if (axes.length > 1) point[1] = y[j];
      const at = i * y.length + j;
      values[at] = ln(point);
      if (values[at] > values[top]) top = at;
    }
  }
  return { axes, ln: values, top };
}

/** First and last index along each axis where the grid is within DEEP of its maximum, one more on either side. */
function regionOf({ axes, ln, top }: Grid): [number, number][] {
  const ny = axes[1]?.length ?? 1;
  const region = axes.map((axis): [number, number] => [axis.length - 1, 0]);
  ln.forEach((value, at) => {
    if (value < ln[top] - DEEP) return;
    for (const [d, i] of [Math.floor(at / ny), at % ny].slice(0, axes.length).entries()) {
      region[d][0] = Math.min(region[d][0], i);
      region[d][1] = Math.max(region[d][1], i);
    }
  });
  return region.map(([a, b], d) => [Math.max(0, a - 1), Math.min(axes[d].length - 1, b + 1)]);
}

function density({ axes, ln, top }: Grid, every: number): { axes: Float64Array[]; values: Float64Array } {
  const thin = axes.map((axis) => axis.filter((_, i) => i % every === 0));
  const ny = axes[1]?.length ?? 1;
  const values = ln
    .map((value) => Math.exp(value - ln[top]))
    .filter((_, at) => {
      return Math.floor(at / ny) % every === 0 && (at % ny) % every === 0;
    });
  return { axes: thin, values };
}

function marginalsOf({ axes, values }: { axes: Float64Array[]; values: Float64Array }): Density[] {
  const [x, y] = axes;
  if (y === undefined) return [normalised(x, values)];
  const alongX = Float64Array.from(x, (_, i) => trapezoid(y, values.subarray(i * y.length, (i + 1) * y.length)));
  const alongY = Float64Array.from(y, (_, j) =>
    trapezoid(
      x,
      Float64Array.from(x, (__, i) => values[i * y.length + j]),
    ),
  );
  return [normalised(x, alongX), normalised(y, alongY)];
}

/** Ends of the reported intervals. */
export const INTERVALS = { lower95: 0.025, lower68: 0.16, upper68: 0.84, upper95: 0.975 } as const;

function estimate(best: number, marginal: Density): ParameterEstimate {
  const q = INTERVALS;
  return {
    best,
    ...densityMoments(marginal),
    lower68: densityQuantile(marginal, q.lower68),
    upper68: densityQuantile(marginal, q.upper68),
    lower95: densityQuantile(marginal, q.lower95),
    upper95: densityQuantile(marginal, q.upper95),
  };
}

/** Largest difference of the ends of two estimates of one parameter [sigma]. */
function shift(a: ParameterEstimate, b: ParameterEstimate): number {
  const ends = ["lower95", "lower68", "upper68", "upper95"] as const;
  return Math.max(...ends.map((end) => Math.abs(a[end] - b[end]))) / a.sigma;
}

/** Rise of ln posterior below which a step is none, and most rounds of steps: a curved ridge is not followed for ever. */
const LEAST_RISE = 1e-9;
const MOST_ROUNDS = 300;

/**
 * Highest point near a start, by steps along all diagonals that halve when none leads up. Where the posterior is a long
 * ridge, a point on it.
 * @param steps first step along each axis
 */
export function climb(
  ln: (point: ArrayLike<number>) => number,
  start: ArrayLike<number>,
  steps: readonly number[],
  priors: readonly Pick<Prior, "min" | "max">[],
): Float64Array {
  const here = Float64Array.from(start);
  let height = ln(here);
  const directions = steps.reduce<number[][]>(
    (rows) => rows.flatMap((row) => [-1, 0, 1].map((s) => [...row, s])),
    [[]],
  );
  for (let scale = 1, round = 0; scale > 1e-4 && round < MOST_ROUNDS; round++) {
    let moved = false;
    for (const direction of directions) {
      const next = here.map((x, d) =>
        Math.min(priors[d].max, Math.max(priors[d].min, x + scale * steps[d] * direction[d])),
      );
      const found = ln(next);
      if (!(found > height + LEAST_RISE)) continue;
      here.set(next);
      height = found;
      moved = true;
    }
    if (!moved) scale /= 2;
  }
  return here;
}

/**
 * Posterior of one or two parameters by integration on a grid. The grid closes in on the region within 8 sigma of the
 * maximum, so that what it leaves out is below 1e-14; its error is measured by leaving out every second point.
 * @param points fewer than by default where many posteriors are wanted
 */
export function gridPosterior(
  fitAt: FitAt,
  priors: readonly Prior[],
  points: GridPoints = POINTS[priors.length as 1 | 2],
): Posterior {
  const D = priors.length;
  const { at, count } = posteriorFunction(fitAt, priors);
  const ln = (point: ArrayLike<number>) => at(point).ln;
  let range = priors.map(({ min, max }): [number, number] => [min, max]);
  for (let zoom = 0; zoom < ZOOMS; zoom++) {
    const grid = gridOf(
      range.map(([a, b]) => evenPoints(a, b, points.search)),
      ln,
    );
    const region = regionOf(grid);
    range = region.map(([a, b], d) => [grid.axes[d][a], grid.axes[d][b]]);
    if (region.every(([a, b]) => b - a >= RESOLVED)) break;
  }
  const grid = gridOf(
    range.map(([a, b]) => evenPoints(a, b, points.fine)),
    ln,
  );
  const whole = density(grid, 1);
  const marginals = marginalsOf(whole);
  const ny = grid.axes[1]?.length ?? 1;
  const top = [Math.floor(grid.top / ny), grid.top % ny].slice(0, D).map((i, d) => grid.axes[d][i]);
  const best = climb(
    ln,
    top,
    grid.axes.map((axis) => axis[1] - axis[0]),
    priors,
  );
  const estimates = marginals.map((marginal, d) => estimate(best[d], marginal));
  const thinned = marginalsOf(density(grid, 2)).map((marginal, d) => estimate(best[d], marginal));
  return {
    keys: priors.map(({ key }) => key),
    best: [...best],
    chi2: at(best).chi2,
    estimates,
    marginals,
    ...(D === 2 ? { plane: planeOf(whole) } : {}),
    draws: drawsOf(grid),
    method: "grid",
    evaluations: count(),
    error: Math.max(...estimates.map((each, d) => shift(each, thinned[d]))),
  };
}

function planeOf({ axes: [x, y], values }: { axes: Float64Array[]; values: Float64Array }): Plane {
  return {
    x,
    y,
    density: values,
    levels: { sigma1: highestDensityLevel(values, 0.6827), sigma2: highestDensityLevel(values, 0.9545) },
  };
}

/** A coarser grid as weighted points. */
function drawsOf(grid: Grid): Posterior["draws"] {
  const { axes, values } = density(grid, grid.axes.length === 1 ? 10 : 5);
  const sum = values.reduce((a, b) => a + b, 0);
  const ny = axes[1]?.length ?? 1;
  return Array.from(values, (value, at) => ({
    point: axes.length === 1 ? [axes[0][at]] : [axes[0][Math.floor(at / ny)], axes[1][at % ny]],
    weight: value / sum,
  })).filter(({ weight }) => weight > 1e-9);
}
