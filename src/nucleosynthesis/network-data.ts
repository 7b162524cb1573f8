/** A network with its rates evaluated: what depends on the library alone, shared by all runs. */
import { type CompiledNetwork, compileNetwork } from "../network/compile.ts";
import type { SelectedReaction } from "../nuclear/library.ts";
import type { Nuclide } from "../nuclear/nuclide.ts";
import { evaluateRate, type RateEvaluator } from "../nuclear/rate.ts";
import { multiplicities } from "../nuclear/reaction.ts";
import { type ReverseRatio, reverseRatio } from "../nuclear/reverse.ts";

/** Id of the weak interchange n <-> p; its forward flux is n -> p. */
export const WEAK_REACTION = "n_p";

export interface NetworkReaction {
  readonly id: string;
  readonly selected: SelectedReaction;
  readonly rate: RateEvaluator;
  readonly reverse: ReverseRatio | null;
  /** Products of the factorials of identical reactants and products. */
  readonly reactantMultiplicity: number;
  readonly productMultiplicity: number;
}

export interface NetworkData {
  readonly name: string;
  readonly nuclides: readonly Nuclide[];
  /** Entry r belongs to reaction r + 1 of the compiled network; reaction 0 is n <-> p. */
  readonly reactions: readonly NetworkReaction[];
  readonly compiled: CompiledNetwork;
}

/** Product of the factorials of the multiplicities: 2 for d + d, 6 for three identical particles. */
export function identicalFactor(ids: readonly string[]): number {
  let factor = 1;
  for (const count of multiplicities(ids).values()) for (let k = 2; k <= count; k++) factor *= k;
  return factor;
}

/**
 * Evaluates the selected reactions and compiles them, n <-> p first.
 * @param name network name, for provenance
 * @param nuclideOf looks a nuclide up by id
 */
export function assembleNetwork(
  name: string,
  selected: readonly SelectedReaction[],
  nuclideOf: (id: string) => Nuclide,
): NetworkData {
  const ids = new Set(["n", "p"]);
  for (const { reaction } of selected) for (const id of [...reaction.reactants, ...reaction.products]) ids.add(id);
  const nuclides = [...ids].map(nuclideOf).sort((a, b) => a.A - b.A || a.Z - b.Z);
  const byId = new Map(nuclides.map((x) => [x.id, x]));
  const reactions = selected.map((s): NetworkReaction => {
    const { reaction } = s;
    return {
      id: reaction.id,
      selected: s,
      rate: evaluateRate(s.rateTable),
      reverse: reverseRatio(reaction, byId),
      reactantMultiplicity: identicalFactor(reaction.reactants),
      productMultiplicity: identicalFactor(reaction.products),
    };
  });
  const compiled = compileNetwork(
    nuclides.map((x) => x.id),
    [{ id: WEAK_REACTION, reactants: ["n"], products: ["p"] }, ...selected.map((s) => s.reaction)],
  );
  return { name, nuclides, reactions, compiled };
}
