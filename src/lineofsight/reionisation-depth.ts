/** Optical depth of reionisation, and the redshift that gives a depth. */
import { InputError } from "../numerics/check.ts";
import { gaussLegendre } from "../numerics/quadrature.ts";
import { findRoot } from "../numerics/roots.ts";
import type { IonisationHistory } from "../recombination/history.ts";
import type { RecombinationInputs } from "../recombination/inputs.ts";
import { reionisedElectrons } from "../recombination/reionisation.ts";
import { thomsonPerElectron } from "./optical-depth.ts";

const POINTS = 5;
const WIDEST = 0.03;
/** Highest redshift searched for a given depth. */
const Z_HIGHEST = 100;

/**
 * Optical depth of reionisation, int c sigma_T n_H x_re dt with the electrons of the tanh form alone (the residual of
 * recombination, about 2e-4 per atom, is not counted).
 * @param zRe redshift of half ionisation
 * @returns relative accuracy 1e-7
 */
export function reionisationDepth(history: IonisationHistory, zRe: number): number {
  const perElectron = thomsonPerElectron(history);
  const { fHe } = history.inputs;
  // At 12 above z_re the share is below 1e-12 for every z_re (the width in z is 0.5).
  const top = Math.log1p(zRe + 12);
  const { nodes, weights } = gaussLegendre(POINTS);
  const panels = Math.ceil(top / WIDEST);
  const half = top / panels / 2;
  let sum = 0;
  for (let i = 0; i < panels; i++)
    for (let k = 0; k < POINTS; k++) {
      const x = half * (2 * i + 1 + nodes[k]);
      sum += weights[k] * half * perElectron(x) * reionisedElectrons(Math.expm1(x), zRe, fHe);
    }
  return sum;
}

/**
 * Redshift of reionisation: as given, or the one whose tanh form has the optical depth asked for.
 * @returns undefined if there is none (tauReion = 0 included)
 * @throws {InputError} if no redshift from 0 to 100 gives that depth
 */
export function reionisationRedshift(inputs: RecombinationInputs, history: IonisationHistory): number | undefined {
  if (inputs.zReion !== undefined) return inputs.zReion;
  const tau = inputs.tauReion;
  if (tau === undefined || tau === 0) return undefined;
  const lowest = reionisationDepth(history, 0);
  const highest = reionisationDepth(history, Z_HIGHEST);
  if (tau < lowest || tau > highest)
    throw new InputError(
      "range",
      `tauReion = ${tau}: reionisation at z = 0 to ${Z_HIGHEST} has a depth of ${lowest.toPrecision(3)} to ${highest.toPrecision(3)} in this cosmology; ask for one in that range, or for 0`,
    );
  return findRoot((z) => reionisationDepth(history, z) - tau, 0, Z_HIGHEST, 1e-8);
}
