/** Affine-invariant ensemble sampler for densities of a few variables, with its autocorrelation time. */
import { CalculationError } from "./check.ts";
import { seededUniform } from "./random.ts";

/** ln of a density up to a constant; -Infinity where it is zero. */
export type LnDensity = (x: Float64Array) => number;

export interface EnsembleOptions {
  readonly seed: number;
  /** Walkers, even, at least twice the number of variables. */
  readonly walkers?: number;
  /** Steps of every walker at most. */
  readonly maxSteps?: number;
  /** Steps are enough when they are this many autocorrelation times of every variable ... */
  readonly lengths?: number;
  /** ... or this many at `maxSteps`; the number of independent samples says how good they are. */
  readonly leastLengths?: number;
}

export interface Ensemble {
  /** samples[d]: values of variable d after burn-in, all walkers, in the order of the steps. */
  readonly samples: readonly Float64Array[];
  /** Sample of the highest density. */
  readonly best: Float64Array;
  readonly bestLnDensity: number;
  /** Integrated autocorrelation time of each variable [steps]. */
  readonly autocorrelation: readonly number[];
  /** Independent samples, walkers times steps over the longest autocorrelation time. */
  readonly independent: number;
  readonly acceptance: number;
  readonly evaluations: number;
}

/** Scale a of the stretch move. */
const STRETCH = 2;
/** Steps after which convergence is judged for the first time. */
const FIRST_JUDGED = 500;
/** Walkers from which the autocorrelation time is taken, evenly spread. */
const JUDGED_WALKERS = 16;

/**
 * Samples a density by stretch moves: walker k of one half moves to y = x_j + z (x_k - x_j), x_j of the other half,
 * z from g(z) ~ 1/sqrt(z) on [1/a, a], accepted with probability min(1, z^(n-1) p(y)/p(x)). Runs until it is `lengths`
 * autocorrelation times long (or `leastLengths` when the steps are used up); the first fifth is thrown away.
 * @param starts one starting point a walker; spread over the region, none of density zero
 * @throws {CalculationError} if `maxSteps` is not enough, or a start has density zero
 * @see Goodman & Weare 2010, Comm. App. Math. Comp. Sci. 5, 65
 */
export function sampleEnsemble(
  lnDensity: LnDensity,
  starts: readonly ArrayLike<number>[],
  { seed, walkers = 64, maxSteps = 16_000, lengths = 60, leastLengths = 20 }: EnsembleOptions,
): Ensemble {
  const n = starts[0].length;
  if (walkers % 2 !== 0 || walkers < 2 * n || starts.length !== walkers)
    throw new RangeError(`ensemble: ${walkers} walkers and ${starts.length} starts for ${n} variables`);
  const random = seededUniform(seed);
  const x = starts.map((start) => Float64Array.from(start));
  const ln = x.map(lnDensity);
  if (!ln.every(Number.isFinite)) throw new CalculationError("sampler", "a walker starts where the density is zero");
  const chain: Float64Array[][] = Array.from({ length: n }, () => []);
  const proposal = new Float64Array(n);
  const half = walkers / 2;
  let [accepted, evaluations, bestLnDensity] = [0, walkers, Number.NEGATIVE_INFINITY];
  let best = x[0].slice();
  // Convergence is judged at steps that grow in proportion, so that judging stays cheap beside sampling.
  let next = FIRST_JUDGED;
  for (let step = 1; step <= maxSteps; step++) {
    for (let k = 0; k < walkers; k++) {
      const other = x[(k < half ? half : 0) + Math.floor(random() * half)];
      const z = (1 + (STRETCH - 1) * random()) ** 2 / STRETCH;
      for (let d = 0; d < n; d++) proposal[d] = other[d] + z * (x[k][d] - other[d]);
      const found = lnDensity(proposal);
      evaluations++;
      if (Math.log(random()) < (n - 1) * Math.log(z) + found - ln[k]) {
        x[k].set(proposal);
        ln[k] = found;
        accepted++;
      }
      if (ln[k] > bestLnDensity) {
        bestLnDensity = ln[k];
        best = x[k].slice();
      }
    }
    for (let d = 0; d < n; d++) chain[d].push(Float64Array.from(x, (each) => each[d]));
    if (step < next) continue;
    next = Math.min(maxSteps, Math.ceil(step * 1.5));
    const burn = Math.floor(step / 5);
    const kept = chain.map((rows) => rows.slice(burn));
    const autocorrelation = kept.map(autocorrelationTime);
    const longest = Math.max(...autocorrelation);
    if (step < (step === maxSteps ? leastLengths : lengths) * longest) continue;
    return {
      samples: kept.map((rows) => Float64Array.from(rows.flatMap((row) => [...row]))),
      best,
      bestLnDensity,
      autocorrelation,
      independent: ((step - burn) * walkers) / longest,
      acceptance: accepted / (step * walkers),
      evaluations,
    };
  }
  throw new CalculationError(
    "sampler",
    `the sampler has not converged in ${maxSteps} steps: the posterior is too degenerate; fix a parameter or give a prior`,
  );
}

/**
 * Integrated autocorrelation time [steps] of the walkers' chains, their autocovariances averaged, summed up to the first
 * window M >= 5 tau.
 * @param rows one row a step, one entry a walker
 * @see Sokal 1997, in Functional Integration, sec. 3, for the window
 */
export function autocorrelationTime(rows: readonly ArrayLike<number>[]): number {
  const steps = rows.length;
  const every = Math.max(1, Math.floor(rows[0].length / JUDGED_WALKERS));
  const chains = Array.from({ length: Math.ceil(rows[0].length / every) }, (_, k) =>
    Float64Array.from(rows, (row) => row[k * every]),
  );
  const whole = steps * chains.length;
  const mean = chains.reduce((sum, chain) => sum + chain.reduce((part, value) => part + value, 0), 0) / whole;
  const covarianceAt = (lag: number) => {
    let sum = 0;
    for (const chain of chains)
      for (let t = 0; t + lag < steps; t++) sum += (chain[t] - mean) * (chain[t + lag] - mean);
    return sum / ((steps - lag) * chains.length);
  };
  const variance = covarianceAt(0);
  if (!(variance > 0)) return steps;
  let tau = 1;
  for (let lag = 1; lag < steps / 2; lag++) {
    tau += (2 * covarianceAt(lag)) / variance;
    if (lag >= 5 * tau) break;
  }
  return Math.max(1, tau);
}
