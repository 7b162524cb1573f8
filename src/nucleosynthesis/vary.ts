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

/**
 * Factors and, where an uncertainty depends on temperature, a table with its columns varied.
 * @param variations p of each reaction (n <-> p not included)
 * @param factors constant factors already asked for, n <-> p first
 */
export function variedTable(
  context: RunContext,
  variations: ArrayLike<number>,
  factors: Float64Array,
): { factors: Float64Array; table?: FluxTable } {
  const { data, table } = context;
  const varied = factors.slice();
  let copy: FluxTable | undefined;
  const count = table.intervals + 1;
  for (let r = 0; r < data.reactions.length; r++) {
    const p = variations[r];
    if (p === 0) continue;
    const ln = lnUncertainty(table, data.reactions[r], r);
    if (ln.constant) {
      varied[r + 1] *= Math.exp(p * ln.value[0]);
      continue;
    }
    copy ??= table.copy();
    const factor = new Float64Array(count);
    const slope = new Float64Array(count);
    for (let i = 0; i < count; i++) {
      factor[i] = Math.exp(p * ln.value[i]);
      slope[i] = p * ln.slope[i];
    }
    copy.multiplyColumn(2 * (r + 1), factor, slope);
    copy.multiplyColumn(2 * (r + 1) + 1, factor, slope);
  }
  return copy ? { factors: varied, table: copy } : { factors: varied };
}
