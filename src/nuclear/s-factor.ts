/** Thermonuclear rates from astrophysical S-factors: the Gamow integral, and narrow resonances in closed form. */
import { FINE_STRUCTURE, LIGHT_SPEED } from "../constants/codata.ts";
import { AVOGADRO_NUMBER, HBARC_MEV_CM, t9ToMeV } from "../constants/units.ts";
import { CalculationError, InputError, requirePositive } from "../numerics/check.ts";
import { hermite, intervalOf, notAKnotSlopes } from "../numerics/interpolate.ts";
import { integrateAdaptive, integrateGauss } from "../numerics/quadrature.ts";
import type { NuclideTable } from "./nuclide.ts";
import type { Reaction } from "./reaction.ts";

/** Two colliding nuclides. */
export interface Channel {
  /** Reduced mass, from nuclear masses [MeV/c2]. */
  readonly reducedMassMeV: number;
  /** E_G = 2 mu c^2 (pi alpha Z1 Z2)^2 [MeV]; 2 pi eta = sqrt(E_G/E). 0 for a neutron. */
  readonly gamowEnergyMeV: number;
}

/** S(E) = E sigma(E) exp(2 pi eta) in the centre of mass, as a function on a range; constant outside. */
export interface SFactor {
  /** S [MeV b] at E [MeV] >= 0. */
  value(E: number): number;
  /** Energies where S is not smooth or is known: integration panels end there [MeV], ascending. */
  readonly nodes: ArrayLike<number>;
}

/** A resonance much narrower than kT: centre-of-mass energy and strength omega gamma [MeV]. */
export interface NarrowResonance {
  readonly energyMeV: number;
  readonly strengthMeV: number;
}

/** One barn in cm2, by definition. */
const CM2_PER_BARN = 1e-24;
const LIGHT_SPEED_CM_S = LIGHT_SPEED.value * 100;
/** Relative accuracy asked of the Gamow integral. */
export const GAMOW_TOLERANCE = 1e-7;
/** The integrand is followed until it has fallen by exp(-40) below its peak. */
const DEEPEST = 40;

/**
 * Reduced mass and Gamow energy of a reaction with two reactants.
 * @throws {InputError} if there are not two, or a nuclide is not in the table
 */
export function channelOf(reaction: Reaction, nuclides: NuclideTable): Channel {
  if (reaction.reactants.length !== 2)
    throw new InputError(
      "s-factor",
      `${reaction.id}: an S-factor belongs to two reactants, here are ${reaction.reactants.length}`,
    );
  const [a, b] = reaction.reactants.map((id) => {
    const nuclide = nuclides.get(id);
    if (!nuclide) throw new InputError("nuclide", `unknown nuclide ${id}: not in nuclides.csv`);
    return nuclide;
  });
  const reducedMassMeV = (a.nuclearMassMeV * b.nuclearMassMeV) / (a.nuclearMassMeV + b.nuclearMassMeV);
  return { reducedMassMeV, gamowEnergyMeV: 2 * reducedMassMeV * (Math.PI * FINE_STRUCTURE.value * a.Z * b.Z) ** 2 };
}

/** How an S-factor table is read between its points. */
export type Interpolation = "S" | "ln S";

/**
 * S-factor through given points: cubic spline with not-a-knot ends of S in E (exact for cubic S), or of ln S where that
 * would not stay positive; constant below the first and above the last point.
 * @param E energies in the centre of mass [MeV], >= 0, increasing, at least four
 * @param S [MeV b], > 0
 * @param wanted the spline to use; by default that of S if it stays positive
 * @returns the S-factor, and which of the two splines it is
 * @throws {RangeError} for fewer than four points, energies not increasing, or S <= 0
 */
export function tabulatedSFactor(
  E: ArrayLike<number>,
  S: ArrayLike<number>,
  wanted: Interpolation = "S",
): SFactor & { readonly interpolation: Interpolation } {
  const n = E.length;
  if (n < 4 || S.length !== n) throw new RangeError(`an S-factor table needs at least four points, got ${n}`);
  for (let i = 0; i < n; i++) requirePositive("S", S[i], "MeV b");
  const x = Float64Array.from(E);
  const logarithm = wanted === "ln S";
  const y = Float64Array.from(S, logarithm ? Math.log : Number);
  const slope = notAKnotSlopes(x, y);
  const piece = (i: number, u: number) => hermite(u, x[i + 1] - x[i], y[i], slope[i], y[i + 1], slope[i + 1]);
  if (!logarithm)
    for (let i = 0; i < n - 1; i++)
      for (let u = 0; u < 1; u += 1 / 64) if (!(piece(i, u) > 0)) return tabulatedSFactor(E, S, "ln S");
  return {
    nodes: x,
    interpolation: wanted,
    value(energy) {
      if (energy <= x[0]) return S[0];
      if (energy >= x[n - 1]) return S[n - 1];
      const i = intervalOf(x, energy);
      const between = piece(i, (energy - x[i]) / (x[i + 1] - x[i]));
      return logarithm ? Math.exp(between) : between;
    },
  };
}

/** Peak, width and reach of exp(-E/kT - sqrt(E_G/E)). */
interface Window {
  readonly peak: number;
  readonly low: number;
  readonly high: number;
  /** Exponent at the peak, <= 0. */
  readonly top: number;
}

/**
 * Energies between which exp(-E/kT - sqrt(E_G/E)) is above exp(-40) of its maximum at E_0 = (sqrt(E_G) kT/2)^(2/3),
 * where the exponent is -3 E_0/kT. Without a barrier: 0 to 40 kT.
 */
function gamowWindow(kT: number, gamowEnergy: number): Window {
  const b = Math.sqrt(gamowEnergy);
  const peak = (0.5 * b * kT) ** (2 / 3);
  const top = (-3 * peak) / kT;
  if (peak === 0) return { peak, low: 0, high: DEEPEST * kT, top };
  const depth = (E: number) => -E / kT - b / Math.sqrt(E) - top;
  let high = peak + kT;
  while (depth(high) > -DEEPEST) high += Math.max(kT, 0.1 * high);
  let low = peak;
  while (depth(low) > -DEEPEST) low *= 0.9;
  return { peak, low, high, top };
}

/** Energy range that a rate at T9 samples: where the integrand with constant S exceeds exp(-12.5) (5 sigma) of its peak [MeV]. */
export function gamowRange(channel: Channel, T9: number): readonly [number, number] {
  const kT = t9ToMeV(T9);
  const { peak } = gamowWindow(kT, channel.gamowEnergyMeV);
  if (peak === 0) return [0, 12.5 * kT];
  const halfWidth = 5 * Math.sqrt((2 / 3) * peak * kT);
  return [Math.max(0, peak - halfWidth), peak + halfWidth];
}

/**
 * ln N_A<sigma v> of a non-resonant or broadly resonant reaction:
 * N_A<sigma v> = N_A sqrt(8/(pi mu)) (kT)^(-3/2) int_0^inf S(E) exp(-E/kT - sqrt(E_G/E)) dE,
 * by adaptive Gauss-Legendre quadrature between the nodes of S, the peak's exponent taken out so that nothing underflows.
 *
 * @param T9 [GK], > 0
 * @param range energies that count [MeV]; all if left out
 * @returns ln of the rate [cm3/(mol s)], without 1/(1 + delta); relative accuracy 1e-7 for the S given, unless S rises by
 *   more than 1e10 outside the window where exp(-E/kT - sqrt(E_G/E)) exceeds exp(-40) of its peak
 * @throws {RangeError} if T9 is not positive
 * @throws {CalculationError} if the integral does not converge or S is not positive somewhere in the window
 * @see Clayton 1983, Principles of Stellar Evolution and Nucleosynthesis, sec. 4-3
 */
export function lnGamowRate(
  s: SFactor,
  channel: Channel,
  T9: number,
  range: readonly [number, number] = [0, Number.POSITIVE_INFINITY],
): number {
  requirePositive("T9", T9, "GK");
  const kT = t9ToMeV(T9);
  const b = Math.sqrt(channel.gamowEnergyMeV);
  const { peak, top, ...window } = gamowWindow(kT, channel.gamowEnergyMeV);
  const low = Math.max(window.low, range[0]);
  const high = Math.min(window.high, range[1]);
  if (!(high > low)) return Number.NEGATIVE_INFINITY;
  const integrand = (E: number) => s.value(E) * Math.exp(-E / kT - (b === 0 ? 0 : b / Math.sqrt(E)) - top);
  const edges = panelEdges(s.nodes, low, high, peak, kT);
  let estimate = 0;
  for (let i = 1; i < edges.length; i++) estimate += integrateGauss(integrand, edges[i - 1], edges[i], 16);
  const atol = (GAMOW_TOLERANCE * Math.abs(estimate)) / edges.length;
  let sum = 0;
  for (let i = 1; i < edges.length; i++)
    sum += integrateAdaptive(integrand, edges[i - 1], edges[i], GAMOW_TOLERANCE, atol).value;
  if (!(sum > 0))
    throw new CalculationError("s-factor", `Gamow integral at T9 = ${T9}: S is not positive in the window`);
  const prefactor =
    AVOGADRO_NUMBER * LIGHT_SPEED_CM_S * Math.sqrt(8 / (Math.PI * channel.reducedMassMeV)) * CM2_PER_BARN;
  return Math.log(prefactor) - 1.5 * Math.log(kT) + Math.log(sum) + top;
}

function panelEdges(nodes: ArrayLike<number>, low: number, high: number, peak: number, kT: number): number[] {
  const width = Math.max(kT, Math.sqrt(peak * kT));
  const edges = new Set([low, high]);
  for (let E = low + width; E < high; E += width) edges.add(E);
  if (peak > low && peak < high) edges.add(peak);
  for (let i = 0; i < nodes.length; i++) if (nodes[i] > low && nodes[i] < high) edges.add(nodes[i]);
  return [...edges].sort((x, y) => x - y);
}

/**
 * ln N_A<sigma v> of narrow resonances, in closed form:
 * N_A<sigma v> = N_A (2 pi/(mu kT))^(3/2) hbar^2 sum_i (omega gamma)_i exp(-E_i/kT).
 * @param T9 [GK], > 0
 * @returns ln of the rate [cm3/(mol s)]; -Infinity without resonances
 * @throws {RangeError} if T9, an energy or a strength is not positive
 * @see Clayton 1983, sec. 4-5; numerically 1.5395e11 (A T9)^(-3/2) omega gamma/MeV exp(-11.605 E/T9), A in u
 */
export function lnResonanceRate(resonances: readonly NarrowResonance[], channel: Channel, T9: number): number {
  requirePositive("T9", T9, "GK");
  const kT = t9ToMeV(T9);
  const exponents = resonances.map(({ energyMeV, strengthMeV }) => {
    requirePositive("resonance energy", energyMeV, "MeV");
    requirePositive("omega gamma", strengthMeV, "MeV");
    return Math.log(strengthMeV) - energyMeV / kT;
  });
  if (exponents.length === 0) return Number.NEGATIVE_INFINITY;
  const largest = Math.max(...exponents);
  const sum = exponents.reduce((total, each) => total + Math.exp(each - largest), 0);
  const volume = (2 * Math.PI * HBARC_MEV_CM ** 2) / (channel.reducedMassMeV * kT); // (hbar c)^2/(mu c^2 kT) [cm2]
  // (2 pi/(mu kT))^(3/2) hbar^2 = volume^(3/2) c/(hbar c), for omega gamma in MeV [cm3/s per MeV]
  return (
    Math.log(AVOGADRO_NUMBER * (LIGHT_SPEED_CM_S / HBARC_MEV_CM)) + 1.5 * Math.log(volume) + largest + Math.log(sum)
  );
}
