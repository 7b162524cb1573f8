/** Flux coefficients of a network over one thermal history: rates, detailed balance and densities on one table. */
import type { ThermalHistory } from "../background/history.ts";
import { BOLTZMANN } from "../constants/codata.ts";
import { HELIUM4_ATOM_MASS, HYDROGEN_ATOM_MASS } from "../constants/particle.ts";
import { AVOGADRO_NUMBER, GRAM_PER_U, HBARC_MEV_CM, JOULE_PER_MEV, t9ToKelvin } from "../constants/units.ts";
import { REFERENCE_YP } from "../parameters/cosmology.ts";
import type { WeakTable } from "../weak/table.ts";
import { type FluxDefinition, FluxTable, resample } from "./flux-table.ts";
import type { NetworkData, NetworkReaction } from "./network-data.ts";

const ABSENT = { ln: Number.NEGATIVE_INFINITY, slope: 0 } as const;

/** Intervals of the table of a whole run; the error of the abundances falls as its fourth power. */
export const TABLE_INTERVALS = 1024;

/** Photon number density [cm^-3] at temperature T [K]: 2 zeta(3)/pi^2 (kT/hbar c)^3. */
export function photonDensity(T: number): number {
  const kT = (BOLTZMANN.value * T) / JOULE_PER_MEV;
  return ((2 * 1.2020569031595942) / Math.PI ** 2) * (kT / HBARC_MEV_CM) ** 3;
}

/** Mean mass of a baryon [g] of the reference composition (neutral H and 4He at Y_p = 0.247). */
export const MEAN_BARYON_MASS_G =
  GRAM_PER_U * ((1 - REFERENCE_YP) * HYDROGEN_ATOM_MASS.value + (REFERENCE_YP * HELIUM4_ATOM_MASS.value) / 4);

/** Densities and the clock on the nodes of a table, at eta10 = 1; ln values with their slopes d/ds. */
export interface Clock {
  readonly start: number;
  readonly step: number;
  readonly count: number;
  readonly T9: Float64Array;
  /** ln(dt/ds) [s], baryons left out of H. */
  readonly lnDtds: { value: Float64Array; slope: Float64Array };
  /** ln(n_b/N_A) [mol cm^-3]. */
  readonly lnRhoN: { value: Float64Array; slope: Float64Array };
  /** ln(rho_b/rho): what the baryons add to the energy density. */
  readonly lnBaryonShare: { value: Float64Array; slope: Float64Array };
}

/** Samples a thermal history on `intervals` + 1 nodes of s = -ln T9. */
export function sampleClock(history: ThermalHistory, start: number, end: number, intervals: number): Clock {
  const step = (end - start) / intervals;
  const count = intervals + 1;
  const lnDtds = resample(history.s, history.lnDtds, start, step, count);
  const lnHeating = resample(history.s, history.heating.map(Math.log), start, step, count);
  const lnRho = resample(history.s, history.rho.map(Math.log), start, step, count);
  const lnRhoN = { value: new Float64Array(count), slope: new Float64Array(count) };
  const lnBaryonShare = { value: new Float64Array(count), slope: new Float64Array(count) };
  const T9 = Float64Array.from({ length: count }, (_, i) => Math.exp(-(start + i * step)));
  for (let i = 0; i < count; i++) {
    const lnN = Math.log(1e-10 * photonDensity(t9ToKelvin(T9[i]))) + lnHeating.value[i];
    lnRhoN.value[i] = lnN - Math.log(AVOGADRO_NUMBER);
    lnRhoN.slope[i] = -3 + lnHeating.slope[i];
    lnBaryonShare.value[i] = lnN + Math.log(MEAN_BARYON_MASS_G) - lnRho.value[i];
    lnBaryonShare.slope[i] = lnRhoN.slope[i] - lnRho.slope[i];
  }
  return { start, step, count, T9, lnDtds, lnRhoN, lnBaryonShare };
}

/** The weak fluxes n -> p and p -> n, per unit 1/tau_n (tau_n in s). */
export function weakFluxes(clock: Clock, weak: WeakTable): FluxDefinition[] {
  const columns = [weak.lnNToP, weak.lnPToN].map((ln) => resample(weak.s, ln, clock.start, clock.step, clock.count));
  return columns.map((column) => ({
    etaPower: 0,
    at: (i) => ({
      ln: column.value[i] + clock.lnDtds.value[i],
      slope: column.slope[i] + clock.lnDtds.slope[i],
    }),
  }));
}

/** Forward and reverse flux of one nuclear reaction or decay; the rate is evaluated once a node for both. */
export function nuclearFluxes(clock: Clock, reaction: NetworkReaction): FluxDefinition[] {
  const { rate, reverse, reactantMultiplicity, productMultiplicity, selected } = reaction;
  const ln = clock.T9.map(rate.lnRate);
  const slope = clock.T9.map(rate.dLnRatedLnT9);
  const side = (particles: number, multiplicity: number, ratio: typeof reverse): FluxDefinition => {
    const densities = particles - 1;
    const lnMultiplicity = Math.log(multiplicity);
    return {
      etaPower: densities,
      at(i) {
        if (ln[i] === Number.NEGATIVE_INFINITY) return ABSENT;
        const T9 = clock.T9[i];
        const back = ratio === null ? 0 : ratio.lnRatio(T9);
        const backSlope = ratio === null ? 0 : ratio.dLnRatiodLnT9(T9);
        return {
          ln: ln[i] + back + densities * clock.lnRhoN.value[i] + clock.lnDtds.value[i] - lnMultiplicity,
          slope: -(slope[i] + backSlope) + densities * clock.lnRhoN.slope[i] + clock.lnDtds.slope[i],
        };
      },
    };
  };
  const none: FluxDefinition = { etaPower: 0, at: () => ABSENT };
  return [
    side(selected.reaction.reactants.length, reactantMultiplicity, null),
    reverse === null ? none : side(selected.reaction.products.length, productMultiplicity, reverse),
  ];
}

/** The share of baryons in the energy density as the last column of a table (eta10 = 1). */
function baryonColumn(clock: Clock): FluxDefinition {
  return {
    etaPower: 0,
    at: (i) => ({ ln: clock.lnBaryonShare.value[i], slope: clock.lnBaryonShare.slope[i] }),
  };
}

/** Table of all fluxes of a network, n <-> p first, baryon share last. */
export function networkTable(data: NetworkData, clock: Clock, weak: WeakTable): FluxTable {
  return new FluxTable(clock.start, clock.start + clock.step * (clock.count - 1), clock.count - 1, [
    ...weakFluxes(clock, weak),
    ...data.reactions.flatMap((r) => nuclearFluxes(clock, r)),
    baryonColumn(clock),
  ]);
}

/** Table of n <-> p alone, for the time before the network starts. */
export function weakOnlyTable(clock: Clock, weak: WeakTable): FluxTable {
  return new FluxTable(clock.start, clock.start + clock.step * (clock.count - 1), clock.count - 1, [
    ...weakFluxes(clock, weak),
    baryonColumn(clock),
  ]);
}
