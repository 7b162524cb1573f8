/** How much each constant and each switch moves last scattering: computed in the default cosmology for the provenance tables. */
import { computeLineOfSight } from "../lineofsight/summary.ts";
import { DEFAULTS, STANDARD_N_EFF } from "../parameters/cosmology.ts";
import { heliumToHydrogen } from "../parameters/helium.ts";
import {
  RECOMBINATION_CONSTANTS,
  RECOMBINATION_VALUES,
  type RecombinationConstantName,
} from "../recombination/atomic.ts";
import { computeIonisationHistory } from "../recombination/history.ts";
import type { RecombinationInputs } from "../recombination/inputs.ts";
import { RECOMBINATION_SWITCHES } from "../recombination/switches.ts";

/** Helium mass fraction that the effects are computed with, rounded so that they do not follow the rates. */
export const EFFECTS_YP = 0.2454;
/** Share by which a constant is moved to either side. */
const STEP = 1e-3;
/** Redshifts at which the change of x_e is listed. */
export const EFFECT_REDSHIFTS = [200, 1100, 1900, 6000] as const;

/** What moves when a constant is changed by 1 % or a switch is left out. */
export interface Effect {
  /** Change of z_star and z_drag. */
  readonly zStar: number;
  readonly zDrag: number;
  /** Relative change of x_e by redshift. */
  readonly xe: Readonly<Record<string, number>>;
}

const BASE: RecombinationInputs = {
  omegaB: DEFAULTS.omegaB,
  omegaC: DEFAULTS.omegaC,
  h0: DEFAULTS.h0,
  tCmb: DEFAULTS.tCmb,
  nEff: STANDARD_N_EFF,
  sumMnu: DEFAULTS.sumMnu,
  fHe: heliumToHydrogen(EFFECTS_YP),
  alphaFactor: DEFAULTS.alphaFactor,
  model: "three-level",
  without: [],
  tolerance: 1e-9,
};

function run(changes: Partial<RecombinationInputs>) {
  const inputs = { ...BASE, ...changes };
  const history = computeIonisationHistory(inputs);
  return { history, ...computeLineOfSight(inputs, history).summary };
}

/** Constants given as logarithms are moved by a share of what they are the logarithm of. */
function moved(name: RecombinationConstantName, share: number): number {
  const value = RECOMBINATION_VALUES[name];
  return /log10/.test(RECOMBINATION_CONSTANTS[name].meaning) ? value + Math.log10(1 + share) : value * (1 + share);
}

type Run = ReturnType<typeof run>;

/** Change from one run to another, per `unit` of whatever was changed. */
function effect(from: Run, to: Run, unit: number): Effect {
  const xe = (r: Run, z: number) => Math.log(r.history.xeAt(Math.log1p(z)));
  return {
    zStar: (to.zStar - from.zStar) * unit,
    zDrag: (to.zDrag - from.zDrag) * unit,
    xe: Object.fromEntries(
      EFFECT_REDSHIFTS.map((z) => {
        const change = xe(to, z) - xe(from, z);
        return [z, unit === 1 ? Math.expm1(change) : change * unit];
      }),
    ),
  };
}

/** Change per +1 % of a constant, by central differences of 0.1 %; helium is held as mass fraction. */
export function constantEffect(name: RecombinationConstantName): Effect {
  const at = (share: number) => {
    const values = { ...RECOMBINATION_VALUES, [name]: moved(name, share) };
    return run({ values, fHe: heliumToHydrogen(EFFECTS_YP, values.heliumMass / values.hydrogenMass) });
  };
  return effect(at(-STEP), at(STEP), 0.01 / (2 * STEP));
}

/** Change of the results when a switch is left out. */
export function switchEffect(name: string): Effect {
  return effect(run({}), run({ without: [name] }), 1);
}

/** All effects. */
export function allEffects() {
  const names = Object.keys(RECOMBINATION_CONSTANTS) as RecombinationConstantName[];
  return {
    constants: Object.fromEntries(names.map((name) => [name, constantEffect(name)])),
    switches: Object.fromEntries(RECOMBINATION_SWITCHES.map(({ name }) => [name, switchEffect(name)])),
  };
}
