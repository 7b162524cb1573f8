/** Sampled theory errors of the abundances: blocks of samples that any thread computes, and what they add up to. */
import { addCounts } from "../nucleosynthesis/run.ts";
import { InputError } from "../numerics/check.ts";
import type { SolverCounts } from "../numerics/ode-stiff.ts";
import { type SamplePlan, standardNormals, summariseSamples } from "../uncertainty/monte-carlo.ts";

/** Abundances of consecutive samples, and what they cost. */
export interface SampleBlock {
  /** values[i][x] of sample i of the block. */
  readonly values: readonly (readonly number[])[];
  readonly counts: SolverCounts;
}

/** How well sampling knows its result. */
export interface SamplingReport {
  readonly samples: number;
  readonly mean: Readonly<Record<string, number>>;
  /** Standard error of each sigma. */
  readonly sigmaError: Readonly<Record<string, number>>;
}

/** Errors of the abundances from samples. */
export interface SampledErrors {
  readonly sigma: readonly number[];
  readonly correlation: { readonly order: readonly string[]; readonly matrix: readonly (readonly number[])[] };
  readonly quantiles: Readonly<Record<string, Readonly<Record<string, number>>>>;
  readonly sampling: SamplingReport;
}

/** Samples that are computed and kept together. */
export const BLOCK = 64;
/** More samples would not fit into memory. */
const MOST_SAMPLES = 2e7;

/** Blocks [from, to) of all samples. @throws {InputError} for fewer than 2 samples or more than fit into memory */
export function sampleBlocks(samples: number): { readonly from: number; readonly to: number }[] {
  if (samples < 2) throw new InputError("range", `samples = ${samples}: errors by sampling need at least 2`);
  if (samples > MOST_SAMPLES)
    throw new InputError("range", `samples = ${samples}: at most ${MOST_SAMPLES} fit into memory; ask for fewer`);
  return Array.from({ length: Math.ceil(samples / BLOCK) }, (_, b) => ({
    from: b * BLOCK,
    to: Math.min(samples, (b + 1) * BLOCK),
  }));
}

/**
 * Samples `from` to `to` - 1.
 * @param evaluate abundances at given standardised variations of all sources
 */
export function computeSampleBlock(
  evaluate: (variations: Float64Array) => { readonly values: readonly number[]; readonly counts: SolverCounts },
  plan: SamplePlan,
  from: number,
  to: number,
): SampleBlock {
  let counts: SolverCounts = { steps: 0, rejected: 0, rhs: 0, jacobians: 0, factorisations: 0 };
  const values: (readonly number[])[] = [];
  for (let i = from; i < to; i++) {
    const run = evaluate(standardNormals(plan, i));
    values.push(run.values);
    counts = addCounts(counts, run.counts);
  }
  return { values, counts };
}

/** Errors from all blocks, in the order of the samples. @param names of the values */
export function sampledErrors(names: readonly string[], blocks: readonly SampleBlock[]): SampledErrors {
  const rows = blocks.flatMap(({ values }) => values);
  const summary = summariseSamples(names.map((_, x) => Float64Array.from(rows, (row) => row[x])));
  const byName = <T>(list: readonly T[]) => Object.fromEntries(names.map((name, x) => [name, list[x]]));
  return {
    sigma: summary.sigma,
    correlation: { order: names, matrix: summary.correlation },
    quantiles: byName(summary.quantiles),
    sampling: { samples: rows.length, mean: byName(summary.mean), sigmaError: byName(summary.sigmaError) },
  };
}
