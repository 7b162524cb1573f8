/** Provenance of a nucleosynthesis answer: network, every rate with its citation, corrections, constants, seed. */
import { CONSTANTS_EDITION } from "../constants/codata.ts";
import type { Model } from "../model/prepare.ts";
import { type CosmologyParameters, NUCLEOSYNTHESIS_CORRECTIONS } from "../parameters/cosmology.ts";
import type { Provenance, RateUsed } from "./envelope.ts";

/** Corrections switched on: those not left out, nor taken along by one left out. */
export function activeCorrections(without: readonly string[]): string[] {
  const off = new Set(without);
  if (off.has("finite-mass")) off.add("weak-magnetism");
  if (off.has("qed-e2")) off.add("qed-e3");
  return NUCLEOSYNTHESIS_CORRECTIONS.filter((name) => !off.has(name));
}

/** Provenance of the rates and corrections behind a nucleosynthesis run. */
export function nucleosynthesisProvenance(model: Model, parameters: CosmologyParameters): Provenance {
  const scales = new Map(
    Object.entries(parameters.scales).map(([name, factor]) => [
      name === "n_p" ? name : model.library.reactionId(name),
      factor,
    ]),
  );
  const rates = model.selection(parameters).map(({ reaction, evaluationName, rateTable }): RateUsed => {
    const scale = scales.get(reaction.id);
    return {
      reaction: reaction.id,
      evaluation: evaluationName,
      citation: rateTable.citation,
      uncertaintyBasis: rateTable.uncertaintyBasis,
      ...(scale !== undefined && scale !== 1 ? { scale } : {}),
    };
  });
  return {
    network: parameters.network,
    rates,
    corrections: activeCorrections(parameters.without),
    constants: CONSTANTS_EDITION,
    ...(parameters.samples > 0 ? { seed: parameters.seed } : {}),
  };
}
