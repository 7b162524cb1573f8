/** The request `abundances`: light-element abundances of one cosmology, each with its theory error. */
import type { Model } from "../model/prepare.ts";
import type { RateLibrary } from "../nuclear/library.ts";
import type { Keys } from "../parameters/cosmology.ts";
import type { AbundanceResults, Envelope, Progress } from "./envelope.ts";
import { makeEnvelope } from "./envelope.ts";
import { modelFor } from "./model-for.ts";
import { nucleosynthesisProvenance } from "./provenance.ts";

/**
 * Answers `abundances`.
 * @param progress told the share of the error runs done
 * @throws {InputError | CalculationError}
 */
export async function computeAbundances(
  keys: Keys,
  library: RateLibrary,
  progress?: Progress,
): Promise<Envelope<AbundanceResults>> {
  return abundancesOf(await modelFor(keys, library), {}, progress);
}

/** The same of a model that is kept, with some keys replaced. */
export function abundancesOf(model: Model, overrides: Keys = {}, progress?: Progress): Envelope<AbundanceResults> {
  const parameters = model.parameters(overrides);
  const run = model.abundances(overrides, (done, total) => progress?.(done / total, "error runs"));
  const { abundances, nEffComputed, correlation, assumedVarianceShare, quantiles } = run;
  return makeEnvelope(
    "abundances",
    parameters,
    {
      abundances: abundances as AbundanceResults["abundances"],
      nEffComputed,
      ...(correlation ? { correlation } : {}),
      ...(assumedVarianceShare ? { assumedVarianceShare } : {}),
      ...(quantiles ? { quantiles } : {}),
    },
    nucleosynthesisProvenance(model, parameters),
    run.solver,
    run.warnings,
  );
}
