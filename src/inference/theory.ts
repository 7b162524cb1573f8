/** The theory behind an inference: abundances and their covariance between computed points, with the measured error. */
import type { AbundanceName } from "../nucleosynthesis/abundances.ts";
import { ChebyshevInterpolant, chebyshevPoints } from "../numerics/chebyshev.ts";
import { FREE_PARAMETERS, type FreeKey, type Prior } from "./priors.ts";
import { type AskTheory, type Coordinates, type TheoryFrame, TheoryPoints, toCoordinate } from "./theory-points.ts";

/** Abundance that is wanted, and the relative error beside which interpolation must not count. */
export interface Wanted {
  readonly abundance: AbundanceName;
  readonly relativeSigma: number;
}

/** Measured quality of the interpolation, at points halfway between those it was built on. */
export interface TheoryAccuracy {
  /** Points it was built on, and points at which it was tried. */
  readonly points: number;
  readonly checks: number;
  /** Largest error of each abundance, |delta ln X|. */
  readonly values: Readonly<Record<string, number>>;
  /** The same in units of the observed error. */
  readonly inSigma: number;
  /** Largest relative error of a theory sigma. */
  readonly sigma: number;
}

/** Abundances with their theory covariance anywhere within the ranges of the priors. */
export interface Theory {
  readonly keys: readonly FreeKey[];
  readonly abundances: readonly AbundanceName[];
  readonly accuracy: TheoryAccuracy;
  /**
   * @param point      one value for each key, inside its range
   * @param values     receives X of each abundance
   * @param covariance receives the theory covariance of X, row-major
   * @throws {RangeError} outside the range
   */
  predict(point: ArrayLike<number>, values: Float64Array, covariance: Float64Array): void;
}

/** Interpolation error that is allowed beside an observed error [sigma]. */
export const ALLOWED_SIGMA = 0.02;
/** Relative error that is allowed of a theory sigma. */
export const ALLOWED_THEORY = 0.05;
/** How often points are taken: where an error is larger than allowed they are doubled. */
const ROUNDS = 3;

/** Points for a range of another size than the default: as dense, never fewer than three fifths. */
function scaledCount(count: number, { key, min, max }: Prior): number {
  const { min: low, max: high } = FREE_PARAMETERS[key];
  const width = (a: number, b: number) => toCoordinate(key, b) - toCoordinate(key, a);
  return Math.max(2, Math.ceil(1 + (count - 1) * Math.max(0.6, width(min, max) / width(low, high))));
}

function product(axes: readonly ArrayLike<number>[]): number[][] {
  return axes.reduce<number[][]>((rows, axis) => rows.flatMap((row) => Array.from(axis, (x) => [...row, x])), [[]]);
}

/**
 * Builds the theory over the ranges of the priors: ln X and its responses to the sources of error on products of
 * Chebyshev points, denser for ln X, which is smooth to many digits. Both are tried between the points, which are
 * doubled until their errors do not count.
 * @param ask  answers questions; called few times, with many at once
 * @param tell told the share done
 * @throws {CalculationError} if the calculation fails somewhere
 */
export async function buildTheory(
  ask: AskTheory,
  frame: TheoryFrame,
  priors: readonly Prior[],
  wanted: readonly Wanted[],
  tell?: (share: number) => void,
): Promise<Theory> {
  const abundances = wanted.map(({ abundance }) => abundance);
  const points = new TheoryPoints(ask, frame, priors, abundances);
  const range = priors.map(({ key, min, max }) => [toCoordinate(key, min), toCoordinate(key, max)] as const);
  const axesOf = (counts: readonly number[]) => counts.map((n, d) => chebyshevPoints(n, ...range[d]));
  let counts = priors.map((prior) => scaledCount(FREE_PARAMETERS[prior.key].points, prior));
  let errorCounts = priors.map((prior) => scaledCount(FREE_PARAMETERS[prior.key].errorPoints, prior));
  for (let round = 1; ; round++) {
    const [axes, errorAxes] = [axesOf(counts), axesOf(errorCounts)];
    const [checks, errorChecks] = [checkPoints(axes), errorCheckPoints(errorAxes, axes)];
    await points.compute([...product(axes), ...checks], [...product(errorAxes), ...errorChecks]);
    tell?.(round / (round + 0.2));
    const values = new ChebyshevInterpolant(
      axes,
      wanted.length,
      Float64Array.from(product(axes).flatMap((x) => points.lnValues(x))),
    );
    const responses = interpolateResponses(points, errorAxes, wanted.length);
    const errors = valueErrors(points, values, checks, wanted.length);
    const inSigma = Math.max(...wanted.map(({ relativeSigma }, m) => errors[m] / relativeSigma));
    const sigma = sigmaError(points, responses, errorChecks, wanted.length);
    const fine = [inSigma <= ALLOWED_SIGMA, sigma <= ALLOWED_THEORY];
    if (round < ROUNDS && fine.includes(false)) {
      if (!fine[0]) counts = counts.map((n) => 2 * n - 1);
      if (!fine[1]) errorCounts = errorCounts.map((n) => 2 * n - 1);
      continue;
    }
    return {
      keys: priors.map(({ key }) => key),
      abundances,
      accuracy: {
        points: new Set([...product(axes), ...product(errorAxes)].map((x) => x.join(" "))).size,
        checks: checks.length + errorChecks.length,
        values: Object.fromEntries(abundances.map((abundance, m) => [abundance, errors[m]])),
        inSigma,
        sigma,
      },
      predict: predictor(priors, values, responses, wanted.length),
    };
  }
}

/** Responses to the sources that matter, between points. */
interface ResponseInterpolant {
  readonly sources: number;
  readonly interpolant: ChebyshevInterpolant;
}

/** Share of a variance below which a source, at every point and for every abundance, is left out of the interpolation. */
const LEAST_SHARE = 1e-4;

function interpolateResponses(points: TheoryPoints, axes: readonly Float64Array[], M: number): ResponseInterpolant {
  const all = product(axes).map((x) => points.responses(x));
  const whole = all.map((rows) => Array.from({ length: M }, (_, m) => rows.reduce((sum, row) => sum + row[m] ** 2, 0)));
  const kept = Array.from(all[0].keys()).filter((s) =>
    all.some((rows, i) => rows[s].some((x, m) => x * x > LEAST_SHARE * whole[i][m])),
  );
  const values = all.flatMap((rows) => kept.flatMap((s) => rows[s]));
  return {
    sources: kept.length,
    interpolant: new ChebyshevInterpolant(axes, kept.length * M, Float64Array.from(values)),
  };
}

/** Number of points at which ln X and the theory errors are tried out. */
const CHECKS = 6;
const ERROR_CHECKS = 4;

/** Coordinate halfway (in angle) between two Chebyshev points, where the error is largest. @param share 0 to 1 along the axis */
function halfway(axis: Float64Array, share: number): number {
  const n = axis.length;
  const k = Math.min(n - 2, Math.floor(share * (n - 1)));
  const [a, b] = [axis[0], axis[n - 1]];
  return (a + b) / 2 - ((b - a) / 2) * Math.cos((Math.PI * (k + 0.5)) / (n - 1));
}

/** Shares of an axis but the first at which the theory is tried: two only, since each costs a thermal history. */
const OTHER_SHARES = [0.55, 0.99] as const;
const otherShare = (i: number, d: number) => OTHER_SHARES[(i + d) % 2];

/** Points at which ln X is tried: halfway between its points on every axis. */
function checkPoints(axes: readonly Float64Array[]): Coordinates[] {
  return Array.from({ length: CHECKS }, (_, i) =>
    axes.map((axis, d) => halfway(axis, d === 0 ? i / (CHECKS - 1) : otherShare(i, d))),
  );
}

/** Points at which the theory errors are tried: on the other axes at points of ln X, whose histories are known. */
function errorCheckPoints(errorAxes: readonly Float64Array[], axes: readonly Float64Array[]): Coordinates[] {
  return Array.from({ length: ERROR_CHECKS }, (_, i) =>
    axes.map((axis, d) => {
      if (d === 0) return halfway(errorAxes[0], i / (ERROR_CHECKS - 1));
      return axis[Math.min(axis.length - 2, Math.floor(otherShare(i, d) * (axis.length - 1)))];
    }),
  );
}

/** Largest error of ln X of each abundance. */
function valueErrors(points: TheoryPoints, values: ChebyshevInterpolant, checks: readonly Coordinates[], M: number) {
  const found = new Float64Array(M);
  const worst = new Float64Array(M);
  for (const x of checks) {
    values.evaluate(x, found);
    const exact = points.lnValues(x);
    for (let m = 0; m < M; m++) worst[m] = Math.max(worst[m], Math.abs(found[m] - exact[m]));
  }
  return worst;
}

/** Largest relative error of a theory sigma, against all sources, left out or not. */
function sigmaError(
  points: TheoryPoints,
  { sources, interpolant }: ResponseInterpolant,
  checks: readonly Coordinates[],
  M: number,
): number {
  const found = new Float64Array(sources * M);
  let worst = 0;
  for (const x of checks) {
    interpolant.evaluate(x, found);
    const exact = points.responses(x);
    for (let m = 0; m < M; m++) {
      const truth = Math.hypot(...exact.map((row) => row[m]));
      let sum = 0;
      for (let s = 0; s < sources; s++) sum += found[s * M + m] ** 2;
      if (truth > 0) worst = Math.max(worst, Math.abs(Math.sqrt(sum) / truth - 1));
    }
  }
  return worst;
}

function predictor(
  priors: readonly Prior[],
  lnValues: ChebyshevInterpolant,
  { sources, interpolant }: ResponseInterpolant,
  M: number,
): Theory["predict"] {
  const x = new Float64Array(priors.length);
  const rows = new Float64Array(sources * M);
  return (point, values, covariance) => {
    for (let d = 0; d < priors.length; d++) x[d] = toCoordinate(priors[d].key, point[d]);
    lnValues.evaluate(x, values);
    interpolant.evaluate(x, rows);
    for (let m = 0; m < M; m++) values[m] = Math.exp(values[m]);
    for (let i = 0; i < M; i++)
      for (let j = 0; j <= i; j++) {
        let sum = 0;
        for (let s = 0; s < sources; s++) sum += rows[s * M + i] * rows[s * M + j];
        covariance[i * M + j] = covariance[j * M + i] = sum * values[i] * values[j];
      }
  };
}
