/** Monte Carlo over standardised sources: sample i depends on the plan and i alone, so threads and blocks cannot change it. */
import { seededUniform } from "../numerics/random.ts";
import { mixBits, SOBOL_DIMENSIONS, scrambledSobol } from "../numerics/sobol.ts";
import { covariance, mean, normalQuantile, sortedQuantile } from "../numerics/statistics.ts";

/** What samples are drawn by. */
export interface SamplePlan {
  readonly seed: number;
  /** Number of sources. */
  readonly sources: number;
  /** The sources that carry most of the variance, by number: they are spread evenly (Sobol points), the others at random. */
  readonly leading: readonly number[];
}

/**
 * Independent repetitions among which samples are dealt out in turn. Each is a set of Sobol points with its own scrambling,
 * so that the scatter between them is the error of what all of them give together.
 */
export const REPETITIONS = 8;

/**
 * A plan whose leading sources are those with the largest share in any variance.
 * @param response response[s][x] = d ln x/dp_s
 */
export function planSamples(seed: number, response: readonly ArrayLike<number>[]): SamplePlan {
  const quantities = response[0]?.length ?? 0;
  const whole = Array.from({ length: quantities }, (_, x) => response.reduce((sum, row) => sum + row[x] ** 2, 0));
  const share = response.map((row) => Math.max(...Array.from(row, (r, x) => (whole[x] > 0 ? (r * r) / whole[x] : 0))));
  const leading = response
    .map((_, s) => s)
    .sort((a, b) => share[b] - share[a] || a - b)
    .slice(0, SOBOL_DIMENSIONS);
  return { seed, sources: response.length, leading };
}

/** One 32-bit number from several whole ones. */
function mixed(...parts: readonly number[]): number {
  let h = 0;
  for (const part of parts) {
    h = mixBits(h ^ mixBits(part >>> 0));
    h = mixBits(h + mixBits(Math.floor(part / 4294967296) + 0x9e3779b9));
  }
  return h;
}

/**
 * Standard normal variables of sample `index`, one a source: normal quantiles of scrambled Sobol points for the leading
 * sources, Box & Muller (1958) on a generator of this sample's own for the others.
 * @see Owen 1997, SIAM J. Numer. Anal. 34, 1884, for the error of scrambled points
 */
export function standardNormals({ seed, sources, leading }: SamplePlan, index: number): Float64Array {
  const out = new Float64Array(sources);
  const repetition = index % REPETITIONS;
  const point = Math.floor(index / REPETITIONS);
  if (leading.length < sources) {
    const random = seededUniform(mixed(seed, index, 1) * 4194304 + (mixed(seed, index, 2) >>> 10));
    for (let s = 0; s < sources; s += 2) {
      const r = Math.sqrt(-2 * Math.log(random()));
      const phi = 2 * Math.PI * random();
      out[s] = r * Math.cos(phi);
      if (s + 1 < sources) out[s + 1] = r * Math.sin(phi);
    }
  }
  leading.forEach((s, d) => {
    out[s] = normalQuantile(scrambledSobol(point, d, mixed(seed, repetition, d)));
  });
  return out;
}

/** The quantiles that results report. */
export const QUANTILES = ["0.025", "0.16", "0.5", "0.84", "0.975"] as const;

export interface SampleSummary {
  readonly mean: number[];
  readonly sigma: number[];
  /** Standard error of each sigma. */
  readonly sigmaError: number[];
  readonly correlation: number[][];
  /** quantiles[x][name of QUANTILES] */
  readonly quantiles: Record<string, number>[];
}

/** Samples a repetition needs before its scatter is used. */
const ENOUGH = 4;

/**
 * Mean, standard deviation with its own error, correlation and quantiles of samples.
 * The error of sigma is the scatter of the repetitions, sd/sqrt(8), known to a quarter of itself; with fewer than 32
 * samples that of independent normal ones, sigma/sqrt(2 (n - 1)).
 * @param samples samples[x] = values of quantity x in the order of the samples, two or more each
 */
export function summariseSamples(samples: readonly Float64Array[]): SampleSummary {
  const deviation = (x: ArrayLike<number>) => Math.sqrt(covariance(x, x));
  const sigma = samples.map(deviation);
  const n = samples[0]?.length ?? 0;
  const sigmaError = samples.map((x, i) => {
    if (n < REPETITIONS * ENOUGH) return sigma[i] / Math.sqrt(2 * (n - 1));
    const each = Array.from({ length: REPETITIONS }, (_, r) => deviation(x.filter((__, k) => k % REPETITIONS === r)));
    return deviation(each) / Math.sqrt(REPETITIONS);
  });
  return {
    mean: samples.map(mean),
    sigma,
    sigmaError,
    correlation: samples.map((x, i) =>
      samples.map((y, j) => {
        if (i === j) return 1;
        const norm = sigma[i] * sigma[j];
        return norm > 0 ? covariance(x, y) / norm : 0;
      }),
    ),
    quantiles: samples.map((x) => {
      const sorted = x.slice().sort();
      return Object.fromEntries(QUANTILES.map((q) => [q, sortedQuantile(sorted, Number(q))]));
    }),
  };
}
