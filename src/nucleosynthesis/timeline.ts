/** The first hours on a table: time, temperatures, expansion, weak rates and every nuclide against temperature. */
import { KELVIN_PER_MEV, mevToT9 } from "../constants/units.ts";
import { lnEquilibriumAbundance } from "../network/nse.ts";
import { notAKnotSlopes } from "../numerics/interpolate.ts";
import { type SolverCounts, StiffStepper, type StiffSystem } from "../numerics/ode-stiff.ts";
import { resample } from "./flux-table.ts";
import {
  addCounts,
  END_T9,
  initialAbundances,
  NETWORK_START_MEV,
  networkSystem,
  type RunContext,
  type RunInputs,
  tolerances,
  WEAK_KERNELS,
  WEAK_NETWORK,
  WEAK_START_MEV,
} from "./run.ts";
import { variedTable } from "./vary.ts";

/** Output points a decade of temperature; 10, 1, 0.1 and 0.01 MeV are among them. */
export const POINTS_PER_DECADE = 100;

export interface Timeline {
  /** -ln T9 of each row, ascending. */
  readonly s: Float64Array;
  readonly t: Float64Array;
  readonly T: Float64Array;
  readonly TnueOverT: Float64Array;
  readonly TnumuOverT: Float64Array;
  /** Expansion rate with baryons [1/s]. */
  readonly H: Float64Array;
  /** Weak rates with tau_n and the scale of n_p [1/s]. */
  readonly nToP: Float64Array;
  readonly pToN: Float64Array;
  /** Y[row] in the order of the network's nuclides. */
  readonly Y: readonly Float64Array[];
  readonly counts: SolverCounts;
}

/** Temperatures of the rows [MeV]: POINTS_PER_DECADE from 10 MeV down, the end of the run last. */
export function outputTemperatures(): number[] {
  const end = END_T9 / mevToT9(1);
  const list: number[] = [];
  for (let k = 0; ; k++) {
    const T = WEAK_START_MEV * 10 ** (-k / POINTS_PER_DECADE);
    if (T <= end * (1 + 1e-9)) break;
    list.push(T);
  }
  list.push(end);
  return list;
}

/**
 * Runs the network with output at fixed temperatures. Above the start of the network (2 MeV) nuclides beyond n and p
 * are shown in statistical equilibrium, as they start. Time and H include the baryons' share of the energy density.
 * @throws {CalculationError} as the integration
 */
export function computeTimeline(context: RunContext, inputs: RunInputs): Timeline {
  const { history, data, weakTable, table } = context;
  const temperatures = outputTemperatures();
  const rows = temperatures.length;
  const s = Float64Array.from(temperatures, (T) => -Math.log(mevToT9(T)));
  const sStart = table.start;
  const n = data.nuclides.length;
  const Y: Float64Array[] = [];
  const index = (id: string) => data.compiled.index.get(id) as number;
  const [neutron, proton] = ["n", "p"].map((id) => data.nuclides[index(id)]);
  const column = (y: Float64Array, at: number) => resample(history.s, y, at, 1, 1).value[0];
  const share = (at: number) => {
    const where = at < sStart ? weakTable : table;
    const c = new Float64Array(where.fluxes);
    where.values(at, c);
    return { share: inputs.eta10 * c[where.fluxes - 1], c };
  };
  // n <-> p alone, to the start of the network.
  const weakInputs = { ...inputs, factors: inputs.factors?.subarray(0, 1) };
  const first = share(weakTable.start).c;
  const Xn = first[1] / (first[0] + first[1]);
  const early = new StiffStepper(
    networkSystem(WEAK_NETWORK, WEAK_KERNELS, weakTable, weakInputs),
    s[0],
    [Xn, 1 - Xn],
    sStart,
    {
      rtol: inputs.tolerance,
      atol: 1e-30,
      firstStep: 1e-2,
    },
  );
  const lnHeating = history.heating.map(Math.log);
  const heatingStart = column(lnHeating, sStart);
  let row = 0;
  for (; row < rows && s[row] < sStart; row++) {
    advance(early, s[row]);
    const T = temperatures[row] * KELVIN_PER_MEV;
    const rhoN =
      inputs.eta10 *
      Math.exp(
        context.lnRhoNStart +
          3 * Math.log(temperatures[row] / NETWORK_START_MEV) +
          column(lnHeating, s[row]) -
          heatingStart,
      );
    const state = new Float64Array(n);
    data.nuclides.forEach((x, i) => {
      state[i] = x.A === 1 ? 0 : Math.exp(lnEquilibriumAbundance(x, neutron, proton, T, rhoN, early.y[0], early.y[1]));
    });
    state[index("n")] = early.y[0];
    state[index("p")] = early.y[1];
    Y.push(state);
  }
  const system: StiffSystem = networkSystem(
    data.compiled,
    context.kernels(),
    variedTable(table, inputs.variations),
    inputs,
  );
  const end = table.start + table.step * table.intervals;
  const late = new StiffStepper(system, sStart, initialAbundances(context, inputs).Y, end, {
    ...tolerances(context, inputs),
  });
  for (; row < rows; row++) {
    advance(late, Math.min(s[row], end));
    Y.push(late.y.slice());
  }
  const take = (y: Float64Array) => Float64Array.from(s, (at) => column(y, at));
  const lnH = take(history.H.map(Math.log));
  const shares = Float64Array.from(s, (at) => share(at).share);
  const rates = [...s].map((at) => {
    const { c } = share(at);
    const clock = Math.exp(column(history.lnDtds, at)) * inputs.tauN;
    const scale = inputs.factors?.[0] ?? 1;
    return [(c[0] * scale) / clock, (c[1] * scale) / clock];
  });
  return {
    s,
    t: clockWithBaryons(history.s, history.t, history.lnDtds, s, share),
    T: Float64Array.from(temperatures, (T) => T * KELVIN_PER_MEV),
    TnueOverT: take(history.TnueOverT),
    TnumuOverT: take(history.TnumuOverT),
    H: lnH.map((x, i) => Math.exp(x) * Math.sqrt(1 + shares[i])),
    nToP: Float64Array.from(rates, (r) => r[0]),
    pToN: Float64Array.from(rates, (r) => r[1]),
    Y,
    counts: addCounts(early.counts, late.counts),
  };
}

function advance(stepper: StiffStepper, s: number): void {
  while (stepper.t < s) stepper.step(s);
}

/** Time at each s: that of the history less what the baryons' gravity takes off, by Simpson's rule on the grid. */
function clockWithBaryons(
  grid: Float64Array,
  t: Float64Array,
  lnDtds: Float64Array,
  s: Float64Array,
  share: (at: number) => { share: number },
): Float64Array {
  const lnT = t.map(Math.log);
  const slopes = notAKnotSlopes(grid, lnT);
  const h = grid[1] - grid[0];
  const timeAt = (at: number) => {
    const i = Math.max(0, Math.min(grid.length - 2, Math.floor((at - grid[0]) / h)));
    const u = (at - grid[i]) / h;
    const d = lnT[i + 1] - lnT[i];
    const a = h * slopes[i] - d;
    const b = d - h * slopes[i + 1];
    return Math.exp(lnT[i] + u * d + u * (1 - u) * (a * (1 - u) + b * u));
  };
  const lost = (at: number) =>
    Math.exp(resample(grid, lnDtds, at, 1, 1).value[0]) * (1 / Math.sqrt(1 + share(at).share) - 1);
  const out = new Float64Array(s.length);
  let correction = 0;
  let before = lost(s[0]);
  out[0] = timeAt(s[0]);
  for (let i = 1; i < s.length; i++) {
    const after = lost(s[i]);
    correction += ((s[i] - s[i - 1]) / 6) * (before + 4 * lost((s[i] + s[i - 1]) / 2) + after);
    before = after;
    out[i] = timeAt(s[i]) + correction;
  }
  return out;
}
