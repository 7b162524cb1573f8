/** Sizes of abundances over eta: the calculation behind the generated table and its test. */
import type { Model } from "../model/prepare.ts";
import { computeTimeline } from "../nucleosynthesis/timeline.ts";

export const SCALE_ETA10 = [0.03, 0.1, 0.3, 1, 3, 6, 10, 20, 50, 109];

/** log10 of the final abundance of each nuclide at each eta10; short-lived ones 1e-3 of their peak below T9 = 0.9. */
export function abundanceScales(model: Model, etas: readonly number[]): Record<string, number[]> {
  const out: Record<string, number[]> = {};
  for (const eta10 of etas) {
    const p = model.parameters({ eta10 });
    const context = model.context(p);
    const { Y, T } = computeTimeline(context, { eta10, tauN: p.tauN, tolerance: 1e-5 });
    context.data.nuclides.forEach(({ id }, i) => {
      const final = Y[Y.length - 1][i];
      let peak = 0;
      Y.forEach((y, row) => {
        if (T[row] < 0.9e9) peak = Math.max(peak, y[i]);
      });
      const size = id === "n" ? 1e-5 : final > 1e-9 * peak ? final : 1e-3 * peak;
      out[id] ??= [];
      out[id].push(Math.log10(Math.max(size, 1e-60)));
    });
  }
  return out;
}
