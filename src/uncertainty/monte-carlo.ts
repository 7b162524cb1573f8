/** Monte Carlo over standardised sources: sample i depends on the seed and i alone, so workers cannot change it. */
import { seededUniform } from "../numerics/random.ts";
import { covariance, mean, sortedQuantile } from "../numerics/statistics.ts";

/**
 * Standard normal variables of sample `index`: Box & Muller (1958) on a generator seeded by (seed, index).
 * @param count how many sources
 */
export function standardNormals(seed: number, index: number, count: number): Float64Array {
  const random = seededUniform(seed * 0x100000 + index * 0x1f3 + (seed ^ index));
  const out = new Float64Array(count);
  for (let i = 0; i < count; i += 2) {
    const r = Math.sqrt(-2 * Math.log(random()));
    const phi = 2 * Math.PI * random();
    out[i] = r * Math.cos(phi);
    if (i + 1 < count) out[i + 1] = r * Math.sin(phi);
  }
  return out;
}

/** The quantiles that results report. */
export const QUANTILES = ["0.025", "0.16", "0.5", "0.84", "0.975"] as const;

export interface SampleSummary {
  readonly mean: number[];
  readonly sigma: number[];
  /** Standard error of each sigma, sigma/sqrt(2 (n - 1)) for a normal sample. */
  readonly sigmaError: number[];
  readonly correlation: number[][];
  /** quantiles[x][name of QUANTILES] */
  readonly quantiles: Record<string, number>[];
}

/**
 * Mean, standard deviation with its own error, correlation and quantiles of samples.
 * @param samples samples[x] = values of quantity x, two or more each
 */
export function summariseSamples(samples: readonly Float64Array[]): SampleSummary {
  const sigma = samples.map((x) => Math.sqrt(covariance(x, x)));
  const n = samples[0]?.length ?? 0;
  return {
    mean: samples.map(mean),
    sigma,
    sigmaError: sigma.map((s) => s / Math.sqrt(2 * (n - 1))),
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
