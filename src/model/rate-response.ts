/** Where in temperature a rate matters for each abundance, and what another rate would change to first order. */
import type { ReactionWeight } from "../network/adjoint.ts";
import { type AbundanceName, finalAbundances, HEAVY_NETWORKS } from "../nucleosynthesis/abundances.ts";
import { computeResponses } from "../nucleosynthesis/responses.ts";
import type { RunContext } from "../nucleosynthesis/run.ts";
import type { SolverCounts } from "../numerics/ode-stiff.ts";
import type { CosmologyParameters } from "../parameters/cosmology.ts";
import { type Model, scaleFactors } from "./prepare.ts";

/** Response of one abundance X to one rate. */
export interface RateResponse {
  readonly value: number;
  /** d ln X/d ln(rate at all T9): the integral of the density. */
  readonly sensitivity: number;
  /** d ln X/(d ln rate(T9) d ln T9) at the centres of the windows. */
  readonly density: readonly number[];
  /** T9 between which the middle 90 per cent of the absolute density lies [GK]; none where X does not respond. */
  readonly range?: readonly [number, number];
  /** d ln X for one standard deviation of this rate alone, f_u(T9). */
  readonly standardDeviation: number;
  /** For each change asked for: the integral of the density times ln(rate'/rate), i.e. d ln X to first order. */
  readonly firstOrder: readonly number[];
}

export interface RateResponses {
  /** Centres of the windows [GK], rising. */
  readonly T9: readonly number[];
  readonly abundances: Readonly<Partial<Record<AbundanceName, RateResponse>>>;
  readonly counts: SolverCounts;
}

/** Windows in ln T9 from 0.01 to 10; each is a bell of this half width, and they add up to 1 everywhere. */
export const WINDOW = Math.log(1000) / 92;
/** Centres of the windows in ln T9. */
const CENTRES = Array.from({ length: 93 }, (_, k) => Math.log(0.01) + k * WINDOW);
/** Share of the absolute density left out at either end of the range. */
const TAIL = 0.05;
/** Sensitivities below this are noise: no range is stated. */
const LEAST_SENSITIVITY = 1e-6;

/** cos^2 bell around a centre; the first and last window reach to the ends. @returns value and slope in ln T9 */
export function windowAt(k: number, lnT9: number): { value: number; slope: number } {
  const u = (lnT9 - CENTRES[k]) / WINDOW;
  if ((k === 0 && u < 0) || (k === CENTRES.length - 1 && u > 0)) return { value: 1, slope: 0 };
  if (Math.abs(u) >= 1) return { value: 0, slope: 0 };
  const angle = (Math.PI / 2) * u;
  return { value: Math.cos(angle) ** 2, slope: (-Math.PI / 2) * (Math.sin(2 * angle) / WINDOW) };
}

/** A function of ln T9 on both fluxes of one reaction. The table runs in s = -ln T9. */
function weightOf(reaction: number, at: (lnT9: number) => { value: number; slope: number }): ReactionWeight {
  const [forward, reverse] = [2 * reaction, 2 * reaction + 1];
  return {
    load(s, value, slope) {
      value.fill(0);
      slope.fill(0);
      const weight = at(-s);
      value[forward] = value[reverse] = weight.value;
      slope[forward] = slope[reverse] = -weight.slope;
    },
  };
}

/** T9 between which the middle of the absolute density lies, linear within the windows. */
function middleRange(density: readonly number[]): readonly [number, number] {
  const size = density.map(Math.abs);
  const whole = size.reduce((a, b) => a + b, 0);
  const quantile = (share: number) => {
    let sum = 0;
    for (let k = 0; k < size.length; k++) {
      if (sum + size[k] >= share * whole) {
        const inside = size[k] > 0 ? (share * whole - sum) / size[k] : 0;
        return Math.exp(CENTRES[k] + (inside - 0.5) * WINDOW);
      }
      sum += size[k];
    }
    return Math.exp(CENTRES[CENTRES.length - 1]);
  };
  return [quantile(TAIL), quantile(1 - TAIL)];
}

/** ln(rate'/rate) of a change of the rate, and its slope, as functions of ln T9. */
export type LnChange = (lnT9: number) => { readonly value: number; readonly slope: number };

/**
 * Responses of all abundances to one rate, in both directions together, from one run and its adjoint.
 * @param reaction id of a reaction of the network
 * @param changes of the rate whose first-order effects are wanted
 * @throws {RangeError} if the network does not hold the reaction
 * @throws {CalculationError} if the integration fails
 */
export function rateResponses(
  model: Model,
  p: CosmologyParameters,
  reaction: string,
  changes: readonly LnChange[] = [],
): RateResponses {
  const context: RunContext = model.context(p);
  const r = context.data.reactions.findIndex(({ id }) => id === reaction) + 1;
  if (r === 0) throw new RangeError(`${reaction}: not in network ${context.data.name}`);
  const heavy = HEAVY_NETWORKS.includes(context.data.name);
  const quantities = (Y: Float64Array) => Object.values(finalAbundances(context.data.nuclides, Y, heavy));
  const names = Object.keys(
    finalAbundances(context.data.nuclides, new Float64Array(context.data.nuclides.length), heavy),
  ) as AbundanceName[];
  const factors = scaleFactors(context.data, p.scales, model.library);
  const inputs = { eta10: p.eta10, tauN: p.tauN, factors, tolerance: p.tolerance };
  const windows = CENTRES.map((_, k) => weightOf(r, (lnT9) => windowAt(k, lnT9)));
  const { values, lnRate, variation, further, counts } = computeResponses(context, inputs, quantities, [
    ...windows,
    ...changes.map((change) => weightOf(r, change)),
  ]);
  const abundances = Object.fromEntries(
    names.flatMap((name, x) => {
      if (!(values[x] > 0)) return [];
      const density = Array.from(further[x].subarray(0, windows.length), (each) => each / WINDOW);
      const response: RateResponse = {
        value: values[x],
        sensitivity: lnRate[x][r],
        density,
        ...(Math.abs(lnRate[x][r]) > LEAST_SENSITIVITY ? { range: middleRange(density) } : {}),
        standardDeviation: variation[x][r],
        firstOrder: Array.from(further[x].subarray(windows.length)),
      };
      return [[name, response]];
    }),
  );
  return { T9: CENTRES.map(Math.exp), abundances, counts };
}
