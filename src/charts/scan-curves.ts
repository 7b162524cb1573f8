/** From the table of a scan to the curves of its charts: the axis along, one curve a value of the second axis. */
import type { Table } from "../numerics/table.ts";
import { numericColumn } from "../numerics/table.ts";

/** One curve of an abundance with its band. */
export interface BandedCurve {
  /** Value of the second axis; none in a scan of one axis. */
  readonly at?: number;
  readonly x: readonly number[];
  readonly value: readonly number[];
  /** One standard deviation; none without errors. */
  readonly sigma?: readonly number[];
}

/** Most curves of a panel; of more values of the second axis these are spread evenly. */
export const MOST_CURVES = 6;

/**
 * Curves of one abundance, each by rising x.
 * @param axes keys of the axes; the one with more values runs along x
 * @throws {RangeError} if a column is missing
 */
export function bandedCurves(table: Table, axes: readonly string[], abundance: string): BandedCurve[] {
  const [along, other] = orderedAxes(table, axes);
  const x = numericColumn(table, along);
  const value = numericColumn(table, abundance);
  const sigma = table.columns.includes(`${abundance}_sigma`) ? numericColumn(table, `${abundance}_sigma`) : undefined;
  const at = other === undefined ? undefined : numericColumn(table, other);
  const values =
    at === undefined
      ? [undefined]
      : spreadValues(
          [...new Set(at)].sort((a, b) => a - b),
          MOST_CURVES,
        );
  return values.map((wanted) => {
    const rows = x
      .map((_, i) => i)
      .filter((i) => at === undefined || at[i] === wanted)
      .sort((a, b) => x[a] - x[b]);
    return {
      ...(wanted === undefined ? {} : { at: wanted }),
      x: rows.map((i) => x[i]),
      value: rows.map((i) => value[i]),
      ...(sigma === undefined ? {} : { sigma: rows.map((i) => sigma[i]) }),
    };
  });
}

/** The axis along x first: the one of more values. */
export function orderedAxes(table: Table, axes: readonly string[]): readonly string[] {
  const count = (key: string) => new Set(numericColumn(table, key)).size;
  return axes.length === 2 && count(axes[1]) > count(axes[0]) ? [axes[1], axes[0]] : axes;
}

function spreadValues(values: readonly number[], most: number): number[] {
  if (values.length <= most) return [...values];
  return Array.from({ length: most }, (_, i) => values[Math.round((i * (values.length - 1)) / (most - 1))]);
}
