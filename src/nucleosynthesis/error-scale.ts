/** Absolute tolerance of each nuclide: rtol times a multiple of the abundance it ends with at this eta. */
import { LOG10_ABUNDANCE, SCALE_ETA10 } from "./scales.generated.ts";

/**
 * Multiples of the final size below which a nuclide's error is absolute, chosen by comparing
 * runs with reference runs: at the default tolerance every reported abundance keeps 1e-5 from eta10 0.3 to 20, which a
 * test asserts.
 */
const SHARE = { light: 10, tritium: 1e-3, other: 100 } as const;
const LIGHT = new Set(["n", "p", "d", "he3", "he4", "li7", "be7"]);

/** Tolerance of a reference run: at or below it every abundance above 1e-20 is followed relatively, whatever it costs. */
export const REFERENCE_TOLERANCE = 3e-8;
const REFERENCE_FLOOR = 1e-15;

/**
 * atol_i = rtol x share x (final abundance at eta10, from a table over eta interpolated in logarithms).
 * Relative control far below the final abundance costs steps and gains nothing; a scale fixed for all eta would lose
 * D/H at high eta.
 * @param ids nuclides in the order of the abundance vector; unknown ones get 1e-30
 */
export function absoluteTolerances(ids: readonly string[], eta10: number, rtol: number): Float64Array {
  if (rtol <= REFERENCE_TOLERANCE) return new Float64Array(ids.length).fill(rtol * REFERENCE_FLOOR);
  const x = Math.log(eta10);
  let i = 0;
  while (i < SCALE_ETA10.length - 2 && eta10 > SCALE_ETA10[i + 1]) i++;
  const x0 = Math.log(SCALE_ETA10[i]);
  const x1 = Math.log(SCALE_ETA10[i + 1]);
  const u = Math.min(1, Math.max(0, (x - x0) / (x1 - x0)));
  return Float64Array.from(ids, (id) => {
    const row = LOG10_ABUNDANCE[id];
    if (!row) return rtol * 1e-30;
    const share = id === "t" ? SHARE.tritium : LIGHT.has(id) ? SHARE.light : SHARE.other;
    return rtol * share * 10 ** (row[i] + u * (row[i + 1] - row[i]));
  });
}
