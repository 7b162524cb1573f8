/** The request `budget`: where each abundance's error comes from, and its sensitivity to every parameter and rate. */
import { DEFAULT_SET, readObservations } from "../inference/observations.ts";
import { computeErrorBudget } from "../model/error-budget.ts";
import { validityWarnings } from "../model/prepare.ts";
import type { RateLibrary } from "../nuclear/library.ts";
import type { BudgetResults } from "../output/budget-result.ts";
import type { Keys } from "../parameters/cosmology.ts";
import type { Envelope, Progress } from "./envelope.ts";
import { makeEnvelope } from "./envelope.ts";
import { modelFor } from "./model-for.ts";
import { nucleosynthesisProvenance } from "./provenance.ts";

/**
 * Answers `budget`.
 * @param progress told the share of the runs done
 * @throws {InputError | CalculationError}
 */
export async function computeBudget(
  keys: Keys,
  library: RateLibrary,
  progress?: Progress,
): Promise<Envelope<BudgetResults>> {
  const model = await modelFor(keys, library);
  const parameters = model.parameters();
  const { counts, warnings, ...results } = computeErrorBudget(model, parameters, (done, total) =>
    progress?.(done / total, "runs of the error budget"),
  );
  return makeEnvelope(
    "budget",
    parameters,
    { ...results, observed: readObservations(library.files, DEFAULT_SET) },
    nucleosynthesisProvenance(model, parameters),
    { ...counts, tolerance: parameters.tolerance },
    [...validityWarnings(parameters), ...warnings],
  );
}
