/** Fast integration of a network over its flux table: adaptive steps of the written-out fourth-order method. */
import type { NetworkKernels } from "../network/generate.ts";
import { createMarch, type March, STAGE_POINTS, type StepRows } from "../network/march.ts";
import { CalculationError } from "../numerics/check.ts";
import type { SolverCounts } from "../numerics/ode-stiff.ts";
import type { FluxTable } from "./flux-table.ts";

/** Buffers of one network, reused from run to run. */
export interface Workspace {
  readonly march: March;
  readonly rows: { -readonly [K in keyof StepRows]: Float64Array };
}

const workspaces = new WeakMap<NetworkKernels, Workspace>();

/** The buffers that belong to some kernels. */
export function workspaceOf(kernels: NetworkKernels, n: number, slots: number, fluxes: number): Workspace {
  let found = workspaces.get(kernels);
  if (!found) {
    const row = () => new Float64Array(fluxes + 1);
    found = {
      march: createMarch(kernels, n, slots),
      rows: { start: row(), slope: row(), second: row(), third: row(), fourth: row(), end: row() },
    };
    workspaces.set(kernels, found);
  }
  return found;
}

/** Told every accepted step before it is taken: start s, length h, abundances at the start, stages and rows in use. */
export type StepRecorder = (s: number, h: number, y: Float64Array, march: March, rows: StepRows) => void;

/** Most steps of one run. */
const MAX_STEPS = 20000;

/**
 * Integrates from the start to the end of a table.
 * @param y abundances at the start, advanced in place
 * @param scale factor of each flux: powers of eta, rate factors, 1/tau_n
 * @param eta10 for the baryons' share of the energy density (last column of the table)
 * @param atol absolute tolerance of each nuclide
 * @param record told every accepted step, for the adjoint
 * @throws {CalculationError} with s = -ln T9 where the step underflows or too many steps are needed
 */
export function marchAdaptively(
  kernels: NetworkKernels,
  slots: number,
  table: FluxTable,
  y: Float64Array,
  scale: Float64Array,
  eta10: number,
  rtol: number,
  atol: Float64Array,
  record?: StepRecorder,
): SolverCounts {
  const n = y.length;
  const fluxes = scale.length;
  const { march, rows } = workspaceOf(kernels, n, slots, fluxes);
  const counts: SolverCounts = { steps: 0, rejected: 0, rhs: 0, jacobians: 0, factorisations: 0 };
  const end = table.start + table.step * table.intervals;
  let s = table.start;
  let h = 2e-2;
  let last = 1e-2;
  let afterReject = false;
  load(table, s, scale, eta10, rows.start);
  while (s < end) {
    if (counts.steps + counts.rejected >= MAX_STEPS)
      throw new CalculationError("steps", `network: ${MAX_STEPS} steps without reaching T9 = 0.01, at s = ${s}`);
    loadSlope(table, s, scale, eta10, rows.start, rows.slope);
    counts.jacobians++;
    for (;;) {
      let final = false;
      if (h >= (end - s) * (1 - 1e-10)) {
        h = end - s;
        final = true;
      }
      if (!(h > 1e-14)) throw new CalculationError("step", `network: step underflows at s = ${s}`);
      load(table, s + STAGE_POINTS[1] * h, scale, eta10, rows.second);
      load(table, s + STAGE_POINTS[2] * h, scale, eta10, rows.third);
      load(table, s + STAGE_POINTS[3] * h, scale, eta10, rows.fourth);
      load(table, final ? end : s + h, scale, eta10, rows.end);
      const error = march.step(y, h, rows, rtol, atol);
      counts.rhs += 6;
      counts.factorisations++;
      if (error <= 1) {
        record?.(s, h, y, march, rows);
        y.set(march.next);
        s = final ? end : s + h;
        const e = Math.max(error, 1e-8);
        const factor = Math.min(afterReject ? 1 : 6, Math.max(0.2, 0.9 * e ** -0.175 * last ** 0.1));
        last = e;
        afterReject = false;
        h *= factor;
        counts.steps++;
        const swap = rows.start;
        rows.start = rows.end;
        rows.end = swap;
        break;
      }
      counts.rejected++;
      afterReject = true;
      h *= Number.isFinite(error) ? Math.max(0.1, 0.9 * error ** -0.25) : 0.1;
    }
  }
  return counts;
}

/** Scaled coefficients at s, the baryons' gravity in the clock; the last entry keeps rho_b/rho. */
function load(table: FluxTable, s: number, scale: Float64Array, eta10: number, out: Float64Array): void {
  table.values(s, out);
  const fluxes = scale.length;
  const share = eta10 * out[fluxes];
  const clock = 1 / Math.sqrt(1 + share);
  for (let f = 0; f < fluxes; f++) out[f] *= scale[f] * clock;
  out[fluxes] = share;
}

/** d/ds of {@link load} at the start of a step, where `start` is loaded. */
function loadSlope(
  table: FluxTable,
  s: number,
  scale: Float64Array,
  eta10: number,
  start: Float64Array,
  out: Float64Array,
): void {
  table.slopes(s, out);
  const fluxes = scale.length;
  const share = start[fluxes];
  const clock = 1 / Math.sqrt(1 + share);
  const drift = (-0.5 * eta10 * out[fluxes]) / (1 + share);
  for (let f = 0; f < fluxes; f++) out[f] = out[f] * scale[f] * clock + start[f] * drift;
}
