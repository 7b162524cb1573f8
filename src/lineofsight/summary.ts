/** The numbers of last scattering and baryon drag that an ionisation history implies. */
import { ageAt } from "../background/expansion.ts";
import { SECONDS_PER_JULIAN_YEAR } from "../constants/units.ts";
import { CalculationError, InputError } from "../numerics/check.ts";
import { intervalOf } from "../numerics/interpolate.ts";
import { findRoot } from "../numerics/roots.ts";
import type { IonisationHistory } from "../recombination/history.ts";
import type { RecombinationInputs } from "../recombination/inputs.ts";
import { dampingWavenumber } from "./damping.ts";
import { comovingDistance } from "./distances.ts";
import { type LineOfSight, lineOfSight, reionisationDepth } from "./optical-depth.ts";
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
  /** x_e = 1/2 in Saha equilibrium and in the model. */
  readonly zHalfIonisedSaha: number;
  readonly zHalfIonised: number;
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
 * Redshift of reionisation: as given, or the one whose tanh form has the optical depth asked for.
 * @returns undefined if there is none (tauReion = 0 included)
 * @throws {InputError} if no redshift up to 100 gives that depth
 */
export function reionisationRedshift(inputs: RecombinationInputs, history: IonisationHistory): number | undefined {
  if (inputs.zReion !== undefined) return inputs.zReion;
  const tau = inputs.tauReion;
  if (tau === undefined || tau === 0) return undefined;
  const lowest = reionisationDepth(history, 0);
  const highest = reionisationDepth(history, 100);
  if (tau < lowest || tau > highest)
    throw new InputError(
      "range",
      `tauReion = ${tau}: reionisation of tanh form between z = 0 and 100 gives ${lowest.toPrecision(3)} to ${highest.toPrecision(3)} in this cosmology; ask for a depth in that range, or for 0`,
    );
  return findRoot((z) => reionisationDepth(history, z) - tau, 0, 100, 1e-8);
}

/**
 * Optical depth, visibility, horizons and damping of a history.
 * @throws {CalculationError} if the optical depth does not reach 1 below z = 1e4
 * @throws {InputError} as {@link reionisationRedshift}
 */
export function computeLineOfSight(inputs: RecombinationInputs, history: IonisationHistory): LineOfSightResult {
  const zRe = reionisationRedshift(inputs, history);
  const sight = lineOfSight(history, zRe);
  const { background } = history;
  const depths = sight.depthAtEdges;
  if (!(depths[depths.length - 1] > 30))
    throw new CalculationError(
      "transparent",
      `the optical depth of recombination is only ${depths[depths.length - 1].toPrecision(3)} at z = 1e4: no last scattering`,
    );
  const logStar = sight.unitDepth("optical");
  const zStar = Math.expm1(logStar);
  const zDrag = Math.expm1(sight.unitDepth("drag"));
  const rStar = soundHorizon(background, zStar);
  const DM = comovingDistance(background, zStar);
  const decoupling = thermalDecoupling(history);
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
      zHalfIonisedSaha: halfIonised((x) => history.sahaXe(Math.expm1(x)), sight.edges),
      zHalfIonised: halfIonised((x) => history.xeAt(x), sight.edges),
      visibility: visibilitySummary(sight),
      ...(zRe === undefined ? {} : { zReionisation: zRe, opticalDepthReionisation: reionisationDepth(history, zRe) }),
      ...(decoupling === undefined ? {} : { zThermalDecoupling: decoupling }),
    },
  };
}

/** Redshift at which x_e falls below 1/2, searched on the panels from low redshift up. */
function halfIonised(xe: (logZ: number) => number, edges: Float64Array): number {
  let i = 1;
  while (i < edges.length - 1 && xe(edges[i]) < 0.5) i++;
  return Math.expm1(findRoot((x) => xe(x) - 0.5, edges[i - 1], edges[i], 1e-10));
}

/** Redshift at which T_m/T_r falls below 0.9. */
function thermalDecoupling(history: IonisationHistory): number | undefined {
  const { logZ } = history;
  if (!(history.temperatureRatioAt(0) < 0.9)) return undefined;
  let i = 1;
  while (history.temperatureRatioAt(logZ[i]) < 0.9) i++;
  return Math.expm1(findRoot((x) => history.temperatureRatioAt(x) - 0.9, logZ[i - 1], logZ[i], 1e-10));
}

/** Interval of the panels that holds ln(1 + z); for callers that tabulate. */
export function panelOf(sight: LineOfSight, logZ: number): number {
  return intervalOf(sight.edges, logZ);
}
