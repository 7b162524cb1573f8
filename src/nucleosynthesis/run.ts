/** One nucleosynthesis run: n <-> p from 10 MeV, the network from equilibrium near 2 MeV to T9 = 0.01. */
import type { ThermalHistory } from "../background/history.ts";
import { NEUTRON_PROTON_MASS_DIFFERENCE } from "../constants/codata.ts";
import { mevToT9, t9ToMeV } from "../constants/units.ts";
import { type CompiledNetwork, compileNetwork } from "../network/compile.ts";
import { generateKernels, loopKernels, type NetworkKernels } from "../network/generate.ts";
import { lnEquilibriumAbundance } from "../network/nse.ts";
import { luFactor, luSolve } from "../numerics/linear.ts";
import { type SolverCounts, type StiffOptions, StiffStepper, type StiffSystem } from "../numerics/ode-stiff.ts";
import { DEFAULTS } from "../parameters/cosmology.ts";
import type { WeakTable } from "../weak/table.ts";
import { type Clock, networkTable, sampleClock, TABLE_INTERVALS, weakOnlyTable } from "./coefficients.ts";
import { absoluteTolerances } from "./error-scale.ts";
import { type FluxTable, resample } from "./flux-table.ts";
import { marchAdaptively } from "./march-run.ts";
import { type NetworkData, WEAK_REACTION } from "./network-data.ts";
import { marchStored, SEQUENCE_RANGE } from "./stored-steps.ts";
import { type Variation, variedTable } from "./vary.ts";

/** Temperature where n <-> p starts from its equilibrium [MeV]. */
export const WEAK_START_MEV = 10;
/** Temperature where the network starts in statistical equilibrium [MeV]. */
export const NETWORK_START_MEV = 2;
/** Temperature where the network ends [GK]; t is about 1.8e6 s. */
export const END_T9 = 0.01;

/** Everything a run needs that omega_b, tau_n and rate factors do not change. */
export interface RunContext {
  readonly data: NetworkData;
  readonly history: ThermalHistory;
  readonly weakTable: FluxTable;
  readonly table: FluxTable;
  /** Kernels of the network: loops at first, straight-line code once enough runs pay for generating it. */
  kernels(): NetworkKernels;
  /** Clock, density and weak rates on the nodes of `table`, for exports. */
  readonly clock: Clock;
  readonly weakOnClock: { readonly lnNToP: Float64Array; readonly lnPToN: Float64Array };
  /** ln(n_b/N_A) at eta10 = 1 and T where the network starts. */
  readonly lnRhoNStart: number;
  /** True if a degeneracy shifts n/p by more than e^0.3: the network is then followed more tightly. */
  readonly degenerate: boolean;
}

/** What changes from run to run. */
export interface RunInputs {
  readonly eta10: number;
  /** Neutron mean life [s]. */
  readonly tauN: number;
  /** Factor on both directions of each reaction, n <-> p first; all 1 if left out. */
  readonly factors?: Float64Array;
  /** Relative error control. */
  readonly tolerance: number;
  readonly method?: "rodas4" | "rodas5p";
  /** Rates varied by f_u(T9)^p where f_u changes with temperature; constant ones are among the factors. */
  readonly variations?: readonly Variation[];
  /** A flux table of the caller's instead of the context's; steps are then chosen adaptively. */
  readonly table?: FluxTable;
}

export interface NuclearRun {
  /** Final n_i/n_b in the order of the network's nuclides. */
  readonly Y: Float64Array;
  readonly counts: SolverCounts;
  readonly stepping: Stepping;
}

/** How the steps were chosen: a stored sequence checked for this range, or by the error of each step. */
export type Stepping = "stored" | "adaptive";

/**
 * Joins a network, a thermal history and weak rates.
 * @param intervals of the flux table, for convergence tests
 */
export function prepareRun(
  data: NetworkData,
  history: ThermalHistory,
  weak: WeakTable,
  intervals = TABLE_INTERVALS,
): RunContext {
  const sWeak = -Math.log(mevToT9(WEAK_START_MEV));
  const sStart = -Math.log(mevToT9(NETWORK_START_MEV));
  const sEnd = -Math.log(END_T9);
  const weakIntervals = 256;
  const clock = sampleClock(history, sStart, sEnd, intervals);
  return {
    data,
    history,
    weakTable: weakOnlyTable(sampleClock(history, sWeak, sStart, weakIntervals), weak),
    table: networkTable(data, clock, weak),
    kernels: kernelsOf(data.compiled),
    clock,
    weakOnClock: {
      lnNToP: resample(weak.s, weak.lnNToP, clock.start, clock.step, clock.count).value,
      lnPToN: resample(weak.s, weak.lnPToN, clock.start, clock.step, clock.count).value,
    },
    lnRhoNStart: clock.lnRhoN.value[0],
    degenerate:
      Math.abs(weak.lnPToN[0] - weak.lnNToP[0] + NEUTRON_PROTON_MASS_DIFFERENCE.value / t9ToMeV(Math.exp(-weak.s[0]))) >
      STRONG_DEGENERACY,
  };
}

/** Shift of ln(n/p) in equilibrium beyond which error scales made for a small one no longer suit. */
const STRONG_DEGENERACY = 0.3;
/** Factor on the tolerance there; measured: it keeps 2e-5 in every abundance down to xi_e = -3. */
const DEGENERATE_TIGHTENING = 0.05;

/**
 * Runs per flux after which generated code has paid for itself: until the engine has optimised it, straight-line code
 * of a large network is slower than the loops by far, and optimising takes the time of some hundred runs.
 */
const RUNS_PER_FLUX_BEFORE_GENERATING = 2;

const kernelCache = new WeakMap<CompiledNetwork, () => NetworkKernels>();

/** Loops for the first runs of a network, generated code afterwards; the numbers are the same to the last bit. */
export function kernelsOf(network: CompiledNetwork): () => NetworkKernels {
  const known = kernelCache.get(network);
  if (known) return known;
  let kernels = loopKernels(network);
  let runs = 0;
  const next = () => {
    if (runs++ === RUNS_PER_FLUX_BEFORE_GENERATING * network.fluxes) kernels = generateKernels(network) ?? kernels;
    return kernels;
  };
  kernelCache.set(network, next);
  return next;
}

/** The network of n <-> p alone. */
export const WEAK_NETWORK = compileNetwork(["n", "p"], [{ id: WEAK_REACTION, reactants: ["n"], products: ["p"] }]);

/** Its kernels: too small for generated code to pay. */
export const WEAK_KERNELS = loopKernels(WEAK_NETWORK);

/** Factor of each flux: the power of eta10 it grows with, the factor of its reaction, 1/tau_n for n <-> p. */
export function fluxScale(network: CompiledNetwork, table: FluxTable, inputs: RunInputs): Float64Array {
  const scale = new Float64Array(network.fluxes);
  for (let f = 0; f < network.fluxes; f++)
    scale[f] = inputs.eta10 ** table.etaPowers[f] * (inputs.factors?.[f >> 1] ?? 1) * (f < 2 ? 1 / inputs.tauN : 1);
  return scale;
}

/** A flux table at given eta10, tau_n and factors, as a stiff system in s with sparse linear algebra. */
export function networkSystem(
  network: CompiledNetwork,
  kernels: NetworkKernels,
  table: FluxTable,
  inputs: RunInputs,
): StiffSystem {
  const fluxes = network.fluxes;
  const scale = fluxScale(network, table, inputs);
  const c = new Float64Array(fluxes + 1);
  const dc = new Float64Array(fluxes + 1);
  let at = Number.NaN;
  let share = 0;
  const load = (s: number) => {
    if (s === at) return;
    at = s;
    table.values(s, c);
    share = inputs.eta10 * c[fluxes];
    const clock = 1 / Math.sqrt(1 + share);
    for (let f = 0; f < fluxes; f++) c[f] *= scale[f] * clock;
  };
  const { elimination } = network;
  const n = network.n;
  const values = new Float64Array(elimination.slots);
  let sLast = 0;
  let yLast = new Float64Array(0);
  let dense: { matrix: Float64Array; pivots: Int32Array } | null = null;
  return {
    n,
    rhs(s, Y, out) {
      load(s);
      kernels.derivatives(c, Y, out);
    },
    timeDerivative(s, Y, out) {
      load(s);
      table.slopes(s, dc);
      const clock = 1 / Math.sqrt(1 + share);
      const drift = (-0.5 * inputs.eta10 * dc[fluxes]) / (1 + share);
      for (let f = 0; f < fluxes; f++) dc[f] = dc[f] * scale[f] * clock + c[f] * drift;
      kernels.derivatives(dc, Y, out);
    },
    solver: {
      update(s, Y) {
        sLast = s;
        yLast = Y as Float64Array<ArrayBuffer>;
      },
      factor(shift) {
        load(sLast);
        dense = null;
        kernels.assemble(c, yLast, shift, values);
        if (kernels.factor(values)) return true;
        // A pivot underflowed: fall back to dense elimination with pivoting.
        const matrix = new Float64Array(n * n);
        network.jacobian(c, yLast, matrix);
        for (let i = 0; i < n * n; i++) matrix[i] = -matrix[i];
        for (let i = 0; i < n; i++) matrix[i * n + i] += shift;
        const pivots = new Int32Array(n);
        dense = { matrix, pivots };
        return luFactor(matrix, n, pivots);
      },
      solve(b) {
        if (dense) luSolve(dense.matrix, n, dense.pivots, b);
        else kernels.solve(values, b);
      },
    },
  };
}

/** Tolerance below which the fifth-order method is the cheaper one. */
const FIFTH_ORDER_BELOW = 3e-5;

/** Method and tolerances of a run: fourth order when loose, fifth when tight, absolute tolerances by size. */
export function tolerances({ data, degenerate }: RunContext, inputs: RunInputs): StiffOptions {
  const rtol = inputs.tolerance * (degenerate && inputs.tolerance > FIFTH_ORDER_BELOW ? DEGENERATE_TIGHTENING : 1);
  return {
    rtol,
    atol: absoluteTolerances(
      data.nuclides.map((x) => x.id),
      inputs.eta10,
      rtol,
    ),
    method: inputs.method ?? (inputs.tolerance < FIFTH_ORDER_BELOW ? "rodas5p" : "rodas4"),
    firstStep: 1e-3,
    maxSteps: 200000,
  };
}

/** Abundances at the start of the network: n and p from the weak rates alone, all else in statistical equilibrium. */
export function initialAbundances(context: RunContext, inputs: RunInputs): { Y: Float64Array; counts: SolverCounts } {
  const { weakTable, data } = context;
  const weakInputs = { ...inputs, factors: inputs.factors?.subarray(0, 1) };
  const system = networkSystem(WEAK_NETWORK, WEAK_KERNELS, weakTable, weakInputs);
  const c = new Float64Array(3);
  weakTable.values(weakTable.start, c);
  const Xn = c[1] / (c[0] + c[1]);
  const end = weakTable.start + weakTable.step * weakTable.intervals;
  const stepper = new StiffStepper(system, weakTable.start, [Xn, 1 - Xn], end, {
    rtol: inputs.tolerance,
    atol: 1e-30,
    method: inputs.method,
    firstStep: 1e-2,
  });
  while (!stepper.done) stepper.step();
  const T9 = mevToT9(NETWORK_START_MEV);
  const rhoN = inputs.eta10 * Math.exp(context.lnRhoNStart);
  const Y = new Float64Array(data.nuclides.length);
  const [neutron, proton] = ["n", "p"].map((id) => data.nuclides[data.compiled.index.get(id) as number]);
  let bound = 0;
  data.nuclides.forEach((x, i) => {
    if (x.A === 1) return;
    Y[i] = Math.exp(lnEquilibriumAbundance(x, neutron, proton, T9 * 1e9, rhoN, stepper.y[0], stepper.y[1]));
    bound += x.A * Y[i];
  });
  const free = 1 - bound;
  Y[data.compiled.index.get("n") as number] = stepper.y[0] * free;
  Y[data.compiled.index.get("p") as number] = free - stepper.y[0] * free;
  return { Y, counts: stepper.counts };
}

/**
 * Runs the network to T9 = 0.01.
 * @throws {CalculationError} with s = -ln T9 and the reason if the integration fails
 */
export function runNetwork(context: RunContext, inputs: RunInputs): NuclearRun {
  const start = initialAbundances(context, inputs);
  const table = inputs.table ?? context.table;
  const options = tolerances(context, inputs);
  if (options.method === "rodas4") {
    const { compiled } = context.data;
    const { slots } = compiled.elimination;
    const scale = fluxScale(compiled, table, inputs);
    const atol = options.atol as Float64Array;
    const { eta10 } = inputs;
    const kernels = context.kernels();
    if (mayUseSequence(context, inputs)) {
      const Y = start.Y.slice();
      const counts = marchStored(kernels, slots, table, Y, scale, eta10, options.rtol, atol, inputs.variations);
      if (counts) return { Y, counts: addCounts(start.counts, counts), stepping: "stored" };
    }
    const varied = variedTable(table, inputs.variations);
    const counts = marchAdaptively(kernels, slots, varied, start.Y, scale, eta10, options.rtol, atol);
    return { Y: start.Y, counts: addCounts(start.counts, counts), stepping: "adaptive" };
  }
  const varied = variedTable(table, inputs.variations);
  const system = networkSystem(context.data.compiled, context.kernels(), varied, inputs);
  const end = table.start + table.step * table.intervals;
  const stepper = new StiffStepper(system, table.start, start.Y, end, options);
  while (!stepper.done) stepper.step();
  return { Y: stepper.y, counts: addCounts(start.counts, stepper.counts), stepping: "adaptive" };
}

/** Reactions that shape the steps, and how far their rates may be from those the sequence was tuned with. */
const SHAPING = new Set([
  WEAK_REACTION,
  "p-n_gamma-d",
  "d-p_gamma-he3",
  "d-d_n-he3",
  "d-d_p-t",
  "t-d_n-he4",
  "he3-n_p-t",
  "he3-d_p-he4",
]);
const SHAPING_FACTOR = 1.3;
/** Neutron mean lives [s] for which the sequence was checked. */
const SEQUENCE_TAU_N = { min: 800, max: 960 } as const;
const OTHER_FACTOR = 100;

/** The stored sequence serves the default tolerance and method in its range of eta and rates. */
function mayUseSequence(
  { data, degenerate }: RunContext,
  { tolerance, method, table, eta10, tauN, factors }: RunInputs,
): boolean {
  const suits =
    !degenerate &&
    tauN >= SEQUENCE_TAU_N.min &&
    tauN <= SEQUENCE_TAU_N.max &&
    tolerance === DEFAULTS.tolerance &&
    method === undefined &&
    table === undefined &&
    eta10 >= SEQUENCE_RANGE.min &&
    eta10 <= SEQUENCE_RANGE.max;
  if (!suits || factors === undefined) return suits;
  const { reactions } = data.compiled;
  for (let k = 0; k < factors.length; k++) {
    const factor = factors[k];
    if (factor === 1) continue;
    const most = SHAPING.has(reactions[k].id) ? SHAPING_FACTOR : OTHER_FACTOR;
    if (factor > most || factor < 1 / most) return false;
  }
  return true;
}

/** Sum of two sets of solver counts. */
export function addCounts(a: SolverCounts, b: SolverCounts): SolverCounts {
  return {
    steps: a.steps + b.steps,
    rejected: a.rejected + b.rejected,
    rhs: a.rhs + b.rhs,
    jacobians: a.jacobians + b.jacobians,
    factorisations: a.factorisations + b.factorisations,
  };
}
