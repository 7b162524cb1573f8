/** The request `recombination`: ionisation history, last scattering and baryon drag of one cosmology. */
import { CONSTANTS_EDITION } from "../constants/codata.ts";
import { type RecombinationResults, recombinationParameters, recombinationResults } from "../model/recombination.ts";
import { recombinationSensitivities } from "../model/recombination-budget.ts";
import type { RateLibrary } from "../nuclear/library.ts";
import { InputError } from "../numerics/check.ts";
import { type Keys, resolveParameters } from "../parameters/cosmology.ts";
import { RECOMBINATION_CONSTANTS } from "../recombination/atomic.ts";
import { CONSTANT_EFFECTS } from "../recombination/effects.generated.ts";
import { RECOMBINATION_SWITCHES } from "../recombination/switches.ts";
import type { Envelope, Progress, Provenance, RecombinationConstantUsed } from "./envelope.ts";
import { makeEnvelope } from "./envelope.ts";
import { modelFor } from "./model-for.ts";
import { nucleosynthesisProvenance } from "./provenance.ts";

/** Keys of a request: those of every command, exact redshifts for the table, and whether sensitivities are wanted. */
export interface RecombinationKeys extends Keys {
  /** Redshifts, as numbers or as the option's text `1100,1089.5`. */
  readonly z?: readonly number[] | string;
  readonly budget?: boolean;
}

/**
 * Redshifts of a list.
 * @throws {InputError} unless every entry is a number of 0 or more
 */
export function parseRedshifts(z: readonly number[] | string): number[] {
  const entries = typeof z === "string" ? z.split(",") : z;
  return entries.map((entry) => {
    const value = typeof entry === "string" && entry.trim() === "" ? Number.NaN : Number(entry);
    if (!(Number.isFinite(value) && value >= 0))
      throw new InputError("number", `z = ${entry}: give redshifts of 0 or more, such as 1100,1089.5`);
    return value;
  });
}

/**
 * Answers `recombination`.
 * @param progress told the share of the runs of the budget done
 * @throws {InputError | CalculationError}
 */
export async function computeRecombination(
  keys: RecombinationKeys,
  library: RateLibrary,
  progress?: Progress,
): Promise<Envelope<RecombinationResults>> {
  const { z, budget, ...plain } = keys;
  // Everything that can be refused is refused before the first calculation.
  const redshifts = z === undefined ? undefined : parseRedshifts(z);
  const early = recombinationParameters(plain);
  const model = await modelFor(plain, library);
  const run = model.recombinationRun();
  const results = recombinationResults(run, redshifts);
  const sensitivities = budget
    ? recombinationSensitivities(run.inputs, (done, total) => progress?.(done / total, "parameters of the budget"))
    : undefined;
  const { without: _ours, tolerance: _own, ...heliumKeys } = plain;
  const helium: Provenance =
    run.heliumFrom === "nucleosynthesis"
      ? nucleosynthesisProvenance(model, resolveParameters(heliumKeys))
      : { network: "none, helium given", rates: [], corrections: [], constants: CONSTANTS_EDITION };
  const switches = RECOMBINATION_SWITCHES.filter((s) => s.models.includes(early.model)).map((s) => s.name);
  return makeEnvelope(
    "recombination",
    run.parameters,
    { ...withTable(results), ...(sensitivities === undefined ? {} : { sensitivities }) },
    {
      ...helium,
      corrections: [...helium.corrections, ...switches.filter((name) => !early.without.includes(name))],
      recombination: recombinationConstants(),
    },
    { ...run.counts, tolerance: early.tolerance },
    run.warnings,
  );
}

/** The results as a plain object, the table computed. */
function withTable(results: RecombinationResults): RecombinationResults {
  return { ...results };
}

/** Every constant and fit of recombination with its source and what it moves. */
export function recombinationConstants(): RecombinationConstantUsed[] {
  return Object.entries(RECOMBINATION_CONSTANTS).map(([name, { meaning, value, uncertainty, unit, source }]) => {
    const { zStar, zDrag, xe } = CONSTANT_EFFECTS[name];
    return {
      name,
      meaning: meaning.trim(),
      value,
      ...(uncertainty > 0 ? { uncertainty } : {}),
      unit,
      source,
      effectPerPercent: { zStar, zDrag, xe },
    };
  });
}
