/** Integration on a stored sequence of steps: flux rows computed once a table, a run is arithmetic on known rows. */
import type { NetworkKernels } from "../network/generate.ts";
import { createMarch, type March, STAGE_POINTS, type StepRows } from "../network/march.ts";
import type { SolverCounts } from "../numerics/ode-stiff.ts";
import type { FluxTable } from "./flux-table.ts";
import { STEP_SEQUENCE } from "./steps.generated.ts";
import { lnUncertaintyAt, type Variation } from "./vary.ts";

/** Range of eta10 over which the sequence was tuned and checked; outside it steps are chosen adaptively. */
export const SEQUENCE_RANGE = { min: 1, max: 20 } as const;

/** Rows of all steps at eta10 = 1, unscaled: start of the first, then second, third, fourth, end and slope of each. */
interface StoredRows {
  readonly width: number;
  readonly rows: Float64Array;
}

const stored = new WeakMap<FluxTable, StoredRows>();

function rowsOf(table: FluxTable, nodes: ArrayLike<number>): StoredRows {
  const known = stored.get(table);
  if (known) return known;
  const width = table.fluxes;
  const rows = new Float64Array((1 + 5 * (nodes.length - 1)) * width);
  let at = 0;
  const next = () => {
    const row = rows.subarray(at, at + width);
    at += width;
    return row;
  };
  table.values(nodes[0], next());
  for (let k = 0; k + 1 < nodes.length; k++) {
    const h = nodes[k + 1] - nodes[k];
    for (const point of [STAGE_POINTS[1], STAGE_POINTS[2], STAGE_POINTS[3], 1])
      table.values(nodes[k] + point * h, next());
    table.slopes(nodes[k], next());
  }
  const made = { width, rows };
  stored.set(table, made);
  return made;
}

const scratch = new WeakMap<StoredRows, Float64Array>();

/** Rows with the fluxes of varied reactions multiplied by f_u(T9)^p; the buffer is reused by the next call. */
function variedRows(
  table: FluxTable,
  nodes: ArrayLike<number>,
  plain: StoredRows,
  variations: readonly Variation[],
): StoredRows {
  let rows = scratch.get(plain);
  if (!rows) {
    rows = plain.rows.slice();
    scratch.set(plain, rows);
  } else rows.set(plain.rows);
  const { width } = plain;
  const points = [STAGE_POINTS[1], STAGE_POINTS[2], STAGE_POINTS[3], 1];
  for (const { reaction, p, lnF } of variations) {
    const f = 2 * (reaction + 1);
    const first = lnUncertaintyAt(table, lnF, nodes[0]);
    let factor = Math.exp(p * first.ln);
    let slope = p * first.slope;
    rows[f] *= factor;
    rows[f + 1] *= factor;
    // Row where the coefficients at the start of the step stand.
    let start = 0;
    for (let k = 0, at = width; k + 1 < nodes.length; k++, at += 5 * width) {
      const sloping = at + 4 * width;
      rows[sloping + f] = factor * rows[sloping + f] + slope * rows[start + f];
      rows[sloping + f + 1] = factor * rows[sloping + f + 1] + slope * rows[start + f + 1];
      const h = nodes[k + 1] - nodes[k];
      for (let i = 0; i < 4; i++) {
        const here = lnUncertaintyAt(table, lnF, nodes[k] + points[i] * h);
        factor = Math.exp(p * here.ln);
        slope = p * here.slope;
        rows[at + i * width + f] *= factor;
        rows[at + i * width + f + 1] *= factor;
      }
      start = at + 3 * width;
    }
  }
  return { width, rows };
}

interface Workspace {
  readonly march: March;
  readonly rows: { -readonly [K in keyof StepRows]: Float64Array };
}

const workspaces = new WeakMap<NetworkKernels, Workspace>();

/** The nodes of the sequence within a table, its ends moved to the table's. */
export function sequenceNodes(table: FluxTable): Float64Array {
  const nodes = Float64Array.from(STEP_SEQUENCE.nodes);
  nodes[0] = table.start;
  nodes[nodes.length - 1] = table.start + table.step * table.intervals;
  return nodes;
}

const nodesOf = new WeakMap<FluxTable, Float64Array>();

/**
 * Runs through the stored steps; the error estimate of each is held against the largest one that the sequence showed
 * where it was checked, so that a run outside its range is noticed.
 * @param y abundances at the start, advanced in place; of no use if null is returned
 * @param rtol,atol the scale of the error estimates (those of the default tolerance)
 * @param variations rates varied by an f_u that changes with temperature
 * @returns counts, or null if an estimate is too large: integrate adaptively instead
 */
export function marchStored(
  kernels: NetworkKernels,
  slots: number,
  table: FluxTable,
  y: Float64Array,
  scale: Float64Array,
  eta10: number,
  rtol: number,
  atol: Float64Array,
  variations?: readonly Variation[],
  limits: ArrayLike<number> = STEP_SEQUENCE.limits,
  seen?: (step: number, estimate: number) => void,
): SolverCounts | null {
  let nodes = nodesOf.get(table);
  if (!nodes) {
    nodes = sequenceNodes(table);
    nodesOf.set(table, nodes);
  }
  const plain = rowsOf(table, nodes);
  const source = variations ? variedRows(table, nodes, plain, variations) : plain;
  let work = workspaces.get(kernels);
  if (!work) {
    const row = () => new Float64Array(source.width);
    work = {
      march: createMarch(kernels, y.length, slots),
      rows: { start: row(), slope: row(), second: row(), third: row(), fourth: row(), end: row() },
    };
    workspaces.set(kernels, work);
  }
  const { march, rows } = work;
  const steps = nodes.length - 1;
  const { width } = source;
  load(source, 0, scale, eta10, rows.start);
  for (let k = 0, at = width; k < steps; k++, at += 5 * width) {
    load(source, at, scale, eta10, rows.second);
    load(source, at + width, scale, eta10, rows.third);
    load(source, at + 2 * width, scale, eta10, rows.fourth);
    load(source, at + 3 * width, scale, eta10, rows.end);
    loadSlope(source, at + 4 * width, scale, eta10, rows.start, rows.slope);
    const estimate = march.step(y, nodes[k + 1] - nodes[k], rows, rtol, atol);
    seen?.(k, estimate);
    if (!(estimate <= limits[k])) return null;
    y.set(march.next);
    const swap = rows.start;
    rows.start = rows.end;
    rows.end = swap;
  }
  return { steps, rejected: 0, rhs: 6 * steps, jacobians: steps, factorisations: steps };
}

/** Scales a row for this run, the baryons' gravity in the clock; the last entry keeps rho_b/rho. */
function load({ rows, width }: StoredRows, at: number, scale: Float64Array, eta10: number, out: Float64Array): void {
  const last = width - 1;
  const share = eta10 * rows[at + last];
  const clock = 1 / Math.sqrt(1 + share);
  for (let f = 0; f < last; f++) out[f] = rows[at + f] * scale[f] * clock;
  out[last] = share;
}

function loadSlope(
  { rows, width }: StoredRows,
  at: number,
  scale: Float64Array,
  eta10: number,
  start: Float64Array,
  out: Float64Array,
): void {
  const last = width - 1;
  const share = start[last];
  const clock = 1 / Math.sqrt(1 + share);
  const drift = (-0.5 * eta10 * rows[at + last]) / (1 + share);
  for (let f = 0; f < last; f++) out[f] = rows[at + f] * scale[f] * clock + start[f] * drift;
}
