/** Inference: observed abundances -> posterior of the free parameters, fit and tension of every element, curves for charts. */
import { type ContourLine, contourLines } from "../numerics/contour.ts";
import { eta10PerOmegaB } from "../parameters/cosmology.ts";
import { likelihoodOf } from "./likelihood.ts";
import type { Observation, ObservedData } from "./observations.ts";
import { gridPosterior, type ParameterEstimate, type Posterior } from "./posterior.ts";
import { FREE_PARAMETERS, type FreeKey, type Prior } from "./priors.ts";
import { sampledPosterior } from "./sampled-posterior.ts";
import { buildTheory, type Theory, type TheoryAccuracy } from "./theory.ts";
import type { AskTheory, TheoryFrame } from "./theory-points.ts";

/** One observed abundance beside the prediction at the best point. */
export interface Comparison extends Observation {
  /** Whether it is part of the likelihood. */
  readonly fitted: boolean;
  readonly predicted: number;
  /** Theory error at the best point, one standard deviation. */
  readonly theorySigma: number;
  /** Spread of the prediction over the posterior. */
  readonly posteriorSigma: number;
  /**
   * (predicted - observed)/sigma: sigma of observation and theory, and for what is not fitted of the posterior's spread
   * too. 0 for a prediction below an upper limit.
   */
  readonly tension: number;
}

/** Likelihood of each element by itself against the baryon density, the other parameters at their best values. */
export interface ElementCurves {
  readonly eta10: readonly number[];
  /** Highest value 1. */
  readonly likelihood: Readonly<Record<string, readonly number[]>>;
}

/** Regions of highest posterior density of the first two parameters. */
export interface Contours {
  readonly x: FreeKey;
  readonly y: FreeKey;
  readonly level68: readonly ContourLine[];
  readonly level95: readonly ContourLine[];
}

export interface Inference {
  readonly parameters: Readonly<Record<string, ParameterEstimate>>;
  readonly chi2: number;
  /** Fitted abundances and Gaussian priors less free parameters. */
  readonly degreesOfFreedom: number;
  /** tension[abundance] = (predicted - observed)/sigma at the best point. */
  readonly tension: Readonly<Record<string, number>>;
  readonly comparisons: readonly Comparison[];
  readonly priors: readonly Prior[];
  /** Largest error of interpolated abundances and theory errors, measured. */
  readonly interpolation: TheoryAccuracy;
  readonly posterior: {
    readonly method: "grid" | "sampler";
    readonly evaluations: number;
    /** Error of the ends of the intervals [sigma]. */
    readonly error: number;
    readonly marginals: Readonly<
      Record<string, { readonly x: readonly number[]; readonly density: readonly number[] }>
    >;
    readonly contours?: Contours;
  };
  readonly elements?: ElementCurves;
  readonly warnings: readonly string[];
}

/** What is to be inferred from what. */
export interface InferenceTask {
  readonly observed: ObservedData;
  readonly priors: readonly Prior[];
  /** [K] */
  readonly tCmb: number;
  readonly seed: number;
}

/**
 * Runs an inference.
 * @param ask  answers questions about the theory; see {@link AskTheory}
 * @param tell told the share done
 * @throws {CalculationError} if the theory fails somewhere in the ranges, or a sampler does not converge
 */
export async function runInference(
  { observed, priors, tCmb, seed }: InferenceTask,
  ask: AskTheory,
  frame: TheoryFrame,
  tell?: (share: number) => void,
): Promise<Inference> {
  const all = [...observed.fitted, ...observed.compared];
  const wanted = all.map(({ abundance, value, sigma }) => ({ abundance, relativeSigma: sigma / value }));
  const theory = await buildTheory(ask, frame, priors, wanted, tell);
  const fitAt = likelihoodOf(theory, observed.fitted);
  const posterior = priors.length <= 2 ? gridPosterior(fitAt, priors) : sampledPosterior(fitAt, priors, seed);
  const comparisons = compare(theory, posterior, observed);
  const eta10 = eta10PerOmegaB(tCmb);
  const parameters: Record<string, ParameterEstimate> = {};
  posterior.keys.forEach((key, d) => {
    parameters[key] = posterior.estimates[d];
    if (key === "omegaB") parameters.eta10 = scaled(posterior.estimates[d], eta10);
  });
  const gaussians = priors.filter(({ gaussian }) => gaussian !== undefined).length;
  return {
    parameters,
    chi2: posterior.chi2,
    degreesOfFreedom: observed.fitted.length + gaussians - priors.length,
    tension: Object.fromEntries(comparisons.map(({ abundance, tension }) => [abundance, tension])),
    comparisons,
    priors,
    interpolation: theory.accuracy,
    posterior: {
      method: posterior.method,
      evaluations: posterior.evaluations,
      error: posterior.error,
      marginals: marginalsOf(posterior),
      ...(posterior.plane ? { contours: contoursOf(posterior) } : {}),
    },
    ...(posterior.keys[0] === "omegaB" ? { elements: elementCurves(theory, posterior, priors, all, eta10) } : {}),
    warnings: [...edgeWarnings(posterior, priors), ...peakWarnings(posterior), ...accuracyWarnings(theory.accuracy)],
  };
}

function scaled(estimate: ParameterEstimate, factor: number): ParameterEstimate {
  const entries = Object.entries(estimate).map(([name, value]) => [name, (value as number) * factor]);
  return Object.fromEntries(entries) as unknown as ParameterEstimate;
}

function compare(theory: Theory, posterior: Posterior, { fitted, compared }: ObservedData): Comparison[] {
  const M = theory.abundances.length;
  const values = new Float64Array(M);
  const covariance = new Float64Array(M * M);
  const sum = new Float64Array(M);
  const squares = new Float64Array(M);
  for (const { point, weight } of posterior.draws) {
    theory.predict(point, values, covariance);
    for (let m = 0; m < M; m++) {
      sum[m] += weight * values[m];
      squares[m] += weight * values[m] ** 2;
    }
  }
  theory.predict(posterior.best, values, covariance);
  return [...fitted, ...compared].map((observation) => {
    const m = theory.abundances.indexOf(observation.abundance);
    const isFitted = fitted.includes(observation);
    const predicted = values[m];
    const theorySigma = Math.sqrt(covariance[m * M + m]);
    const posteriorSigma = Math.sqrt(Math.max(0, squares[m] - sum[m] ** 2));
    const residual = predicted - observation.value;
    const whole = Math.hypot(observation.sigma, theorySigma, isFitted ? 0 : posteriorSigma);
    const counted = observation.kind === "upper-limit" ? Math.max(0, residual) : residual;
    return { ...observation, fitted: isFitted, predicted, theorySigma, posteriorSigma, tension: counted / whole };
  });
}

/** Points of a marginal that are kept in the results. */
const MARGINAL_POINTS = 201;

function marginalsOf({ keys, marginals }: Posterior): Inference["posterior"]["marginals"] {
  return Object.fromEntries(
    keys.map((key, d) => {
      const { x, density } = marginals[d];
      const every = Math.max(1, Math.floor((x.length - 1) / (MARGINAL_POINTS - 1)));
      const chosen = Array.from(x.keys()).filter((i) => i % every === 0);
      return [key, { x: chosen.map((i) => x[i]), density: chosen.map((i) => density[i]) }];
    }),
  );
}

function contoursOf({ keys, plane }: Posterior): Contours {
  const { x, y, density, levels } = plane as NonNullable<Posterior["plane"]>;
  return {
    x: keys[0],
    y: keys[1],
    level68: contourLines(x, y, density, levels.sigma1),
    level95: contourLines(x, y, density, levels.sigma2),
  };
}

/** Points of the curves of the elements, evenly in ln eta. */
const CURVE_POINTS = 801;

function elementCurves(
  theory: Theory,
  posterior: Posterior,
  [{ min, max }]: readonly Prior[],
  observations: readonly Observation[],
  eta10: number,
): ElementCurves {
  const point = Float64Array.from(posterior.best);
  const omegaB = Array.from({ length: CURVE_POINTS }, (_, i) =>
    Math.min(max, Math.max(min, min * (max / min) ** (i / (CURVE_POINTS - 1)))),
  );
  const likelihood = observations.map((observation) => {
    const fitAt = likelihoodOf(theory, [observation]);
    const ln = omegaB.map((x) => {
      point[0] = x;
      const { chi2, lnLikelihood } = fitAt(point);
      // Below an upper limit every density is as likely as any other, whatever its theory error.
      return observation.kind === "upper-limit" ? -chi2 / 2 : lnLikelihood;
    });
    const top = Math.max(...ln);
    return [observation.abundance, ln.map((value) => Math.exp(value - top))] as const;
  });
  return { eta10: omegaB.map((x) => x * eta10), likelihood: Object.fromEntries(likelihood) };
}

/** Density at an edge of the prior, relative to its peak, from which the edge cuts into the posterior: 3 sigma of a Gaussian. */
const EDGE = Math.exp(-4.5);

function edgeWarnings({ keys, marginals }: Posterior, priors: readonly Prior[]): string[] {
  return keys.flatMap((key, d) => {
    const { x, density } = marginals[d];
    const { min, max } = priors[d];
    const peak = density.reduce((a, b) => Math.max(a, b));
    const near = (max - min) * 0.01;
    const { unit } = FREE_PARAMETERS[key];
    return (
      [
        ["lower", min, density[0], Math.abs(x[0] - min) < near],
        ["upper", max, density[density.length - 1], Math.abs(x[x.length - 1] - max) < near],
      ] as const
    ).flatMap(([name, edge, height, reached]) =>
      reached && height > EDGE * peak
        ? [
            `the posterior of ${key} runs into the ${name} edge of its prior, ${key} = ${edge}${unit === "" ? "" : ` ${unit}`}: ` +
              `its intervals depend on that edge; give more data, or --prior ${key}=MIN:MAX`,
          ]
        : [],
    );
  });
}

/** A second peak counts when it is this high, relative to the first. */
const SECOND_PEAK = 0.01;

function peakWarnings({ keys, marginals, method }: Posterior): string[] {
  if (method === "sampler") return [];
  return keys.flatMap((key, d) => {
    const { density } = marginals[d];
    const least = SECOND_PEAK * density.reduce((a, b) => Math.max(a, b));
    let peaks = 0;
    for (let i = 1; i + 1 < density.length; i++)
      if (density[i] > least && density[i] > density[i - 1] && density[i] >= density[i + 1]) peaks++;
    return peaks > 1
      ? [`the posterior of ${key} has ${peaks} peaks: its central intervals bridge them; see the chart`]
      : [];
  });
}

function accuracyWarnings({ inSigma }: TheoryAccuracy): string[] {
  return inSigma > 0.1
    ? [`interpolation of the abundances errs by up to ${inSigma.toFixed(2)} of an observed error; narrow the ranges`]
    : [];
}
