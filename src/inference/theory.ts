/** The theory behind an inference: abundances and their error responses on Chebyshev points, with the measured error between. */
import type { AbundanceName } from "../nucleosynthesis/abundances.ts";
import { ChebyshevInterpolant, chebyshevPoints } from "../numerics/chebyshev.ts";
import { CalculationError } from "../numerics/check.ts";
import type { Keys } from "../parameters/cosmology.ts";
import { FREE_PARAMETERS, type FreeKey, type Prior } from "./priors.ts";

/** What is asked of the calculation at one point of parameter space. */
export interface TheoryQuestion {
  readonly overrides: Keys;
  /** How the point is named if it fails. */
  readonly where: string;
  readonly values: boolean;
  /** Numbers of the sources of error whose responses d ln X/dp are wanted. */
  readonly sources?: readonly number[];
  readonly differences?: "central" | "forward";
}

export interface TheoryAnswer {
  readonly values?: readonly number[];
  /** responses[s][x] of the s-th source asked for. */
  readonly responses?: readonly (readonly number[])[];
}

/** Answers questions in their order; in one thread or many. */
export type AskTheory = (questions: readonly TheoryQuestion[]) => Promise<readonly TheoryAnswer[]>;

/** What does not change from point to point. */
export interface TheoryFrame {
  /** Names of the values of an answer. */
  readonly names: readonly AbundanceName[];
  /** Sources of error that count, by number: those of parameters that are free are left out. */
  readonly sources: readonly number[];
}

/** Abundance that is wanted, and the relative error beside which interpolation must not count. */
export interface Wanted {
  readonly abundance: AbundanceName;
  readonly relativeSigma: number;
}

/** Measured quality of the interpolation, at points halfway between those it was built on. */
export interface TheoryAccuracy {
  readonly points: number;
  readonly checks: number;
  /** Largest error of each abundance, |delta ln X|. */
  readonly values: Readonly<Record<string, number>>;
  /** The same in units of the observed error. */
  readonly inSigma: number;
  /** Largest relative error of a theory sigma. */
  readonly sigma: number;
  /** Largest share of a variance in the sources that were left out as negligible. */
  readonly neglectedShare: number;
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

/** Interpolation error that is allowed beside an observed error [sigma]; more points are taken until it holds. */
export const ALLOWED_SIGMA = 0.02;
/** Sources whose share of every variance is below this are left out. */
const LEAST_SHARE = 3e-4;
/** How often the number of points may be doubled. */
const ROUNDS = 3;

const toCoordinate = (key: FreeKey, value: number) =>
  FREE_PARAMETERS[key].coordinate === "ln" ? Math.log(value) : value;
const fromCoordinate = (key: FreeKey, x: number) => (FREE_PARAMETERS[key].coordinate === "ln" ? Math.exp(x) : x);

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
 * Builds the theory over the ranges of the priors.
 * @param ask   answers questions; called a few times with many at once
 * @param tell  told the share done
 * @throws {CalculationError} if an abundance is not positive somewhere, so that it has no logarithm
 */
export async function buildTheory(
  ask: AskTheory,
  frame: TheoryFrame,
  priors: readonly Prior[],
  wanted: readonly Wanted[],
  tell?: (share: number) => void,
): Promise<Theory> {
  const keys = priors.map(({ key }) => key);
  const columns = wanted.map(({ abundance }) => frame.names.indexOf(abundance));
  const M = wanted.length;
  const range = priors.map(({ key, min, max }) => [toCoordinate(key, min), toCoordinate(key, max)] as const);
  const axesOf = (counts: readonly number[]) => counts.map((n, d) => chebyshevPoints(n, ...range[d]));

  const question = (x: readonly number[]): Omit<TheoryQuestion, "values"> => {
    const parameters = x.map((value, d) => fromCoordinate(keys[d], value));
    return {
      overrides: Object.fromEntries(keys.map((key, d) => [key, parameters[d]])),
      where: keys.map((key, d) => `${key} = ${parameters[d].toPrecision(6)}`).join(", "),
    };
  };
  const lnOf = (answer: TheoryAnswer, where: string) =>
    columns.map((column, m) => {
      const x = answer.values?.[column] ?? Number.NaN;
      if (!(x > 0))
        throw new CalculationError(
          "abundance",
          `${wanted[m].abundance} = ${x} at ${where}: has no logarithm to compare`,
        );
      return Math.log(x);
    });

  const known = new Map<string, readonly number[]>();
  async function lnValues(points: readonly (readonly number[])[]): Promise<(readonly number[])[]> {
    const missing = points.filter((x) => !known.has(x.join(" ")));
    const asked = missing.map((x) => ({ ...question(x), values: true }));
    for (const [i, answer] of (await ask(asked)).entries())
      known.set(missing[i].join(" "), lnOf(answer, asked[i].where));
    return points.map((x) => known.get(x.join(" ")) as readonly number[]);
  }

  // Sources of error that matter anywhere: one-sided responses along the first axis, the others at their middle.
  const errorCounts = priors.map((prior) => scaledCount(FREE_PARAMETERS[prior.key].errorPoints, prior));
  const middle = range.map(([a, b]) => (a + b) / 2);
  const along = chebyshevPoints(3, ...range[0]);
  const survey = await ask(
    Array.from(along, (x) => ({
      ...question([x, ...middle.slice(1)]),
      values: false,
      sources: frame.sources,
      differences: "forward" as const,
    })),
  );
  tell?.(0.2);
  const shares = survey.flatMap(({ responses = [] }) =>
    columns.map((column) => {
      const squares = responses.map((row) => row[column] ** 2);
      const whole = squares.reduce((sum, x) => sum + x, 0);
      return squares.map((x) => (whole > 0 ? x / whole : 0));
    }),
  );
  const kept = frame.sources.flatMap((source, s) =>
    shares.some((row) => row[s] > LEAST_SHARE) ? [{ source, s }] : [],
  );
  const keptNumbers = new Set(kept.map(({ s }) => s));
  const neglectedShare = Math.max(
    0,
    ...shares.map((row) => row.reduce((sum, share, s) => (keptNumbers.has(s) ? sum : sum + share), 0)),
  );
  const sources = kept.map(({ source }) => source);
  const S = sources.length;
  const responsesAt = async (points: readonly (readonly number[])[]): Promise<number[][]> =>
    (await ask(points.map((x) => ({ ...question(x), values: false, sources })))).map(({ responses = [] }) =>
      responses.flatMap((row) => columns.map((column) => row[column])),
    );
  const errorAxes = axesOf(errorCounts);
  const responses = new ChebyshevInterpolant(
    errorAxes,
    S * M,
    Float64Array.from((await responsesAt(product(errorAxes))).flat()),
  );
  tell?.(0.6);

  // Abundances: points doubled until the error between them does not count beside the observed errors.
  let counts = priors.map((prior) => scaledCount(FREE_PARAMETERS[prior.key].points, prior));
  for (let round = 1; ; round++) {
    const axes = axesOf(counts);
    const values = new ChebyshevInterpolant(axes, M, Float64Array.from((await lnValues(product(axes))).flat()));
    const checks = checkPoints(axes);
    const exact = await lnValues(checks);
    const found = new Float64Array(M);
    const worst = new Float64Array(M);
    checks.forEach((x, i) => {
      values.evaluate(x, found);
      for (let m = 0; m < M; m++) worst[m] = Math.max(worst[m], Math.abs(found[m] - exact[i][m]));
    });
    const inSigma = Math.max(...wanted.map(({ relativeSigma }, m) => worst[m] / relativeSigma));
    if (inSigma > ALLOWED_SIGMA && round < ROUNDS) {
      counts = counts.map((n) => 2 * n - 1);
      continue;
    }
    tell?.(0.9);
    const errorChecks = checkPoints(errorAxes).slice(0, 2);
    const sigma = sigmaError(responses, errorChecks, await responsesAt(errorChecks), S, M);
    const predict = predictor(keys, values, responses, S, M);
    return {
      keys,
      abundances: wanted.map(({ abundance }) => abundance),
      accuracy: {
        points: known.size - checks.length,
        checks: checks.length,
        values: Object.fromEntries(wanted.map(({ abundance }, m) => [abundance, worst[m]])),
        inSigma,
        sigma,
        neglectedShare,
      },
      predict,
    };
  }
}

/** Number of points at which the interpolation is tried out. */
const CHECKS = 6;

/**
 * Points halfway (in angle) between Chebyshev points, where the error is largest: along the first axis near both ends and
 * in between, along the others at two places only, since each of them costs a thermal history.
 */
function checkPoints(axes: readonly Float64Array[]): number[][] {
  const between = (axis: Float64Array, share: number) => {
    const n = axis.length;
    const k = Math.min(n - 2, Math.floor(share * (n - 1)));
    const [a, b] = [axis[0], axis[n - 1]];
    return (a + b) / 2 - ((b - a) / 2) * Math.cos((Math.PI * (k + 0.5)) / (n - 1));
  };
  return Array.from({ length: CHECKS }, (_, i) =>
    axes.map((axis, d) => (d === 0 ? between(axis, i / (CHECKS - 1)) : between(axis, i % 2 === d % 2 ? 0.55 : 0.99))),
  );
}

/** Largest relative error of an interpolated standard deviation. */
function sigmaError(
  interpolant: ChebyshevInterpolant,
  points: readonly (readonly number[])[],
  exact: readonly (readonly number[])[],
  S: number,
  M: number,
): number {
  const found = new Float64Array(S * M);
  const sigma = (rows: ArrayLike<number>, m: number) => {
    let sum = 0;
    for (let s = 0; s < S; s++) sum += rows[s * M + m] ** 2;
    return Math.sqrt(sum);
  };
  let worst = 0;
  points.forEach((x, i) => {
    interpolant.evaluate(x, found);
    for (let m = 0; m < M; m++) {
      const truth = sigma(exact[i], m);
      if (truth > 0) worst = Math.max(worst, Math.abs(sigma(found, m) / truth - 1));
    }
  });
  return worst;
}

function predictor(
  keys: readonly FreeKey[],
  lnValues: ChebyshevInterpolant,
  responses: ChebyshevInterpolant,
  S: number,
  M: number,
): Theory["predict"] {
  const x = new Float64Array(keys.length);
  const rows = new Float64Array(S * M);
  return (point, values, covariance) => {
    for (let d = 0; d < keys.length; d++) x[d] = toCoordinate(keys[d], point[d]);
    lnValues.evaluate(x, values);
    responses.evaluate(x, rows);
    for (let m = 0; m < M; m++) values[m] = Math.exp(values[m]);
    for (let i = 0; i < M; i++)
      for (let j = 0; j <= i; j++) {
        let sum = 0;
        for (let s = 0; s < S; s++) sum += rows[s * M + i] * rows[s * M + j];
        covariance[i * M + j] = covariance[j * M + i] = sum * values[i] * values[j];
      }
  };
}
