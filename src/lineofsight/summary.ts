/** The numbers of last scattering and baryon drag that an ionisation history implies. */
import { ageAt } from "../background/expansion.ts";
import { SECONDS_PER_JULIAN_YEAR } from "../constants/units.ts";
import { findRoot } from "../numerics/roots.ts";
import { type IonisationHistory, Z_TOP } from "../recombination/history.ts";
import type { RecombinationInputs } from "../recombination/inputs.ts";
import { dampingWavenumber } from "./damping.ts";
import { comovingDistance } from "./distances.ts";
import { type LineOfSight, lineOfSight } from "./optical-depth.ts";
import { reionisationDepth, reionisationRedshift } from "./reionisation-depth.ts";
import { soundHorizon } from "./sound-horizon.ts";
import { type VisibilitySummary, visibilitySummary } from "./visibility.ts";

/** Keys as in the JSON answer; definitions in the comment of each. */
export interface LineOfSightSummary {
  /** Optical depth of recombination alone (residual ionisation down to z = 0 included) equals 1. */
  readonly zStar: number;
  /** Drag depth, the Thomson integrand over R = 3 rho_b/(4 rho_gamma), equals 1. */
  readonly zDrag: number;
  /** Comoving sound horizons at zStar and zDrag. */
  readonly rStar_Mpc: number;
  readonly rDrag_Mpc: number;
  /** 100 r_star/D_M(z_star). */
  readonly theta100Star: number;
  readonly DMStar_Mpc: number;
  readonly kD_invMpc: number;
  /** omega_b + omega_c against photons and three massless neutrinos. */
  readonly zEq: number;
  readonly ageToday_Gyr: number;
  readonly ageAtStar_yr: number;
  /** Radiation temperature at zStar. */
  readonly temperatureAtStar_K: number;
  readonly xeAtZ: Readonly<Record<string, number>>;
  /** x_e = 1/2 in Saha equilibrium and in the model; left out if x_e stays above. */
  readonly zHalfIonisedSaha: number;
  readonly zHalfIonised?: number;
  readonly visibility: VisibilitySummary;
  /** Redshift and depth of reionisation (electrons of the tanh form); only when asked for. */
  readonly zReionisation?: number;
  readonly opticalDepthReionisation?: number;
  /** T_m/T_r = 0.9; left out if matter does not cool (switch matter-cooling). */
  readonly zThermalDecoupling?: number;
}

export interface LineOfSightResult {
  readonly summary: LineOfSightSummary;
  readonly sight: LineOfSight;
}

/**
 * Optical depth, visibility, horizons and damping of a history.
 * @throws {CalculationError} if an optical depth does not reach 1 below z = 1e7
 * @throws {InputError} as {@link reionisationRedshift}
 */
export function computeLineOfSight(inputs: RecombinationInputs, history: IonisationHistory): LineOfSightResult {
  const zRe = reionisationRedshift(inputs, history);
  const sight = lineOfSight(history, zRe);
  const { background } = history;
  const logStar = sight.unitDepth("optical");
  const zStar = Math.expm1(logStar);
  const zDrag = Math.expm1(sight.unitDepth("drag"));
  const rStar = soundHorizon(background, zStar);
  const DM = comovingDistance(background, zStar);
  const decoupling = thermalDecoupling(history);
  const zHalfIonised = halfIonised(history, sight.edges);
  return {
    sight,
    summary: {
      zStar,
      zDrag,
      rStar_Mpc: rStar,
      rDrag_Mpc: soundHorizon(background, zDrag),
      theta100Star: (100 * rStar) / DM,
      DMStar_Mpc: DM,
      kD_invMpc: dampingWavenumber(sight, logStar),
      zEq: background.zEq,
      ageToday_Gyr: ageAt(background, 0) / SECONDS_PER_JULIAN_YEAR / 1e9,
      ageAtStar_yr: ageAt(background, zStar) / SECONDS_PER_JULIAN_YEAR,
      temperatureAtStar_K: inputs.tCmb * (1 + zStar),
      xeAtZ: { "20": history.xeAt(Math.log1p(20)), "200": history.xeAt(Math.log1p(200)) },
      zHalfIonisedSaha: halfIonisedSaha(history),
      ...(zHalfIonised === undefined ? {} : { zHalfIonised }),
      visibility: visibilitySummary(sight),
      ...(zRe === undefined ? {} : { zReionisation: zRe, opticalDepthReionisation: reionisationDepth(history, zRe) }),
      ...(decoupling === undefined ? {} : { zThermalDecoupling: decoupling }),
    },
  };
}

/** Redshift at which x_e of the history falls below 1/2; x_e falls from high redshift to low. */
function halfIonised(history: IonisationHistory, edges: Float64Array): number | undefined {
  if (!(history.xeAt(0) < 0.5)) return undefined;
  let lo = 0;
  let hi = edges.length - 1;
  while (hi - lo > 1) {
    const middle = (lo + hi) >> 1;
    if (history.xeAt(edges[middle]) < 0.5) lo = middle;
    else hi = middle;
  }
  return Math.expm1(findRoot((x) => history.xeAt(x) - 0.5, edges[lo], edges[hi], 1e-10));
}

/** The same in equilibrium. */
function halfIonisedSaha(history: IonisationHistory): number {
  const logarithm = (z: number) => Math.log(Math.max(history.sahaXe(z), 1e-300) / 0.5);
  return findRoot(logarithm, 200, Z_TOP, 1e-7);
}

/** Redshift at which T_m/T_r falls below 0.9. */
function thermalDecoupling(history: IonisationHistory): number | undefined {
  const { logZ } = history;
  if (!(history.temperatureRatioAt(0) < 0.9)) return undefined;
  let i = 1;
  while (history.temperatureRatioAt(logZ[i]) < 0.9) i++;
  return Math.expm1(findRoot((x) => history.temperatureRatioAt(x) - 0.9, logZ[i - 1], logZ[i], 1e-10));
}
