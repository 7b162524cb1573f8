/** Recombination of one set of keys: helium from the nucleosynthesis run of the same cosmology, history, line of sight, table. */

import { computeLineOfSight, type LineOfSightResult, type LineOfSightSummary } from "../lineofsight/summary.ts";
import { adaptiveTable, tableAt } from "../lineofsight/table.ts";
import { InputError } from "../numerics/check.ts";
import { trivialExpression } from "../numerics/expression.ts";
import type { SolverCounts } from "../numerics/ode-stiff.ts";
import type { Table } from "../numerics/table.ts";
import { type CosmologyParameters, type Keys, resolveParameters } from "../parameters/cosmology.ts";
import { heliumToHydrogen } from "../parameters/helium.ts";
import { computeIonisationHistory, type IonisationHistory } from "../recombination/history.ts";
import { checkSwitches, RECOMBINATION_TOLERANCE, type RecombinationInputs } from "../recombination/inputs.ts";
import { RECOMBINATION_SWITCH_NAMES } from "../recombination/switches.ts";

/** The `results` of the command `recombination`. */
export interface RecombinationResults extends LineOfSightSummary {
  /** Helium nuclei per hydrogen nucleus, and the same as mass fraction of neutral H + He. */
  readonly fHe: number;
  readonly ypMass: number;
  /** Hydrogen nuclei today. */
  readonly nHToday_per_cm3: number;
  /** z, x_e, T_m, T_r, optical depth, visibility, conformal time. */
  readonly table: Table;
  /** d ln X/d ln p; only when asked for. */
  readonly sensitivities?: Readonly<Record<string, Readonly<Record<string, number>>>>;
}

/** A run with everything that a request needs beyond its results. */
export interface RecombinationRun {
  readonly parameters: CosmologyParameters;
  readonly inputs: RecombinationInputs;
  readonly history: IonisationHistory;
  readonly lineOfSight: LineOfSightResult;
  readonly heliumFrom: "nucleosynthesis" | "ypMass";
  readonly counts: Readonly<SolverCounts>;
  readonly warnings: readonly string[];
}

/** Helium mass fraction of the nucleosynthesis run for these keys. */
export type HeliumSource = (keys: Keys) => number;

/**
 * Completes the keys of a recombination request: `without` holds names of RECOMBINATION_SWITCHES, `tolerance` has its own
 * default.
 * @throws {InputError} also for an expansion factor, which acts in nucleosynthesis only
 */
export function recombinationParameters(keys: Keys): CosmologyParameters {
  if (keys.expansion !== undefined && trivialExpression(keys.expansion) !== 1)
    throw new InputError(
      "expansion",
      `expansion ${keys.expansion}: refused by recombination; it is a factor on H(T) in nucleosynthesis only`,
    );
  const tolerance = keys.tolerance ?? RECOMBINATION_TOLERANCE;
  const parameters = resolveParameters({ ...keys, tolerance }, RECOMBINATION_SWITCH_NAMES);
  checkSwitches(parameters.without, parameters.model);
  return parameters;
}

/**
 * Runs recombination. Helium is ypMass if given, else that of the nucleosynthesis run of the same cosmology.
 * @param helium asked only if ypMass is not given; receives the keys without those of recombination alone
 * @throws {InputError | CalculationError}
 */
export function runRecombination(keys: Keys, helium: HeliumSource): RecombinationRun {
  const parameters = recombinationParameters(keys);
  const { without: _switches, tolerance: _ownDefault, ...early } = keys;
  const given = parameters.ypMass;
  const ypMass = given ?? helium(early);
  const inputs = recombinationInputs(parameters, ypMass);
  const history = computeIonisationHistory(inputs);
  return {
    parameters: { ...parameters, ypMass },
    inputs,
    history,
    lineOfSight: computeLineOfSight(inputs, history),
    heliumFrom: given === undefined ? "nucleosynthesis" : "ypMass",
    counts: history.counts,
    warnings: recombinationWarnings(parameters),
  };
}

/** Inputs of the recombination code from complete parameters and a helium mass fraction. */
export function recombinationInputs(p: CosmologyParameters, ypMass: number): RecombinationInputs {
  return {
    omegaB: p.omegaB,
    omegaC: p.omegaC,
    h0: p.h0,
    tCmb: p.tCmb,
    nEff: p.nEff,
    sumMnu: p.sumMnu,
    fHe: heliumToHydrogen(ypMass),
    alphaFactor: p.alphaFactor,
    model: p.model,
    ...(p.tauReion === undefined ? {} : { tauReion: p.tauReion }),
    ...(p.zReion === undefined ? {} : { zReion: p.zReion }),
    without: p.without,
    tolerance: p.tolerance,
  };
}

/**
 * Results of a run. The table is computed when it is first read, so that a sampler does not pay for it.
 * @param redshifts rows at these instead of the adaptive ones
 * @throws {InputError} for a redshift outside the table
 */
export function recombinationResults(run: RecombinationRun, redshifts?: readonly number[]): RecombinationResults {
  const { summary, sight } = run.lineOfSight;
  const asked = redshifts === undefined ? undefined : tableAt(sight, redshifts);
  let table = asked;
  return {
    ...summary,
    fHe: run.inputs.fHe,
    ypMass: run.parameters.ypMass as number,
    nHToday_per_cm3: run.history.nH0,
    get table() {
      table ??= adaptiveTable(sight);
      return table;
    },
  };
}

function recombinationWarnings(p: CosmologyParameters): string[] {
  const warnings: string[] = [];
  if (p.xiE !== 0 || p.xiMu !== 0 || p.xiTau !== 0)
    warnings.push("neutrino degeneracy enters helium only: at late times N_eff is the total that is given");
  if (p.tauReion !== undefined || p.zReion !== undefined)
    warnings.push("T_m does not include the heating by reionisation");
  if (p.nEff === 0 && p.sumMnu > 0) warnings.push("nEff = 0: no neutrinos, so sumMnu is ignored");
  if (p.tolerance > 1e-5)
    warnings.push(`tolerance = ${p.tolerance}: the error of x_e may exceed 1e-4 while helium recombines`);
  return warnings;
}
