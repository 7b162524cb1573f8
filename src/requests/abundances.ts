/** The request `abundances`: light-element abundances of one cosmology, each with its theory error. */
import type { Model } from "../model/prepare.ts";
import { type SampleBlock, sampleBlocks } from "../model/sampling.ts";
import type { RateLibrary } from "../nuclear/library.ts";
import type { Keys } from "../parameters/cosmology.ts";
import type { AbundanceResults, Envelope, Progress } from "./envelope.ts";
import { makeEnvelope } from "./envelope.ts";
import { modelFor } from "./model-for.ts";
import { nucleosynthesisProvenance } from "./provenance.ts";
import type { TaskEngine } from "./sweep.ts";

/**
 * Answers `abundances`.
 * @param progress told the share of the error runs done
 * @param engine   threads for the samples; this one alone without
 * @throws {InputError | CalculationError}
 */
export async function computeAbundances(
  keys: Keys,
  library: RateLibrary,
  progress?: Progress,
  engine?: TaskEngine,
): Promise<Envelope<AbundanceResults>> {
  const model = await modelFor(keys, library);
  const { errors, samples } = model.parameters();
  if (errors !== "sampled" || engine === undefined) return abundancesOf(model, {}, progress);
  return abundancesOf(model, {}, progress, await sampleWith(engine, model, keys, samples, progress));
}

/** All blocks of samples, by as many threads as the engine has: the same numbers for any. */
async function sampleWith(
  engine: TaskEngine,
  model: Model,
  base: Keys,
  samples: number,
  progress?: Progress,
): Promise<SampleBlock[]> {
  const blocks = sampleBlocks(samples);
  const plan = model.samplePlan();
  const tasks = blocks.map(({ from, to }) => ({
    kind: "point" as const,
    base,
    question: { overrides: {}, where: `samples ${from} to ${to - 1}`, values: false, samples: { plan, from, to } },
  }));
  let done = 0;
  progress?.(0, "samples", samples);
  const answers = await engine.answerAll(
    tasks,
    () => "samples",
    () => progress?.(++done / blocks.length, "samples", samples),
  );
  return answers.map(({ samples: values = [], counts }) => ({ values, counts }));
}

/** The same of a model that is kept, with some keys replaced. */
export function abundancesOf(
  model: Model,
  overrides: Keys = {},
  progress?: Progress,
  sampled?: readonly SampleBlock[],
): Envelope<AbundanceResults> {
  const parameters = model.parameters(overrides);
  const run = model.abundances(overrides, (done, total) => progress?.(done / total, "error runs"), sampled);
  const { abundances, nEffComputed, correlation, assumedVarianceShare, quantiles, sampling } = run;
  return makeEnvelope(
    "abundances",
    parameters,
    {
      abundances: abundances as AbundanceResults["abundances"],
      nEffComputed,
      ...(correlation ? { correlation } : {}),
      ...(assumedVarianceShare ? { assumedVarianceShare } : {}),
      ...(quantiles ? { quantiles } : {}),
      ...(sampling ? { sampling } : {}),
    },
    nucleosynthesisProvenance(model, parameters),
    run.solver,
    run.warnings,
  );
}
