/** Inputs of a recombination history, their defaults, and the ways in which helium is given. */
import type { LateCosmology } from "../background/expansion.ts";
import { InputError } from "../numerics/check.ts";
import type { RecombinationValues } from "./atomic.ts";
import { RECOMBINATION_SWITCHES } from "./switches.ts";

export interface RecombinationInputs extends LateCosmology {
  /** Helium nuclei per hydrogen nucleus (not a mass fraction). */
  readonly fHe: number;
  /** Factor on the case-B coefficient of hydrogen. */
  readonly alphaFactor: number;
  readonly model: "saha" | "three-level";
  /** Optical depth or redshift of reionisation; none if neither is given. */
  readonly tauReion?: number;
  readonly zReion?: number;
  /** Names of RECOMBINATION_SWITCHES left out. */
  readonly without: readonly string[];
  /** Factor on the two-photon rate of hydrogen; 1 if left out. */
  readonly lambda2s?: number;
  /** Error control of the integration; see RECOMBINATION_TOLERANCE. */
  readonly tolerance?: number;
  /** Constants other than the published ones, for a study of their effect. */
  readonly values?: RecombinationValues;
}

/** Default error control: local error of x_e per step, relative. */
export const RECOMBINATION_TOLERANCE = 1e-7;

/**
 * Checks the names of `without`.
 * @throws {InputError} for an unknown name, or one that has no part in the model
 */
export function checkSwitches(without: readonly string[], model: RecombinationInputs["model"]): void {
  for (const name of without) {
    const known = RECOMBINATION_SWITCHES.find((s) => s.name === name);
    const usable = RECOMBINATION_SWITCHES.filter((s) => s.models.includes(model)).map((s) => s.name);
    if (!known) throw new InputError("choice", `without = ${name}: accepted are ${usable.join(", ")}`);
    if (!known.models.includes(model))
      throw new InputError(
        "choice",
        `without = ${name}: has no part in model ${model}; accepted there are ${usable.join(", ")}`,
      );
  }
}
