/** A complete rate file from an S-factor table: rates on a grid, factor uncertainties, the range the data cover. */
import { InputError } from "../numerics/check.ts";
import type { NuclideTable } from "./nuclide.ts";
import type { UNCERTAINTY_BASES } from "./parse-rate-file.ts";
import { qValueMeV, type Reaction } from "./reaction.ts";
import { type Channel, channelOf, lnGamowRate, lnResonanceRate, tabulatedSFactor } from "./s-factor.ts";
import type { SFactorData } from "./s-factor-file.ts";
import { formatRateFile } from "./write-rate-file.ts";

/** Temperatures of the usual 60-point tables [GK]. */
export const STANDARD_T9: readonly number[] = [
  ...[0.001, 0.002, 0.003, 0.004, 0.005, 0.006, 0.007, 0.008, 0.009, 0.01, 0.011, 0.012, 0.013, 0.014, 0.015, 0.016],
  ...[0.018, 0.02, 0.025, 0.03, 0.04, 0.05, 0.06, 0.07, 0.08, 0.09, 0.1, 0.11, 0.12, 0.13, 0.14, 0.15, 0.16, 0.18, 0.2],
  ...[0.25, 0.3, 0.35, 0.4, 0.45, 0.5, 0.6, 0.7, 0.8, 0.9, 1, 1.25, 1.5, 1.75, 2, 2.5, 3, 3.5, 4, 5, 6, 7, 8, 9, 10],
];
/** Share of the Gamow integral outside the energies of the table up to which a temperature counts as covered. */
export const LARGEST_OUTSIDE = 0.01;
/** Rates below this are left out at the low end of a table [cm3/(mol s)]. */
const SMALLEST_RATE = 1e-100;

/** A rate at one temperature, from an S-factor table. */
export interface RatePoint {
  /** [GK] */
  readonly T9: number;
  /** [cm3/(mol s)] */
  readonly rate: number;
  /** exp(sigma): rate with S + sigma over rate with S; 1 if the table has no errors. */
  readonly factorUncertainty: number;
  /** Share of the rate that comes from energies outside the table, where S is held constant. */
  readonly outside: number;
  /** Relative difference if ln S instead of S is interpolated: what sparse points leave open; 0 where only ln S is possible. */
  readonly interpolation: number;
}

/** ln of exp(a) + exp(b). */
function lnSum(a: number, b: number): number {
  const largest = Math.max(a, b);
  return largest === Number.NEGATIVE_INFINITY
    ? largest
    : largest + Math.log(Math.exp(a - largest) + Math.exp(b - largest));
}

/**
 * Thermonuclear rate of an S-factor table on a grid of temperatures: Gamow integral of the table (held constant outside)
 * plus its narrow resonances. Errors of S count as fully correlated, as a common normalisation would be: no cancellation
 * between points. Resonance strengths are taken as exact.
 * @param grid temperatures [GK], increasing
 * @returns one point per temperature; the integral is accurate to 1e-7 for the interpolated S
 */
export function ratesFromSFactor(
  data: SFactorData,
  channel: Channel,
  grid: readonly number[] = STANDARD_T9,
): RatePoint[] {
  const { E, S, sigma, resonances } = data;
  const table = tabulatedSFactor(E, S);
  const other = tabulatedSFactor(E, S, table.interpolation === "S" ? "ln S" : "S");
  const raised =
    sigma &&
    tabulatedSFactor(
      E,
      S.map((each, i) => each + sigma[i]),
      table.interpolation,
    );
  return grid.map((T9) => {
    const narrow = lnResonanceRate(resonances, channel, T9);
    const smooth = lnGamowRate(table, channel, T9);
    const total = lnSum(smooth, narrow);
    const inside = Math.exp(lnGamowRate(table, channel, T9, [E[0], E[E.length - 1]]) - smooth);
    const factor = raised ? Math.exp(lnSum(lnGamowRate(raised, channel, T9), narrow) - total) : 1;
    return {
      T9,
      rate: Math.exp(total),
      factorUncertainty: Math.max(1, factor),
      outside: Math.max(0, 1 - inside) * Math.exp(smooth - total),
      interpolation: Math.abs(Math.expm1(lnSum(lnGamowRate(other, channel, T9), narrow) - total)),
    };
  });
}

/** What a user says about the new file. */
export interface MakeRateRequest {
  readonly reaction: Reaction;
  readonly citation: string;
  readonly doi?: string;
  /** Name of the S-factor file, for the origin line. */
  readonly from: string;
  /** [GK]; if left out, where the table's energies cover the Gamow integral to 1 per cent. */
  readonly validT9?: readonly [number, number];
  /** Basis of the uncertainty if the table has errors. */
  readonly uncertaintyBasis?: (typeof UNCERTAINTY_BASES)[number];
  readonly basis?: "experiment" | "evaluation" | "theory" | "fit" | "estimate";
  readonly note?: string;
  /** Date and hand, e.g. `2027-01-31; emberline rates make`. */
  readonly entered: string;
}

/**
 * A rate file of our format from an S-factor table.
 * @returns the text and its points
 * @throws {InputError} if the energies cover no temperature and no range is given, or a text cannot stand in the header
 */
export function makeRateFile(data: SFactorData, request: MakeRateRequest, nuclides: NuclideTable) {
  const channel = channelOf(request.reaction, nuclides);
  const points = ratesFromSFactor(data, channel).filter(({ rate }) => rate > SMALLEST_RATE);
  const covered = points.filter(({ outside }) => outside <= LARGEST_OUTSIDE);
  if (!request.validT9 && covered.length < 2)
    throw new InputError(
      "s-factor",
      `${request.from}: energies ${data.E[0]} to ${data.E[data.E.length - 1]} MeV cover the Gamow window at no temperature; extend the table or give the range of validity`,
    );
  const [low, high] = request.validT9 ?? [covered[0].T9, covered[covered.length - 1].T9];
  const errors = data.sigma !== undefined;
  const assumed = "ASSUMED uncertainty; the S-factor table has no errors and f_u = 1 stands for none known";
  const text = formatRateFile({
    reaction: request.reaction.equation,
    kind: "table",
    citation: request.citation,
    doi: request.doi,
    origin:
      `Gamow integral of the S-factor table ${request.from}, ${data.E.length} points from ${data.E[0]} to ${data.E[data.E.length - 1]} MeV, ` +
      `cubic spline of ${tabulatedSFactor(data.E, data.S).interpolation}, constant outside${data.resonances.length > 0 ? `, plus ${data.resonances.length} narrow resonances` : ""}; ` +
      "computed by src/nuclear/make-rate.ts",
    basis: request.basis ?? "evaluation",
    uncertaintyBasis: errors ? (request.uncertaintyBasis ?? "published") : "assumed",
    qValueKeV: 1000 * qValueMeV(request.reaction, nuclides),
    validT9: [String(low), String(high)],
    note: [...(errors ? [] : [assumed]), ...(request.note ? [request.note] : [])].join("; ") || undefined,
    entered: request.entered,
    rows: points.map(({ T9, rate, factorUncertainty }) => [
      String(T9),
      rate.toExponential(6),
      factorUncertainty.toFixed(4),
    ]),
  });
  return { text, points };
}
