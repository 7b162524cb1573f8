/** Tabulates the n <-> p rates over temperature, once for each set of switches, degeneracy and neutrino history. */
import { t9ToMeV } from "../constants/units.ts";
import { hermite, intervalOf, notAKnotSlopes } from "../numerics/interpolate.ts";
import { WEAK_INPUTS, type WeakInputs, type WeakOptions } from "./inputs.ts";
import { checkState, type WeakRates, weakKernel } from "./rates.ts";

/** ln of the rates in units of 1/tau_n against s = -ln T9, with slopes for cubic Hermite interpolation. */
export interface WeakTable {
  /** s = -ln(T9), ascending: time runs with s. */
  readonly s: Float64Array;
  /** ln(Gamma(n -> p) tau_n). */
  readonly lnNToP: Float64Array;
  /** ln(Gamma(p -> n) tau_n); falls to -Q/T with no floor, so exp() of it is 0 below 0.0018 MeV. */
  readonly lnPToN: Float64Array;
  readonly lnNToPSlope: Float64Array;
  readonly lnPToNSlope: Float64Array;
}

/** Equally spaced values of s from start to end. */
export interface UniformGrid {
  readonly start: number;
  readonly end: number;
  readonly count: number;
}

/** Spacing in s with which interpolation keeps both rates to 5e-7; the error falls with its fourth power. */
export const WEAK_TABLE_SPACING = 0.04;

function gridOf(s: Float64Array | UniformGrid): Float64Array {
  if (s instanceof Float64Array) return s;
  const { start, end, count } = s;
  if (!(Number.isInteger(count) && count >= 2 && end > start))
    throw new RangeError(`grid from ${start} to ${end} with ${count} points: must ascend and have at least two points`);
  return Float64Array.from({ length: count }, (_, i) => start + ((end - start) * i) / (count - 1));
}

/**
 * Table of both rates. tau_n does not enter: it rescales.
 *
 * @param s s = -ln T9, ascending: values, or start, end and count
 * @param TnueOverT electron-neutrino to photon temperature at s
 * @param xiE degeneracy mu/T of nu_e
 * @param options switches of the corrections
 * @returns at {@link WEAK_TABLE_SPACING} interpolation is good to 5e-7 wherever a rate exceeds 1e-25/tau_n (the error
 *   of lnPToN, whose slope is Q/T, grows below)
 * @throws {RangeError} if s does not ascend or TnueOverT is not positive and finite there
 */
export function tabulateWeakRates(
  s: Float64Array | UniformGrid,
  TnueOverT: (s: number) => number,
  xiE: number,
  options: WeakOptions,
  inputs: WeakInputs = WEAK_INPUTS,
): WeakTable {
  const grid = gridOf(s);
  const lnNToP = new Float64Array(grid.length);
  const lnPToN = new Float64Array(grid.length);
  const kernel = weakKernel(options, inputs);
  for (let i = 0; i < grid.length; i++) {
    const TMeV = t9ToMeV(Math.exp(-grid[i]));
    const TnuMeV = TMeV * TnueOverT(grid[i]);
    checkState(TMeV, TnuMeV, xiE);
    const rates = kernel.logRates(TMeV, TnuMeV, xiE);
    lnNToP[i] = rates.lnNToP;
    lnPToN[i] = rates.lnPToN;
  }
  return {
    s: grid,
    lnNToP,
    lnPToN,
    lnNToPSlope: notAKnotSlopes(grid, lnNToP),
    lnPToNSlope: notAKnotSlopes(grid, lnPToN),
  };
}

/**
 * Rates [1/tau_n] at s by cubic Hermite interpolation of their logarithms.
 * @param s -ln T9; outside the table the end piece is continued
 */
export function interpolateWeakRates(table: WeakTable, s: number): WeakRates {
  const { s: grid, lnNToP, lnPToN, lnNToPSlope, lnPToNSlope } = table;
  const i = intervalOf(grid, s);
  const h = grid[i + 1] - grid[i];
  const u = (s - grid[i]) / h;
  return {
    nToP: Math.exp(hermite(u, h, lnNToP[i], lnNToPSlope[i], lnNToP[i + 1], lnNToPSlope[i + 1])),
    pToN: Math.exp(hermite(u, h, lnPToN[i], lnPToNSlope[i], lnPToN[i + 1], lnPToNSlope[i + 1])),
  };
}
