/** Checks of one rate file that has been read without complaint: jumps, kinks, ranges, citation. */

import type { RateTable } from "./parse-rate-file.ts";
import { evaluateRate, FIT_TOP_T9 } from "./rate.ts";

/** error: must be put right. warning: deserves a look. note: legitimate, but should be known. */
export type Severity = "error" | "warning" | "note";

/** A finding in one file: at a row (from 0), at a header key, or neither. */
export interface TableFinding {
  readonly severity: Severity;
  readonly row?: number;
  readonly key?: string;
  readonly problem: string;
}

/** Where nucleosynthesis asks for rates [GK]: the run ends at 0.01, the network starts above 10. */
export const T9_IN_USE = [0.01, 10] as const;
/** Relative deviation of a row from its neighbours' curve that counts as a jump, and as a kink. */
export const JUMP = 0.1;
export const KINK = 0.02;
/** A row must also stick out by this factor from the rows around it, whose own deviations are those of a smooth curve. */
const STICKS_OUT = 4;
/** Jumps reported in one file at most. */
const MOST_JUMPS = 5;
/** A factor uncertainty above this is more likely a percentage. */
const LARGEST_FACTOR = 20;

/** The two variables in which ln rate is smooth: ln T9, and T9^(-1/3) behind a Coulomb barrier. */
function abscissae(T9: ArrayLike<number>): readonly Float64Array[] {
  return [Float64Array.from(T9, Math.log), Float64Array.from(T9, (each) => 1 / Math.cbrt(each))];
}

/** First of the five rows that row i is judged by. */
function firstOfFive(i: number, n: number): number {
  return Math.min(Math.max(i - 2, 0), n - 5);
}

/** Deviation of y[i] from the cubic in x through the four rows around it (at the ends the four nearest). */
function leftOut(x: Float64Array, y: Float64Array, i: number): number {
  const start = firstOfFive(i, x.length);
  let predicted = 0;
  for (let j = start; j < start + 5; j++) {
    if (j === i) continue;
    let weight = 1;
    for (let k = start; k < start + 5; k++) if (k !== j && k !== i) weight *= (x[i] - x[k]) / (x[j] - x[k]);
    predicted += weight * y[j];
  }
  return y[i] - predicted;
}

/** The deviation of row i in the variable where it is smaller: the error itself where a digit is wrong. */
function deviation(xs: readonly Float64Array[], y: Float64Array, i: number): number {
  const each = xs.map((x) => leftOut(x, y, i));
  return each.reduce((a, b) => (Math.abs(b) < Math.abs(a) ? b : a));
}

/** Rows from i - reach to i + reach that exist. */
function around(i: number, reach: number, n: number): number[] {
  return Array.from({ length: 2 * reach + 1 }, (_, k) => i - reach + k).filter((k) => k >= 0 && k < n);
}

/**
 * Rows that jump off the curve of their neighbours: a deviation above {@link KINK} that is also four times larger than
 * those of rows up to six away that are judged without it. Among the rows of such a place the culprit is the one
 * whose correction leaves the others smoothest. Below the temperatures in use it is a warning only.
 */
function jumps({ T9, rate }: RateTable): TableFinding[] {
  const n = T9.length;
  const found: TableFinding[] = [];
  if (n < 5) return found;
  const xs = abscissae(T9);
  const y = Float64Array.from(rate, Math.log);
  const size = (i: number) => Math.abs(deviation(xs, y, i));
  const sticksOut = (i: number) => {
    const far = around(i, 6, n).filter((j) => i < firstOfFive(j, n) || i > firstOfFive(j, n) + 4);
    return size(i) >= KINK && size(i) >= STICKS_OUT * Math.max(...far.map(size));
  };
  for (let round = 0; round < MOST_JUMPS; round++) {
    const places = [...T9.keys()].filter(sticksOut);
    if (places.length === 0) break;
    const place = places.reduce((a, b) => (size(b) > size(a) ? b : a));
    const leftover = (i: number) => {
      const wrong = y[i];
      y[i] -= deviation(xs, y, i);
      const rest = Math.max(...around(place, 4, n).map(size));
      y[i] = wrong;
      return rest;
    };
    const row = around(place, 2, n).reduce((a, b) => (leftover(b) < leftover(a) ? b : a));
    const off = deviation(xs, y, row);
    y[row] -= off;
    if (Math.abs(off) < KINK) break;
    const jumped = Math.abs(off) >= JUMP;
    found.push({
      severity: jumped && T9[row] >= T9_IN_USE[0] ? "error" : "warning",
      row,
      problem: `rate ${jumped ? "jumps" : "has a kink,"} ${percent(off)} off the curve of its neighbours at T9 = ${T9[row]}; check the digits`,
    });
  }
  return found;
}

/** `+20 per cent`, or a factor where that is too large for one. */
function percent(lnRatio: number): string {
  const ratio = Math.exp(lnRatio);
  if (ratio > 3 || ratio < 1 / 3) return `a factor ${ratio.toPrecision(2)}`;
  return `${ratio > 1 ? "+" : ""}${(100 * (ratio - 1)).toFixed(1)} per cent`;
}

/** Findings in one file, see {@link TableFinding}; what the loader refuses has been refused before. */
export function checkTable(table: RateTable): TableFinding[] {
  const found: TableFinding[] = [];
  if (table.kind === "table") {
    found.push(...jumps(table));
    const [first, last] = table.tableT9!;
    const [low, high] = table.validT9;
    if (first > T9_IN_USE[0])
      found.push({ severity: "note", key: "table_T9", problem: `the rate counts as zero below T9 = ${first}` });
    if (last < T9_IN_USE[1])
      found.push({ severity: "note", key: "table_T9", problem: `the rate is held constant above T9 = ${last}` });
    const outside = [
      ...(low > Math.max(first, T9_IN_USE[0]) ? [`below T9 = ${low}`] : []),
      ...(high < Math.min(last, T9_IN_USE[1]) ? [`above T9 = ${high}`] : []),
    ];
    if (outside.length > 0)
      found.push({
        severity: "note",
        key: "valid_T9",
        problem: `rows ${outside.join(" and ")} are used, beyond the claim of the source`,
      });
  } else if (table.kind === "reaclib") {
    const [low, high] = table.validT9;
    if (low > T9_IN_USE[0] || high < Math.min(FIT_TOP_T9, T9_IN_USE[1]))
      found.push({
        severity: "note",
        key: "valid_T9",
        problem: `the fit is used from T9 = ${T9_IN_USE.join(" to ")}, beyond the claim of the source`,
      });
    const rate = evaluateRate(table);
    for (let T9: number = T9_IN_USE[0]; T9 <= T9_IN_USE[1]; T9 *= 1.25)
      if (!Number.isFinite(rate.lnRate(T9))) {
        found.push({ severity: "error", row: 0, problem: `the fit gives no number at T9 = ${T9.toPrecision(3)}` });
        break;
      }
  }
  const largest = table.factorUncertainty.findIndex((fU) => fU > LARGEST_FACTOR);
  if (largest >= 0)
    found.push({
      severity: "warning",
      ...(table.kind === "table" ? { row: largest } : { key: "f_u" }),
      problem: `f_u = ${table.factorUncertainty[largest]} is very large; it is a factor, not per cent`,
    });
  if (!/(1[89]|20)\d\d/.test(table.citation))
    found.push({ severity: "warning", key: "citation", problem: "the citation names no year" });
  if (table.uncertaintyBasis === "assumed" && !/ASSUMED/.test(table.note ?? ""))
    found.push({
      severity: "warning",
      key: "uncertainty_basis",
      problem: "assumed, but the note does not say ASSUMED",
    });
  return found;
}
