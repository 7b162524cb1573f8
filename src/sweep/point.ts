/** One point of a scan or grid: the abundances, and how they respond to sources of error. */
import { linearErrors } from "../model/linear-errors.ts";
import {
  applyVariations,
  errorSources,
  type Model,
  reported,
  scaleFactors,
  validityWarnings,
} from "../model/prepare.ts";
import type { AbundanceName } from "../nucleosynthesis/abundances.ts";
import { addCounts, type RunInputs } from "../nucleosynthesis/run.ts";
import { CalculationError, InputError } from "../numerics/check.ts";
import type { SolverCounts } from "../numerics/ode-stiff.ts";
import type { Keys } from "../parameters/cosmology.ts";
import type { SamplePlan } from "../uncertainty/monte-carlo.ts";

/** What is asked at one point. */
export interface PointQuestion {
  readonly overrides: Keys;
  /** How the point is named in the message of a failure, e.g. `eta10 = 3`. */
  readonly where: string;
  /** Whether the abundances at the point itself are wanted; they come in any case. */
  readonly values: boolean;
  /** Whether the responses to every source of error are wanted, as {@link linearErrors} finds them. */
  readonly linear?: boolean;
  /** Abundances of which the responses are wanted, in this order; all without. Each costs its share of the adjoint. */
  readonly responding?: readonly AbundanceName[];
  /** Samples `from` to `to` - 1 of a Monte Carlo; nothing else is answered then. */
  readonly samples?: { readonly plan: SamplePlan; readonly from: number; readonly to: number };
  /** Whether the errors are those of the model's own error analysis (samples), one sigma an abundance. */
  readonly sigma?: boolean;
}

/** Plain numbers, so that an answer travels between threads and through a checkpoint unchanged. */
export interface PointAnswer {
  readonly values?: readonly number[];
  readonly sigma?: readonly number[];
  /** responses[s][x] = d ln x/dp of source s, in the order of {@link applyVariations}; 0 where an abundance is 0. */
  readonly responses?: readonly (readonly number[])[];
  /** samples[i][x] of the samples asked for. */
  readonly samples?: readonly (readonly number[])[];
  readonly counts: SolverCounts;
  readonly warnings: readonly string[];
}

/**
 * Answers a question about one point. The abundances are those of a single run, to the last bit.
 * @throws {InputError | CalculationError} naming what failed
 */
export function answerPoint(model: Model, question: PointQuestion): PointAnswer {
  try {
    return answer(model, question);
  } catch (error) {
    if (error instanceof InputError) throw new InputError(error.code, `at ${question.where}: ${error.message}`);
    if (error instanceof CalculationError)
      throw new CalculationError(error.code, `at ${question.where}: ${error.message}`);
    throw error;
  }
}

function answer(model: Model, question: PointQuestion): PointAnswer {
  if (question.samples !== undefined) {
    const { plan, from, to } = question.samples;
    const { values, counts } = model.sampleBlock(question.overrides, plan, from, to);
    return { samples: values, counts, warnings: [] };
  }
  const p = model.parameters(question.overrides);
  if (question.sigma === true) {
    const run = model.abundances(question.overrides);
    const estimates = Object.values(run.abundances);
    return {
      values: estimates.map((estimate) => estimate.value),
      sigma: estimates.map((estimate) => estimate.sigma ?? 0),
      counts: withoutTolerance(run.solver),
      warnings: run.warnings,
    };
  }
  const context = model.context(p);
  const factors = scaleFactors(context.data, p.scales, model.library);
  const inputs: RunInputs = { eta10: p.eta10, tauN: p.tauN, factors, tolerance: p.tolerance };
  const { names, values, counts } = model.evaluate(context, inputs);
  const warnings = validityWarnings(p);
  if (question.linear !== true) return { values, counts, warnings };
  const columns = (question.responding ?? names).map((name) => names.indexOf(name));
  const chosen = (all: readonly number[]) => columns.map((x) => all[x]);
  const linear = linearErrors(
    context,
    inputs,
    p,
    chosen(values),
    (Y) => chosen(reported(context, Y)),
    (source, sign) => {
      const variations = new Float64Array(errorSources(context, p));
      variations[source] = sign;
      const run = model.evaluate(context, applyVariations(context, inputs, p, variations));
      return { values: chosen(run.values), counts: run.counts };
    },
  );
  return {
    values,
    responses: linear.response.map((row) => [...row]),
    counts: addCounts(counts, linear.counts),
    warnings,
  };
}

function withoutTolerance({ steps, rejected, rhs, jacobians, factorisations }: SolverCounts): SolverCounts {
  return { steps, rejected, rhs, jacobians, factorisations };
}
