/** Derivatives of the final abundances with respect to every rate, tau_n and eta, by the discrete adjoint of one run. */
import { adjointGradients, type ReactionWeight, type RecordedStep } from "../network/adjoint.ts";
import type { SolverCounts } from "../numerics/ode-stiff.ts";
import type { FluxTable } from "./flux-table.ts";
import { marchAdaptively } from "./march-run.ts";
import { addCounts, fluxScale, initialAbundances, type RunContext, type RunInputs, tolerances } from "./run.ts";
import { lnUncertainty, variedTable } from "./vary.ts";

/** Derivatives d ln X of each quantity X; reactions in the order of the compiled network, n <-> p first. */
export interface Responses {
  /** The quantities of the plain run. */
  readonly values: readonly number[];
  /** lnRate[x][k] = d ln X/d ln(rate of reaction k), forward and reverse together; k = 0: both directions of n <-> p. */
  readonly lnRate: readonly Float64Array[];
  /** variation[x][k] = d ln X/dp_k for a rate times f_u(T9)^p; 0 for n <-> p. */
  readonly variation: readonly Float64Array[];
  readonly lnEta: Float64Array;
  readonly lnTau: Float64Array;
  /** further[x][q] = d ln X/d(parameter that enters the fluxes with the q-th further weight). */
  readonly further: readonly Float64Array[];
  readonly counts: SolverCounts;
}

/** Weights of this file, before the further ones: rates, uncertainties, eta. */
const OWN_WEIGHTS = 3;

/** Relative step of the differences of the initial state, which is cheap and smooth. */
const START_STEP = 1e-3;

/**
 * One run with its adjoint: exact derivatives of the discrete solution, at the cost of some runs whatever their number.
 * @param quantities maps final abundances to the quantities asked for (positive; a quantity of 0 gets zero derivatives)
 * @param weights ways in which further parameters enter the fluxes (not the start of the network)
 * @throws {CalculationError} as the integration
 */
export function computeResponses(
  context: RunContext,
  inputs: RunInputs,
  quantities: (Y: Float64Array) => readonly number[],
  weights: readonly ReactionWeight[] = [],
): Responses {
  const { compiled } = context.data;
  const table = variedTable(inputs.table ?? context.table, inputs.variations);
  const scale = fluxScale(compiled, table, inputs);
  const options = tolerances(context, { ...inputs, method: "rodas4" });
  const start = initialAbundances(context, inputs);
  const Y = start.Y.slice();
  const steps: RecordedStep[] = [];
  const counts = marchAdaptively(
    context.kernels(),
    compiled.elimination.slots,
    table,
    Y,
    scale,
    inputs.eta10,
    options.rtol,
    options.atol as Float64Array,
    (s, h, y, march, rows) => {
      const end = rows.end.slice();
      steps.push({
        s,
        h,
        y: y.slice(),
        u: march.stages.map((u) => u.slice()),
        factors: march.factors.slice(),
        rows: [rows.start.slice(), rows.second.slice(), rows.third.slice(), rows.fourth.slice(), end, end],
        slope: rows.slope.slice(),
      });
    },
  );
  const values = quantities(Y);
  const lambda = gradients(quantities, Y, values);
  const count = compiled.reactions.length;
  const gradient = adjointGradients(compiled, steps, lambda, [
    {
      load(_s, value, slope) {
        value.fill(1);
        slope.fill(0);
      },
    },
    uncertaintyWeight(context, table),
    etaWeight(table, inputs.eta10),
    ...weights,
  ]);
  const initial = (changed: Partial<RunInputs>) => initialAbundances(context, { ...inputs, ...changed }).Y;
  const difference = (up: Float64Array, down: Float64Array) => up.map((x, i) => (x - down[i]) / (2 * START_STEP));
  const byEta = difference(
    initial({ eta10: inputs.eta10 * (1 + START_STEP) }),
    initial({ eta10: inputs.eta10 * (1 - START_STEP) }),
  );
  const byTau = difference(
    initial({ tauN: inputs.tauN * (1 + START_STEP) }),
    initial({ tauN: inputs.tauN * (1 - START_STEP) }),
  );
  const dot = (x: number, v: Float64Array) => lambda[x].reduce((sum, l, i) => sum + l * v[i], 0);
  const total = (x: number, q: number) => gradient[x].subarray(q * count, (q + 1) * count).reduce((a, b) => a + b, 0);
  return {
    values,
    // The weak rates also set the start of the network: there they act as 1/tau_n.
    lnRate: values.map((_, x) => {
      const row = gradient[x].slice(0, count);
      row[0] -= dot(x, byTau);
      return row;
    }),
    variation: values.map((_, x) => gradient[x].slice(count, 2 * count)),
    lnEta: Float64Array.from(values, (_, x) => total(x, 2) + dot(x, byEta)),
    lnTau: Float64Array.from(values, (_, x) => dot(x, byTau) - gradient[x][0]),
    further: values.map((_, x) => Float64Array.from(weights, (__, q) => total(x, OWN_WEIGHTS + q))),
    counts: addCounts(start.counts, counts),
  };
}

/** d ln X/dY_i of each quantity by central differences: quantities are ratios of sums, so the step may be large. */
function gradients(
  quantities: (Y: Float64Array) => readonly number[],
  Y: Float64Array,
  values: readonly number[],
): Float64Array[] {
  const lambda = values.map(() => new Float64Array(Y.length));
  const moved = Y.slice();
  for (let i = 0; i < Y.length; i++) {
    const h = 1e-5 * Math.max(Math.abs(Y[i]), 1e-30);
    moved[i] = Y[i] + h;
    const up = quantities(moved);
    moved[i] = Y[i] - h;
    const down = quantities(moved);
    moved[i] = Y[i];
    values.forEach((x, q) => {
      lambda[q][i] = x > 0 ? (up[q] - down[q]) / (2 * h * x) : 0;
    });
  }
  return lambda;
}

/** ln f_u(T9) of the reaction of a flux, linear between the nodes of the table. */
function uncertaintyWeight(context: RunContext, table: FluxTable): ReactionWeight {
  const all = context.data.reactions.map((reaction, r) => lnUncertainty(context.table, reaction, r));
  return {
    load(s, value, slope) {
      const position = Math.min(Math.max((s - table.start) / table.step, 0), table.intervals - 1e-9);
      const i = Math.floor(position);
      const u = position - i;
      value[0] = value[1] = slope[0] = slope[1] = 0;
      for (let r = 0, f = 2; r < all.length; r++, f += 2) {
        const ln = all[r].value;
        const rise = all[r].constant ? 0 : ln[i + 1] - ln[i];
        value[f] = value[f + 1] = ln[i] + u * rise;
        slope[f] = slope[f + 1] = rise / table.step;
      }
    },
  };
}

/** d ln c/d ln eta: the power of eta less what the baryons' own gravity takes off the clock. */
function etaWeight(table: FluxTable, eta10: number): ReactionWeight {
  const row = new Float64Array(table.fluxes);
  const rise = new Float64Array(table.fluxes);
  const last = table.fluxes - 1;
  return {
    load(s, value, slope) {
      table.values(s, row);
      table.slopes(s, rise);
      const share = eta10 * row[last];
      const clock = (0.5 * share) / (1 + share);
      for (let f = 0; f < last; f++) value[f] = table.etaPowers[f] - clock;
      slope.fill((-0.5 * eta10 * rise[last]) / (1 + share) ** 2);
    },
  };
}
