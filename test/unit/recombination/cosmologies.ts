/** Cosmologies shared by the recombination tests. */
import { heliumToHydrogen } from "../../../src/parameters/helium.ts";
import type { RecombinationInputs } from "../../../src/recombination/inputs.ts";

/** The default cosmology with helium mass fraction 0.2454. */
export const STANDARD: RecombinationInputs = {
  omegaB: 0.02237,
  omegaC: 0.12,
  h0: 67.36,
  tCmb: 2.7255,
  nEff: 3.044,
  sumMnu: 0.06,
  fHe: heliumToHydrogen(0.2454),
  alphaFactor: 1,
  model: "three-level",
  without: [],
};
