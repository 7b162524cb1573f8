/** The error budget of one cosmology: sensitivities of every abundance, and the share of each source in its variance. */
import { NEUTRON_MEAN_LIFE } from "../constants/particle.ts";
import type { AbundanceName } from "../nucleosynthesis/abundances.ts";
import { WEAK_REACTION } from "../nucleosynthesis/network-data.ts";
import { addCounts, type RunContext, type RunInputs } from "../nucleosynthesis/run.ts";
import type { SolverCounts } from "../numerics/ode-stiff.ts";
import { type CosmologyParameters, DEFAULTS, RANGES } from "../parameters/cosmology.ts";
import { type CentralStep, centralSensitivities, relativeStep } from "../uncertainty/sensitivity.ts";
import { largeErrorWarnings, linearErrors } from "./linear-errors.ts";
import { applyVariations, type Estimate, errorSources, type Model, reported, scaleFactors } from "./prepare.ts";

/** Share by which G, amount by which N_eff is moved to either side: these two change the background. */
export const SENSITIVITY_STEPS = { G: 0.02, nEff: 0.06 } as const;
/** Thermal neutrino species at which the sensitivity to N is stated: d ln X/d ln N = 3 d ln X/d(deltaNEff). */
export const SPECIES = 3;

/** Where the size of an error comes from; `given`: by the user. */
export type UncertaintyBasis = "published" | "assumed" | "from memory" | "given";

/** One independent source of error. */
export interface ErrorSource {
  /** `tauN` (which sets the n <-> p rates), the id of a reaction, or `omegaB` where it was given with an error. */
  readonly name: string;
  readonly basis: UncertaintyBasis;
  /** The paper or collection that the recommended value comes from. */
  readonly citation: string;
  readonly evaluation?: string;
}

/** Quantities that are 0 (a nuclide that the network does not make) are left out. */
export interface ErrorBudget {
  readonly abundances: Readonly<Partial<Record<AbundanceName, Required<Estimate>>>>;
  /** sensitivities[abundance][omegaB | tauN | nEff | G | n_p | reaction] = d ln X/d ln p. */
  readonly sensitivities: Readonly<Record<string, Readonly<Record<string, number>>>>;
  /** variance[abundance][source]: share of the variance of ln X; the shares of an abundance add to 1. */
  readonly variance: Readonly<Record<string, Readonly<Record<string, number>>>>;
  readonly correlation: { readonly order: readonly string[]; readonly matrix: readonly (readonly number[])[] };
  readonly sources: readonly ErrorSource[];
  readonly nEffComputed: number;
  readonly counts: SolverCounts;
  readonly warnings: readonly string[];
}

/** The sources of error in the order of their variations: tau_n, each reaction of the network, omega_b if it has one. */
export function listErrorSources(context: RunContext, p: CosmologyParameters): ErrorSource[] {
  const ownLife = p.tauN !== DEFAULTS.tauN || p.tauNSigma !== DEFAULTS.tauNSigma;
  return [
    { name: "tauN", basis: ownLife ? "given" : "published", citation: ownLife ? "given" : NEUTRON_MEAN_LIFE.source },
    ...context.data.reactions.map(
      ({ id, selected: { evaluationName, rateTable } }): ErrorSource => ({
        name: id,
        basis: rateTable.uncertaintyBasis,
        citation: rateTable.citation,
        evaluation: evaluationName,
      }),
    ),
    ...(p.omegaBSigma > 0 ? [{ name: "omegaB", basis: "given", citation: "given" } as const] : []),
  ];
}

function historySteps(p: CosmologyParameters): CentralStep<"nEff" | "G">[] {
  const up = Math.min(p.deltaNEff + SENSITIVITY_STEPS.nEff, RANGES.deltaNEff.max);
  const down = Math.max(p.deltaNEff - SENSITIVITY_STEPS.nEff, RANGES.deltaNEff.min);
  return [{ name: "nEff", up, down, lnDistance: (up - down) / SPECIES }, relativeStep("G", 1, SENSITIVITY_STEPS.G)];
}

/**
 * Error budget by linear propagation. Sensitivities d ln X/d ln p: omega_b (as eta), tau_n and each rate (in both
 * directions at all T, n_p too) by the adjoint of one run; those that need another thermal history by central
 * differences: G (at fixed eta) +-2 %, N_eff +-0.06 as 3 d ln X/d(deltaNEff). Variances by the response to one standard
 * deviation of each source, f_u(T9)^p for rates; see {@link linearErrors}.
 * @param progress told how many of the runs are done
 * @throws {InputError | CalculationError}
 */
export function computeErrorBudget(
  model: Model,
  p: CosmologyParameters,
  progress?: (done: number, total: number) => void,
): ErrorBudget {
  const context = model.context(p);
  const factors = scaleFactors(context.data, p.scales, model.library);
  const inputs: RunInputs = { eta10: p.eta10, tauN: p.tauN, factors, tolerance: p.tolerance };
  const central = model.evaluate(context, inputs);
  let { counts } = central;
  const linear = linearErrors(
    context,
    inputs,
    p,
    central.values,
    (Y) => reported(context, Y),
    (s, sign) => {
      const variations = new Float64Array(errorSources(context, p));
      variations[s] = sign;
      return model.evaluate(context, applyVariations(context, inputs, p, variations));
    },
    progress,
  );
  counts = addCounts(counts, linear.counts);
  const [byNEff, byG] = centralSensitivities(historySteps(p), (name, value) => {
    const other = name === "G" ? model.context(p, value) : model.context({ ...p, deltaNEff: value });
    const run = model.evaluate(other, inputs);
    counts = addCounts(counts, run.counts);
    return run.values;
  });

  const { lnEta, lnTau, lnRate } = linear.responses;
  const rates = [WEAK_REACTION, ...context.data.reactions.map((r) => r.id)];
  const sensitivities = (x: number) => ({
    omegaB: lnEta[x],
    tauN: lnTau[x],
    nEff: byNEff[x],
    G: byG[x],
    ...Object.fromEntries(rates.map((id, r) => [id, lnRate[x][r]])),
  });
  const X = central.names.length;
  const list = listErrorSources(context, p);
  const shares = (x: number) => {
    const whole = linear.covariance[x * X + x];
    return Object.fromEntries(list.map(({ name }, s) => [name, whole > 0 ? linear.response[s][x] ** 2 / whole : 0]));
  };
  const kept = central.names.flatMap((_, x) => (central.values[x] > 0 ? [x] : []));
  const byName = <T>(value: (x: number) => T): Record<string, T> =>
    Object.fromEntries(kept.map((x) => [central.names[x], value(x)]));
  return {
    abundances: byName((x) => ({ value: central.values[x], sigma: linear.sigma[x] })),
    sensitivities: byName(sensitivities),
    variance: byName(shares),
    correlation: {
      order: kept.map((x) => central.names[x]),
      matrix: kept.map((x) => kept.map((y) => linear.correlation[x][y])),
    },
    sources: list,
    nEffComputed: context.history.nEffComputed,
    counts,
    warnings: largeErrorWarnings(context, ["Yp", "dToH", "he3ToH", "li7ToH"], central.names, linear),
  };
}

/** Whether the size of an error is neither published nor given by the user. */
export function isAssumed(source: ErrorSource): boolean {
  return source.basis === "assumed" || source.basis === "from memory";
}

/** Sources of an abundance's error by falling share of its variance. @param abundance one that the budget holds */
export function sortedShares(
  { sources, variance }: Pick<ErrorBudget, "sources" | "variance">,
  abundance: string,
): { readonly source: ErrorSource; readonly share: number }[] {
  return sources
    .map((source) => ({ source, share: variance[abundance][source.name] }))
    .sort((a, b) => b.share - a.share);
}
