/** The envelope of answers that no nucleosynthesis run stands behind: rate lists, files and checks. */
import { CONSTANTS_EDITION } from "../constants/codata.ts";
import { type Keys, resolveParameters } from "../parameters/cosmology.ts";
import type { Envelope, RateUsed } from "./envelope.ts";
import { makeEnvelope } from "./envelope.ts";

const NO_COST = { steps: 0, rejected: 0, rhs: 0, jacobians: 0, factorisations: 0 } as const;

/**
 * @param keys of the request; all that is not about rates stays at its default and enters nothing
 * @param rates those the answer is about, if it is about single ones
 * @throws {InputError} for keys out of range
 */
export function ratesEnvelope<Results>(
  keys: Keys,
  results: Results,
  rates: readonly RateUsed[] = [],
  warnings: readonly string[] = [],
): Envelope<Results> {
  const parameters = resolveParameters(keys);
  return makeEnvelope(
    "rates",
    parameters,
    results,
    { network: parameters.network, rates, corrections: [], constants: CONSTANTS_EDITION },
    { ...NO_COST, tolerance: parameters.tolerance },
    warnings,
  );
}
