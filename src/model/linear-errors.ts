/** Linear theory errors of the abundances: derivatives by the adjoint of one run, differences where they are not small. */
import { computeResponses, type Responses } from "../nucleosynthesis/responses.ts";
import { addCounts, type RunContext, type RunInputs } from "../nucleosynthesis/run.ts";
import { lnUncertainty } from "../nucleosynthesis/vary.ts";
import type { SolverCounts } from "../numerics/ode-stiff.ts";
import type { CosmologyParameters } from "../parameters/cosmology.ts";
import { type LinearPropagation, propagateFrom } from "../uncertainty/propagation.ts";

/**
 * ln f_u above which one standard deviation is no small change (f_u = 1.65): such a rate is moved to p = +1 and -1
 * instead of taking the derivative at p = 0.
 */
export const LARGEST_SMALL_LN_F = 0.5;

/** Integration tolerance of the derivatives: they need no more than this. */
const TIGHTEST = 2e-5;

/**
 * d ln X/dp of every standardised source: tau_n, each reaction, omega_b last where it has a sigma.
 * @param vary quantities with the given source at p = +1 or -1, all others at 0
 * @param quantities of the final state
 * @param progress told how many of the sources that need runs are done
 */
export function linearErrors(
  context: RunContext,
  inputs: RunInputs,
  p: CosmologyParameters,
  central: readonly number[],
  quantities: (Y: Float64Array) => readonly number[],
  vary: (source: number, sign: 1 | -1) => { values: readonly number[]; counts: SolverCounts },
  progress?: (done: number, total: number) => void,
): LinearPropagation & { readonly counts: SolverCounts; readonly responses: Responses } {
  const responses = computeResponses(
    context,
    { ...inputs, tolerance: Math.max(inputs.tolerance, TIGHTEST) },
    quantities,
  );
  let { counts } = responses;
  const reactions = context.data.reactions;
  const large = reactions.map((reaction, r) =>
    lnUncertainty(context.table, reaction, r).value.some((x) => x > LARGEST_SMALL_LN_F),
  );
  const total = large.filter((x) => x).length + 1;
  let done = 1;
  progress?.(done, total);
  const rows = [
    responses.values.map((_, x) => (responses.lnTau[x] * p.tauNSigma) / p.tauN),
    ...reactions.map((_, r) => {
      if (!large[r]) return responses.values.map((__, x) => responses.variation[x][r + 1]);
      const up = vary(r + 1, 1);
      const down = vary(r + 1, -1);
      counts = addCounts(counts, addCounts(up.counts, down.counts));
      progress?.(++done, total);
      return central.map((_, x) =>
        up.values[x] > 0 && down.values[x] > 0 ? (Math.log(up.values[x]) - Math.log(down.values[x])) / 2 : 0,
      );
    }),
    ...(p.omegaBSigma > 0 ? [responses.values.map((_, x) => (responses.lnEta[x] * p.omegaBSigma) / p.omegaB)] : []),
  ];
  return { ...propagateFrom(central, rows), counts, responses };
}

/** Share of a variance, carried by rates whose error is no small change, above which the linear error is not to be trusted. */
const LARGE_SHARE = 0.1;

/**
 * Warns of each quantity much of whose error comes from rates known to no better than a factor of 1.65: the error is then
 * skew, and linear propagation misses its tail.
 * @param names  quantities to look at; @param order names of the quantities of `linear`
 */
export function largeErrorWarnings(
  context: RunContext,
  names: readonly string[],
  order: readonly string[],
  { response, covariance }: Pick<LinearPropagation, "response" | "covariance">,
): string[] {
  return names.flatMap((name) => {
    const x = order.indexOf(name);
    const whole = covariance[x * order.length + x];
    if (x < 0 || !(whole > 0)) return [];
    const large = context.data.reactions
      .map(({ id }, r) => ({
        id,
        largest: Math.max(...lnUncertainty(context.table, context.data.reactions[r], r).value),
        share: response[r + 1][x] ** 2 / whole,
      }))
      .filter(({ largest }) => largest > LARGEST_SMALL_LN_F)
      .sort((a, b) => b.share - a.share);
    const share = large.reduce((sum, each) => sum + each.share, 0);
    if (share < LARGE_SHARE) return [];
    const { id, largest } = large[0];
    return [
      `${name}: ${(100 * share).toFixed(0)} % of its variance is of rates known to no better than a factor, first ${id} (a factor of ${Math.exp(largest).toPrecision(2)}); linear errors miss the tail, abundances --samples N shows it`,
    ];
  });
}
