/** The request `abundances`: light-element abundances of one cosmology, each with its theory error. */
import type { Model } from "../model/prepare.ts";
import type { AbundanceResults, Envelope, Progress } from "./envelope.ts";
import { makeEnvelope } from "./envelope.ts";
import { nucleosynthesisProvenance } from "./provenance.ts";

/**
 * Answers `abundances` for a prepared model.
 * @param progress told the share of the error runs done
 * @throws {InputError | CalculationError}
 */
export function computeAbundances(model: Model, progress?: Progress): Envelope<AbundanceResults> {
  const parameters = model.parameters();
  const run = model.abundances({}, (done, total) => progress?.(done / total, "error runs"));
  const { abundances, nEffComputed, correlation, quantiles } = run;
  return makeEnvelope(
    "abundances",
    parameters,
    {
      abundances: abundances as AbundanceResults["abundances"],
      nEffComputed,
      ...(correlation ? { correlation } : {}),
      ...(quantiles ? { quantiles } : {}),
    },
    nucleosynthesisProvenance(model, parameters),
    run.solver,
    run.warnings,
  );
}
