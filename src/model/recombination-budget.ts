/** Sensitivities of z_star, z_drag and r_drag to the parameters of recombination: d ln X/d ln p by central differences. */
import { computeLineOfSight } from "../lineofsight/summary.ts";
import { heliumMassFraction, heliumToHydrogen } from "../parameters/helium.ts";
import { computeIonisationHistory } from "../recombination/history.ts";
import type { RecombinationInputs } from "../recombination/inputs.ts";
import { centralSensitivities, relativeStep } from "../uncertainty/sensitivity.ts";

/** What is differentiated, and by what, in the order of the output. */
export const BUDGET_RESULTS = ["zStar", "zDrag", "rDrag"] as const;
export const BUDGET_PARAMETERS = [
  "omegaB",
  "omegaC",
  "h0",
  "tCmb",
  "ypMass",
  "nEff",
  "alphaFactor",
  "lambda2s",
] as const;

/** Share by which a parameter moves to either side; the error of the difference is of order its square. */
const STEP = 0.005;
/** Error control of the runs, tight enough that its noise in d ln X/d ln p is below 1e-6. */
const TOLERANCE = 1e-8;

type BudgetResult = (typeof BUDGET_RESULTS)[number];
type BudgetParameter = (typeof BUDGET_PARAMETERS)[number];
export type RecombinationSensitivities = Readonly<Record<BudgetResult, Readonly<Record<BudgetParameter, number>>>>;

function withParameter(inputs: RecombinationInputs, name: BudgetParameter, value: number): RecombinationInputs {
  return name === "ypMass" ? { ...inputs, fHe: heliumToHydrogen(value) } : { ...inputs, [name]: value };
}

/**
 * d ln X/d ln p at fixed other parameters: helium is held as mass fraction (it does not follow omega_b or N_eff), H0 is
 * held, and Lambda fills up to flatness. 0 for a parameter that is itself 0, and for those without a part in the model.
 * @param progress told the number of parameters done and their total
 * @throws {InputError | CalculationError} as the history and line of sight
 */
export function recombinationSensitivities(
  inputs: RecombinationInputs,
  progress: (done: number, total: number) => void = () => {},
): RecombinationSensitivities {
  const tight = { ...inputs, tolerance: Math.min(inputs.tolerance ?? TOLERANCE, TOLERANCE) };
  const values: Readonly<Record<BudgetParameter, number>> = {
    ...tight,
    ypMass: heliumMassFraction(inputs.fHe),
    lambda2s: inputs.lambda2s ?? 1,
  };
  const moving = BUDGET_PARAMETERS.filter((name) => values[name] > 0);
  const rows = moving.map((name, done) => {
    progress(done, moving.length);
    return centralSensitivities([relativeStep(name, values[name], STEP)], (parameter, value) => {
      const changed = withParameter(tight, parameter, value);
      const { zStar, zDrag, rDrag_Mpc } = computeLineOfSight(changed, computeIonisationHistory(changed)).summary;
      return [zStar, zDrag, rDrag_Mpc];
    })[0];
  });
  const of = (result: number) =>
    Object.fromEntries(
      BUDGET_PARAMETERS.map((name) => {
        const i = moving.indexOf(name);
        return [name, i < 0 ? 0 : rows[i][result]];
      }),
    ) as Record<BudgetParameter, number>;
  return { zStar: of(0), zDrag: of(1), rDrag: of(2) };
}
