/** Rates varied within their uncertainties: rate times f_u(T9)^p, the same p at all T9, forward and reverse. */
import type { FluxTable } from "./flux-table.ts";
import type { NetworkReaction } from "./network-data.ts";
import type { RunContext } from "./run.ts";

/** ln f_u of one reaction on the nodes of the table. */
export interface LnUncertainty {
  readonly constant: boolean;
  readonly value: Float64Array;
  /** d ln f_u/ds */
  readonly slope: Float64Array;
}

const cache = new WeakMap<FluxTable, (LnUncertainty | undefined)[]>();

/** ln f_u of reaction r on the nodes of the table, kept for the next call. */
export function lnUncertainty(table: FluxTable, reaction: NetworkReaction, r: number): LnUncertainty {
  const kept = cache.get(table) ?? [];
  cache.set(table, kept);
  const known = kept[r];
  if (known) return known;
  const count = table.intervals + 1;
  const value = Float64Array.from({ length: count }, (_, i) =>
    reaction.rate.lnFactorUncertainty(Math.exp(-table.node(i))),
  );
  const slope = new Float64Array(count);
  for (let i = 0; i < count; i++) {
    const lo = Math.max(i - 1, 0);
    const hi = Math.min(i + 1, count - 1);
    slope[i] = (value[hi] - value[lo]) / ((hi - lo) * table.step);
  }
  const constant = value.every((x) => Math.abs(x - value[0]) <= 1e-14);
  const made = { constant, value, slope };
  kept[r] = made;
  return made;
}

/** A rate varied by f_u(T9)^p whose ln f_u changes with temperature. */
export interface Variation {
  /** Index among the reactions of the network (n <-> p not counted). */
  readonly reaction: number;
  readonly p: number;
  readonly lnF: LnUncertainty;
}

/**
 * Splits variations into constant factors and those that depend on temperature.
 * @param variations p of each reaction (n <-> p not included)
 * @param factors constant factors already asked for, n <-> p first
 */
export function splitVariations(
  context: RunContext,
  variations: ArrayLike<number>,
  factors: Float64Array,
): { factors: Float64Array; variations?: readonly Variation[] } {
  const { data, table } = context;
  const all = factors.slice();
  const changing: Variation[] = [];
  for (let r = 0; r < data.reactions.length; r++) {
    const p = variations[r];
    if (p === 0) continue;
    const lnF = lnUncertainty(table, data.reactions[r], r);
    if (lnF.constant) all[r + 1] *= Math.exp(p * lnF.value[0]);
    else changing.push({ reaction: r, p, lnF });
  }
  return changing.length > 0 ? { factors: all, variations: changing } : { factors: all };
}

/** A copy of a table with the columns of varied reactions multiplied by f_u(T9)^p. */
export function variedTable(table: FluxTable, variations: readonly Variation[] | undefined): FluxTable {
  if (!variations) return table;
  const copy = table.copy();
  const count = table.intervals + 1;
  const factor = new Float64Array(count);
  const slope = new Float64Array(count);
  for (const { reaction, p, lnF } of variations) {
    for (let i = 0; i < count; i++) {
      factor[i] = Math.exp(p * lnF.value[i]);
      slope[i] = p * lnF.slope[i];
    }
    copy.multiplyColumn(2 * (reaction + 1), factor, slope);
    copy.multiplyColumn(2 * (reaction + 1) + 1, factor, slope);
  }
  return copy;
}

/** ln f_u and its slope in s at any s, between the nodes of a table. */
export function lnUncertaintyAt(table: FluxTable, { value }: LnUncertainty, s: number): { ln: number; slope: number } {
  const position = Math.min(Math.max((s - table.start) / table.step, 0), table.intervals - 1e-9);
  const i = Math.floor(position);
  const rise = value[i + 1] - value[i];
  return { ln: value[i] + (position - i) * rise, slope: rise / table.step };
}
