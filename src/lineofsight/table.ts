/** The table of a recombination answer: rows chosen so that cubic interpolation between them is good to 1e-5. */
import { InputError } from "../numerics/check.ts";
import { localPolynomials } from "../numerics/local-polynomial.ts";
import type { Table } from "../numerics/table.ts";
import { Z_TOP } from "../recombination/history.ts";
import type { LineOfSight } from "./optical-depth.ts";
import { visibilityPerZ } from "./visibility.ts";

/** Columns and their units; with reionisation, x_e, optical depth and visibility include it. */
export const RECOMBINATION_COLUMNS = [
  "z",
  "xe",
  "Tm_K",
  "Tr_K",
  "opticalDepth",
  "visibility_per_z",
  "conformalTime_Mpc",
] as const;
export const RECOMBINATION_UNITS = ["1", "1", "K", "K", "1", "1", "Mpc"] as const;

/** Interpolation error to which the rows are chosen; the promise is {@link TABLE_ACCURACY}. */
const CHOSEN_TO = 4e-6;
/** Error of cubic interpolation in z between rows: relative, for the visibility relative to its maximum. */
export const TABLE_ACCURACY = 1e-5;
/** Values below this share of a column's largest are not held to a relative error. */
const FLOOR = 1e-12;
const FIRST_ROWS = 32;
const DEEPEST = 14;

/** One row at ln(1 + z). */
function row(sight: LineOfSight, x: number, z = Math.expm1(x)): number[] {
  const { history } = sight;
  const Tr = history.inputs.tCmb * (1 + z);
  return [
    z,
    sight.xe(x),
    Tr * history.temperatureRatioAt(x),
    Tr,
    sight.opticalDepth(x),
    visibilityPerZ(sight, x),
    sight.conformalTime(x),
  ];
}

/**
 * Rows at redshifts that are asked for, in that order.
 * @throws {InputError} for a redshift outside 0 .. 1e4
 */
export function tableAt(sight: LineOfSight, redshifts: readonly number[]): Table {
  for (const z of redshifts)
    if (!(z >= 0 && z <= Z_TOP)) throw new InputError("range", `z = ${z}: the table covers 0 to ${Z_TOP}`);
  return {
    columns: RECOMBINATION_COLUMNS,
    units: RECOMBINATION_UNITS,
    rows: redshifts.map((z) => row(sight, Math.log1p(z), z)),
  };
}

/**
 * Rows from z = 0 to 1e4, rising. Starting from even steps of ln(1 + z), an interval is halved while the cubic through
 * its two ends and one row on either side misses its middle by more than 4e-6 in any column (relative; the visibility
 * relative to its maximum), so that a cubic spline or piecewise cubic in z reproduces every column within 1e-5.
 */
export function adaptiveTable(sight: LineOfSight): Table {
  const top = Math.log1p(Z_TOP);
  let xs = Array.from({ length: FIRST_ROWS + 1 }, (_, i) => (top * i) / FIRST_ROWS);
  let rows = xs.map((x, i) => row(sight, x, i === FIRST_ROWS ? Z_TOP : undefined));
  let fresh = new Set(xs.keys());
  for (let depth = 0; depth < DEEPEST && fresh.size > 0; depth++) {
    const columns = RECOMBINATION_COLUMNS.map((_, c) => rows.map((r) => r[c]));
    const interpolants = localPolynomials(columns[0], columns.slice(1), 4);
    const scale = columns.map((values) => Math.max(...values));
    const nextX: number[] = [xs[0]];
    const nextRows: number[][] = [rows[0]];
    const nextFresh = new Set<number>();
    for (let i = 1; i < xs.length; i++) {
      // An interval is looked at again while a row near it is new: its stencil has changed.
      if ([i - 2, i - 1, i, i + 1].some((k) => fresh.has(k))) {
        const x = (xs[i - 1] + xs[i]) / 2;
        const middle = row(sight, x);
        const missed = interpolants.some((interpolant, c) => {
          const value = middle[c + 1];
          const isVisibility = RECOMBINATION_COLUMNS[c + 1] === "visibility_per_z";
          const unit = isVisibility ? scale[c + 1] : Math.max(Math.abs(value), FLOOR * scale[c + 1]);
          return Math.abs(interpolant.value(middle[0], i - 1) - value) > CHOSEN_TO * unit;
        });
        if (missed) {
          nextFresh.add(nextX.length);
          nextX.push(x);
          nextRows.push(middle);
        }
      }
      nextX.push(xs[i]);
      nextRows.push(rows[i]);
    }
    xs = nextX;
    rows = nextRows;
    fresh = nextFresh;
  }
  return { columns: RECOMBINATION_COLUMNS, units: RECOMBINATION_UNITS, rows };
}
