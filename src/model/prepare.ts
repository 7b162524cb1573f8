/** A prepared model: keeps background, weak rates and compiled network, and recomputes only what a changed key touches. */
import { type BackgroundOptions, computeThermalHistory, type ThermalHistory } from "../background/history.ts";
import { NEWTON_G_CGS } from "../constants/units.ts";
import type { RateLibrary, SelectedReaction } from "../nuclear/library.ts";
import { selectNetwork } from "../nuclear/library.ts";
import { resolveReaction } from "../nuclear/reaction-name.ts";
import {
  ABUNDANCE_NAMES,
  type AbundanceName,
  finalAbundances,
  HEAVY_ABUNDANCE_NAMES,
  HEAVY_NETWORKS,
  ORDER_OF_MAGNITUDE_REASON,
} from "../nucleosynthesis/abundances.ts";
import { assembleNetwork, type NetworkData, WEAK_REACTION } from "../nucleosynthesis/network-data.ts";
import {
  addCounts,
  prepareRun,
  type RunContext,
  type RunInputs,
  runNetwork,
  type Stepping,
} from "../nucleosynthesis/run.ts";
import { splitVariations } from "../nucleosynthesis/vary.ts";
import { InputError } from "../numerics/check.ts";
import { type ExpressionFunction, trivialExpression } from "../numerics/expression.ts";
import { notAKnotSpline } from "../numerics/interpolate.ts";
import type { SolverCounts } from "../numerics/ode-stiff.ts";
import {
  type CosmologyParameters,
  checkKeys,
  DEFAULTS,
  type Keys,
  NUCLEOSYNTHESIS_CORRECTIONS,
  resolveParameters,
} from "../parameters/cosmology.ts";
import { RECOMBINATION_SWITCH_NAMES } from "../recombination/switches.ts";
import { planSamples, type SamplePlan } from "../uncertainty/monte-carlo.ts";
import type { LinearPropagation } from "../uncertainty/propagation.ts";
import type { WeakOptions } from "../weak/inputs.ts";
import { tabulateWeakRates, WEAK_TABLE_SPACING, type WeakTable } from "../weak/table.ts";
import { storedHistory, storedWeakTable } from "./default-tables.ts";
import { largeErrorWarnings, linearErrors } from "./linear-errors.ts";
import { computeSampleBlock, type SampleBlock, type SamplingReport, sampleBlocks, sampledErrors } from "./sampling.ts";

export interface Estimate {
  readonly value: number;
  readonly sigma?: number;
}

import {
  type RecombinationResults,
  type RecombinationRun,
  recombinationResults,
  runRecombination,
} from "./recombination.ts";

export interface AbundanceRun {
  readonly abundances: Partial<Record<AbundanceName, Estimate>>;
  readonly nEffComputed: number;
  readonly correlation?: { readonly order: readonly string[]; readonly matrix: readonly (readonly number[])[] };
  /** With linear errors: share of each abundance's variance due to rates whose uncertainty is not a published one. */
  readonly assumedVarianceShare?: Readonly<Partial<Record<AbundanceName, number>>>;
  readonly quantiles?: Readonly<Record<string, Readonly<Record<string, number>>>>;
  /** With samples: their number, mean, and the error of each sigma. */
  readonly sampling?: SamplingReport;
  /** Counts of all runs; `stepping` of the central one. */
  readonly solver: SolverCounts & { readonly tolerance: number; readonly stepping: Stepping };
  readonly warnings: readonly string[];
}

/** Expansion factor on H(T): T [K], TMeV, t [s], H [1/s] before the factor. */
export const EXPANSION_VARIABLES = ["T", "TMeV", "t", "H"] as const;

/** Compiles an expansion expression; given to the model so that the expression parser is loaded only when needed. */
export type ExpressionCompiler = (text: string) => ExpressionFunction;

export interface Model {
  /** Parameters of the model with some keys replaced, completed and checked. */
  parameters(overrides?: Keys): CosmologyParameters;
  /** Abundances with the errors asked for by `errors`. Synchronous; throws InputError or CalculationError. */
  abundances(
    overrides?: Keys,
    progress?: (done: number, total: number) => void,
    /** All blocks of samples, where they were computed elsewhere. */
    sampled?: readonly SampleBlock[],
  ): AbundanceRun;
  /** By what samples of these keys are drawn. */
  samplePlan(overrides?: Keys): SamplePlan;
  /** Samples `from` to `to` - 1 of a plan; the same numbers wherever they are computed. */
  sampleBlock(overrides: Keys | undefined, plan: SamplePlan, from: number, to: number): SampleBlock;
  /** Last scattering and baryon drag; helium from the nucleosynthesis run of the same keys unless ypMass is given. */
  recombination(overrides?: Keys): RecombinationResults;
  /** The same with the history behind it. */
  recombinationRun(overrides?: Keys): RecombinationRun;
  /** The run context (history, flux tables) for these keys, for commands that look inside. */
  context(parameters: CosmologyParameters, gravity?: number): RunContext;
  /** Rates in use for these keys. */
  selection(parameters: CosmologyParameters): readonly SelectedReaction[];
  /** Names and values of the reported abundances for inputs of a run. */
  evaluate(
    context: RunContext,
    inputs: RunInputs,
  ): { names: AbundanceName[]; values: number[]; counts: SolverCounts; stepping: Stepping };
  readonly library: RateLibrary;
}

const PAIRS: readonly (readonly (keyof Keys)[])[] = [
  ["omegaB", "eta10"],
  ["nEff", "deltaNEff"],
  ["tauReion", "zReion"],
];

/** Base keys with overrides; a key that replaces its partner (eta10 for omegaB) removes it. */
export function mergeKeys(base: Keys, overrides: Keys = {}): Keys {
  checkKeys(overrides);
  const merged: Record<string, unknown> = { ...base };
  for (const pair of PAIRS) if (pair.some((k) => overrides[k] !== undefined)) for (const k of pair) delete merged[k];
  for (const [k, v] of Object.entries(overrides)) if (v !== undefined) merged[k] = v;
  return merged as Keys;
}

/**
 * Prepares a model. Nothing is computed until asked for; what has been computed is kept until a key that it depends on
 * changes: network and rates (network, evaluations), thermal history (nEff, xi, expansion, QED and decoupling
 * switches), weak table (the same and xiE, weak switches), flux table (all of these). omegaB, tauN and scales touch none.
 * @param library parsed or lazily parsed rates
 * @param keys defaults of every later call
 * @param compile turns an expansion expression into a function; without it only constants are accepted
 */
export function prepareModel(library: RateLibrary, keys: Keys = {}, compile?: ExpressionCompiler): Model {
  const network = keep<NetworkData>();
  const history = keep<ThermalHistory>();
  const weak = keep<WeakTable>();
  const prepared = keep<RunContext>();

  const selection = (p: CosmologyParameters) => selectNetwork(library, p.network, p.evaluations);

  function context(p: CosmologyParameters, gravity = 1): RunContext {
    const off = (name: (typeof NUCLEOSYNTHESIS_CORRECTIONS)[number]) => p.without.includes(name);
    const networkKey = JSON.stringify([p.network, p.evaluations]);
    const data = network(networkKey, () => assembleNetwork(p.network, selection(p), (id) => library.nuclide(id)));
    const options: BackgroundOptions = {
      deltaNEff: p.deltaNEff,
      xiE: p.xiE,
      xiMu: p.xiMu,
      xiTau: p.xiTau,
      qedE2: !off("qed-e2"),
      qedE3: !off("qed-e2") && !off("qed-e3"),
      incompleteDecoupling: !off("incomplete-decoupling"),
      gravity,
    };
    const backgroundKey = backgroundKeyOf(options, p.expansion);
    const plain = backgroundKey === PLAIN_BACKGROUND;
    const background = history(
      backgroundKey,
      () =>
        (plain ? storedHistory() : undefined) ??
        computeThermalHistory({ ...options, expansion: expansionFunction(p.expansion, compile) }),
    );
    const switches = {
      coulomb: !off("coulomb"),
      radiative: !off("radiative"),
      finiteMass: !off("finite-mass"),
      weakMagnetism: !off("finite-mass") && !off("weak-magnetism"),
    };
    const weakKey = JSON.stringify([backgroundKey, switches]);
    const rates = weak(
      weakKey,
      () =>
        (plain && Object.values(switches).every((on) => on) ? storedWeakTable() : undefined) ??
        tabulateOver(background, p.xiE, switches),
    );
    return prepared(JSON.stringify([networkKey, weakKey]), () => prepareRun(data, background, rates));
  }

  function evaluate(ctx: RunContext, inputs: RunInputs) {
    const run = runNetwork(ctx, inputs);
    return { names: reportedNames(ctx), values: reported(ctx, run.Y), counts: run.counts, stepping: run.stepping };
  }

  const parameters = (overrides?: Keys) => resolveParameters(mergeKeys(keys, overrides), NUCLEOSYNTHESIS_CORRECTIONS);

  /** Helium mass fraction of the nucleosynthesis run for these keys. */
  function heliumMass(of: Keys): number {
    const p = resolveParameters({ ...of, errors: "none", samples: 0 }, NUCLEOSYNTHESIS_CORRECTIONS);
    const ctx = context(p);
    const factors = scaleFactors(ctx.data, p.scales, library);
    const { names, values } = evaluate(ctx, { eta10: p.eta10, tauN: p.tauN, factors, tolerance: p.tolerance });
    return values[names.indexOf("YpMass")];
  }

  /** Names in `without` of the model may be of either calculation; an override names those of recombination. */
  function recombinationRun(overrides: Keys = {}): RecombinationRun {
    const isOurs = (name: string) => RECOMBINATION_SWITCH_NAMES.includes(name);
    const base = { ...keys, without: (keys.without ?? []).filter(isOurs) };
    const early = (keys.without ?? []).filter((name) => !isOurs(name));
    return runRecombination(mergeKeys(base, overrides), (of) => heliumMass({ ...of, without: early }));
  }

  const inputsOf = (ctx: RunContext, p: CosmologyParameters): RunInputs => ({
    eta10: p.eta10,
    tauN: p.tauN,
    factors: scaleFactors(ctx.data, p.scales, library),
    tolerance: p.tolerance,
  });

  function linearOf(
    ctx: RunContext,
    inputs: RunInputs,
    p: CosmologyParameters,
    central: readonly number[],
    progress?: (done: number, total: number) => void,
  ) {
    const vary = (s: number, sign: 1 | -1) => {
      const variations = new Float64Array(errorSources(ctx, p));
      variations[s] = sign;
      return evaluate(ctx, applyVariations(ctx, inputs, p, variations));
    };
    return linearErrors(ctx, inputs, p, central, (Y) => reported(ctx, Y), vary, progress);
  }

  function sampleBlock(overrides: Keys | undefined, plan: SamplePlan, from: number, to: number): SampleBlock {
    const p = parameters(overrides);
    const ctx = context(p);
    const inputs = inputsOf(ctx, p);
    return computeSampleBlock((v) => evaluate(ctx, applyVariations(ctx, inputs, p, v)), plan, from, to);
  }

  function sampleHere(overrides: Keys | undefined, samples: number, progress?: (done: number, total: number) => void) {
    const blocks = sampleBlocks(samples);
    const plan = model.samplePlan(overrides);
    return blocks.map(({ from, to }) => {
      progress?.(from, samples);
      return sampleBlock(overrides, plan, from, to);
    });
  }

  const model: Model = {
    library,
    parameters,
    selection,
    context,
    evaluate,
    recombinationRun,
    recombination: (overrides) => recombinationResults(recombinationRun(overrides)),
    samplePlan(overrides) {
      const p = parameters(overrides);
      const ctx = context(p);
      const inputs = inputsOf(ctx, p);
      const linear = linearOf(ctx, inputs, p, evaluate(ctx, inputs).values);
      return planSamples(p.seed, linear.response);
    },
    sampleBlock,
    abundances(overrides, progress, sampled) {
      const p = parameters(overrides);
      const ctx = context(p);
      const inputs = inputsOf(ctx, p);
      const central = evaluate(ctx, inputs);
      let counts = central.counts;
      const report = (
        errors: Pick<AbundanceRun, "correlation" | "assumedVarianceShare" | "quantiles" | "sampling"> & {
          sigma?: ArrayLike<number>;
          warnings?: readonly string[];
        },
      ): AbundanceRun => ({
        abundances: Object.fromEntries(
          central.names.map((name, i) => [
            name,
            errors.sigma ? { value: central.values[i], sigma: errors.sigma[i] } : { value: central.values[i] },
          ]),
        ),
        nEffComputed: ctx.history.nEffComputed,
        ...(errors.correlation ? { correlation: errors.correlation } : {}),
        ...(errors.assumedVarianceShare ? { assumedVarianceShare: errors.assumedVarianceShare } : {}),
        ...(errors.quantiles ? { quantiles: errors.quantiles } : {}),
        ...(errors.sampling ? { sampling: errors.sampling } : {}),
        solver: { ...counts, stepping: central.stepping, tolerance: p.tolerance },
        warnings: [...validityWarnings(p), ...runWarnings(ctx, central), ...(errors.warnings ?? [])],
      });
      if (p.errors === "none") return report({});
      if (p.errors === "linear") {
        const linear = linearOf(ctx, inputs, p, central.values, progress);
        counts = addCounts(counts, linear.counts);
        return report({
          sigma: linear.sigma,
          correlation: { order: central.names, matrix: linear.correlation },
          assumedVarianceShare: assumedShares(ctx, central.names, linear),
          warnings: largeErrorWarnings(ctx, OBSERVED, central.names, linear),
        });
      }
      const blocks = sampled ?? sampleHere(overrides, p.samples, progress);
      for (const block of blocks) counts = addCounts(counts, block.counts);
      return report(sampledErrors(central.names, blocks));
    },
  };
  return model;
}

/** Abundances that are observed: linear errors are checked for them. */
const OBSERVED = ["Yp", "dToH", "he3ToH", "li7ToH"] as const;

/** Weak rates over a whole thermal history. */
export function tabulateOver(history: ThermalHistory, xiE: number, switches: WeakOptions): WeakTable {
  const { s, TnueOverT } = history;
  const start = s[0];
  const end = s[s.length - 1];
  const ratio = notAKnotSpline(s, TnueOverT);
  const count = Math.ceil((end - start) / WEAK_TABLE_SPACING) + 1;
  return tabulateWeakRates({ start, end, count }, ratio.value, xiE, switches);
}

/** Abundances that not every network can make, and the nuclides of which one must be there. */
const MADE_OF: Readonly<Partial<Record<AbundanceName, readonly string[]>>> = {
  tToH: ["t"],
  li6ToH: ["li6", "he6"],
  li7ToH: ["li7", "be7"],
  be9ToH: ["be9", "li9"],
  b10ToH: ["b10", "c10"],
  b11ToH: ["b11", "c11", "be11"],
};

function namesFor(network: string, nuclides: ReadonlySet<string>): AbundanceName[] {
  const names = [...ABUNDANCE_NAMES, ...(HEAVY_NETWORKS.includes(network) ? HEAVY_ABUNDANCE_NAMES : [])];
  return names.filter((name) => MADE_OF[name]?.some((id) => nuclides.has(id)) ?? true);
}

/** The abundances a network reports: none of nuclides that it does not hold. */
export function reportedNames(ctx: RunContext): AbundanceName[] {
  return namesFor(ctx.data.name, new Set(ctx.data.nuclides.map(({ id }) => id)));
}

/** The same, before anything is computed. */
export function namesOf(model: Model, p: CosmologyParameters): AbundanceName[] {
  const reactions = model.selection(p).map(({ reaction }) => reaction);
  return namesFor(p.network, new Set(reactions.flatMap(({ reactants, products }) => [...reactants, ...products])));
}

/** Their values from a final state. */
export function reported(ctx: RunContext, Y: ArrayLike<number>): number[] {
  const found = finalAbundances(ctx.data.nuclides, Y, HEAVY_NETWORKS.includes(ctx.data.name));
  return reportedNames(ctx).map((name) => found[name] as number);
}

function backgroundKeyOf(
  options: Omit<BackgroundOptions, "rtol" | "expansion" | "startMeV">,
  expansion: string,
): string {
  const constant = trivialExpression(expansion);
  return JSON.stringify([options, constant ?? expansion]);
}

/** Key of the background whose tables are stored. */
const PLAIN_BACKGROUND = backgroundKeyOf(
  {
    deltaNEff: 0,
    xiE: 0,
    xiMu: 0,
    xiTau: 0,
    qedE2: true,
    qedE3: true,
    incompleteDecoupling: true,
    gravity: 1,
  },
  DEFAULTS.expansion,
);

/** Keeps the last result for its key. */
function keep<T>(): (key: string, compute: () => T) => T {
  let lastKey: string | undefined;
  let last: T;
  return (key, compute) => {
    if (key !== lastKey) {
      last = compute();
      lastKey = key;
    }
    return last;
  };
}

function expansionFunction(text: string, compile?: ExpressionCompiler): BackgroundOptions["expansion"] {
  const constant = trivialExpression(text);
  if (constant === 1) return undefined;
  if (constant !== undefined) return () => constant;
  if (!compile)
    throw new InputError(
      "expansion",
      `expansion = ${text}: expressions are compiled when the model is prepared; give it to prepare()`,
    );
  return compile(text);
}

/** Number of standardised sources: n_p through tau_n, each reaction, and omega_b where it has a sigma. */
export function errorSources(ctx: RunContext, p: CosmologyParameters): number {
  return 1 + ctx.data.reactions.length + (p.omegaBSigma > 0 ? 1 : 0);
}

/**
 * Inputs with standardised variations: entry 0 tau_n by its sigma, entry r of reaction r by f_u(T9)^p, the last one
 * omega_b by its sigma where it has one.
 */
export function applyVariations(
  ctx: RunContext,
  inputs: RunInputs,
  p: CosmologyParameters,
  variations: Float64Array,
): RunInputs {
  const reactions = ctx.data.reactions.length;
  const extra = p.omegaBSigma > 0 ? variations[reactions + 1] : 0;
  const varied = splitVariations(ctx, variations.subarray(1, reactions + 1), inputs.factors as Float64Array);
  return {
    ...inputs,
    ...varied,
    tauN: p.tauN + variations[0] * p.tauNSigma,
    eta10: p.eta10 * (1 + (extra * p.omegaBSigma) / p.omegaB),
  };
}

/** Share of each variance that is due to rates whose uncertainty is assumed or from memory; 0 where there is none. */
function assumedShares(
  ctx: RunContext,
  names: readonly AbundanceName[],
  { response, covariance }: LinearPropagation,
): Partial<Record<AbundanceName, number>> {
  const isAssumed = ctx.data.reactions.map(({ selected }) => selected.rateTable.uncertaintyBasis !== "published");
  return Object.fromEntries(
    names.map((name, x) => {
      const whole = covariance[x * names.length + x];
      const assumed = isAssumed.reduce((sum, counts, r) => sum + (counts ? response[r + 1][x] ** 2 : 0), 0);
      return [name, whole > 0 ? assumed / whole : 0];
    }),
  );
}

/** Constant factors per reaction of the compiled network, n_p first. */
export function scaleFactors(
  data: NetworkData,
  scales: Readonly<Record<string, number>>,
  library: RateLibrary,
): Float64Array {
  const factors = new Float64Array(data.reactions.length + 1).fill(1);
  const index = new Map([[WEAK_REACTION, 0], ...data.reactions.map((r, i): [string, number] => [r.id, i + 1])]);
  const scaled = new Set<string>();
  for (const [given, factor] of Object.entries(scales)) {
    const id = given === WEAK_REACTION ? given : resolveReaction(given, library.reactions, "scale");
    const i = index.get(id);
    if (i === undefined)
      throw new InputError(
        "reaction",
        `scale ${given}: reaction is not in network ${data.name}; choose another network`,
      );
    if (scaled.has(id)) throw new InputError("conflict", `scale ${given}: ${id} is given twice; keep one of them`);
    scaled.add(id);
    factors[i] = factor;
  }
  return factors;
}

/** Factors on H beyond which equilibrium at the start of the run can no longer be taken for granted. */
const USUAL_FACTOR = { min: 0.03, max: 30 } as const;

/** What a finished run shows: abundances below what the integration resolves, an expansion far from the usual one. */
function runWarnings(ctx: RunContext, run: { names: readonly AbundanceName[]; values: readonly number[] }): string[] {
  const warnings = run.names.flatMap((name, i) =>
    run.values[i] < 0
      ? [
          `${name} = ${run.values[i].toExponential(1)}: below what the integration resolves, take it as 0; a smaller tolerance resolves more`,
        ]
      : [],
  );
  const { H, rho } = ctx.history;
  let least = Number.POSITIVE_INFINITY;
  let most = 0;
  for (let i = 0; i < H.length; i++) {
    const factor = H[i] / Math.sqrt(((8 * Math.PI) / 3) * NEWTON_G_CGS * rho[i]);
    least = Math.min(least, factor);
    most = Math.max(most, factor);
  }
  if (least < USUAL_FACTOR.min || most > USUAL_FACTOR.max)
    warnings.push(
      `expansion: the factor on H runs from ${least.toPrecision(2)} to ${most.toPrecision(2)}; beyond ${USUAL_FACTOR.min} to ${USUAL_FACTOR.max} ` +
        "equilibrium at the start (10 MeV, 2 MeV) and the end at T9 = 0.01 no longer hold",
    );
  return warnings;
}

/** What is legal but outside the range where the physics here is checked. */
export function validityWarnings(p: CosmologyParameters): string[] {
  const warnings: string[] = [];
  if (p.xiE !== 0 || p.xiMu !== 0 || p.xiTau !== 0)
    warnings.push(
      "neutrino degeneracy enters densities and weak rates; its effect on the energy exchange is neglected",
    );
  if (p.deltaNEff < -1)
    warnings.push(
      `deltaNEff = ${p.deltaNEff}: a deficit this large has no physical model behind it; H^2 is scaled only`,
    );
  if (p.tolerance > 1e-3)
    warnings.push(`tolerance = ${p.tolerance}: integration error may exceed 1e-3 of an abundance`);
  if (p.network === "twelve" && p.eta10 > 20)
    warnings.push(`network twelve at eta10 = ${p.eta10.toPrecision(4)}: flows beyond A = 7 are left out; use extended`);
  if (HEAVY_NETWORKS.includes(p.network)) warnings.push(`network ${p.network}: ${ORDER_OF_MAGNITUDE_REASON}`);
  if (p.tauNSigma > 0.1 * p.tauN)
    warnings.push(`tauN = ${p.tauN}±${p.tauNSigma} s: an error this large is beyond linear propagation; use samples`);
  if (p.omegaBSigma > 0.3 * p.omegaB)
    warnings.push(
      `omegaB = ${p.omegaB.toPrecision(4)}±${p.omegaBSigma.toPrecision(2)}: an error this large is beyond linear propagation; use samples`,
    );
  if (p.eta10 < 0.3)
    warnings.push(
      `eta10 = ${p.eta10.toPrecision(4)}: nucleosynthesis is incomplete and sensitive to rates of weak support`,
    );
  return warnings;
}
