/** Integration on a stored sequence of steps: flux rows computed once a table, a run is arithmetic on known rows. */
import type { NetworkKernels } from "../network/generate.ts";
import { STAGE_POINTS } from "../network/march.ts";
import type { SolverCounts } from "../numerics/ode-stiff.ts";
import type { FluxTable } from "./flux-table.ts";
import { workspaceOf } from "./march-run.ts";
import { STEP_SEQUENCE } from "./steps.generated.ts";
import { lnUncertaintyAt, type Variation } from "./vary.ts";

/** Range of eta10 over which the sequence was tuned and checked; outside it steps are chosen adaptively. */
export const SEQUENCE_RANGE = { min: 1, max: 20 } as const;

/** Where a step needs rows after its start, as shares of it. */
const INNER_POINTS = [STAGE_POINTS[1], STAGE_POINTS[2], STAGE_POINTS[3], 1] as const;

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

/** A copy of the rows and the reactions whose columns in it are varied at present. */
interface VariedRows {
  readonly rows: Float64Array;
  varied: readonly number[];
}

const scratch = new WeakMap<StoredRows, VariedRows>();

/** Writes the columns of one reaction: those of the plain rows times f_u(T9)^p, or the plain ones without a variation. */
function writeColumns(
  table: FluxTable,
  nodes: ArrayLike<number>,
  { rows: plain, width }: StoredRows,
  rows: Float64Array,
  reaction: number,
  variation?: Variation,
): void {
  const f = 2 * (reaction + 1);
  let factor = 1;
  let slope = 0;
  const at = (s: number) => {
    if (!variation) return;
    const { ln, slope: rise } = lnUncertaintyAt(table, variation.lnF, s);
    factor = Math.exp(variation.p * ln);
    slope = variation.p * rise;
  };
  at(nodes[0]);
  rows[f] = factor * plain[f];
  rows[f + 1] = factor * plain[f + 1];
  // Row where the coefficients at the start of the step stand.
  let start = 0;
  for (let k = 0, first = width; k + 1 < nodes.length; k++, first += 5 * width) {
    const sloping = first + 4 * width + f;
    rows[sloping] = factor * plain[sloping] + slope * rows[start + f];
    rows[sloping + 1] = factor * plain[sloping + 1] + slope * rows[start + f + 1];
    const h = nodes[k + 1] - nodes[k];
    for (let i = 0; i < 4; i++) {
      at(nodes[k] + INNER_POINTS[i] * h);
      const row = first + i * width + f;
      rows[row] = factor * plain[row];
      rows[row + 1] = factor * plain[row + 1];
    }
    start = first + 3 * width;
  }
}

/** Rows with the fluxes of varied reactions multiplied by f_u(T9)^p; the buffer is reused by the next call. */
function variedRows(
  table: FluxTable,
  nodes: ArrayLike<number>,
  plain: StoredRows,
  variations: readonly Variation[],
): StoredRows {
  let kept = scratch.get(plain);
  if (!kept) {
    kept = { rows: plain.rows.slice(), varied: [] };
    scratch.set(plain, kept);
  }
  const { rows } = kept;
  const now = variations.map((v) => v.reaction);
  for (const reaction of kept.varied) if (!now.includes(reaction)) writeColumns(table, nodes, plain, rows, reaction);
  for (const variation of variations) writeColumns(table, nodes, plain, rows, variation.reaction, variation);
  kept.varied = now;
  return { width: plain.width, rows };
}

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
  const { march, rows } = workspaceOf(kernels, y.length, slots, source.width - 1);
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
