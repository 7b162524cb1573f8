/** One line of progress on standard error, only when that is a terminal. */
import type { Progress } from "../requests/envelope.ts";

/** Shortest time between two updates [ms]. */
const INTERVAL_MS = 100;

/** A reporter for {@link Progress} and the function that wipes its line. */
export function progressLine(quiet: boolean): { readonly report?: Progress; readonly clear: () => void } {
  if (quiet || !process.stderr.isTTY) return { clear: () => {} };
  let last = Number.NEGATIVE_INFINITY;
  let shown = false;
  return {
    report: (share, what) => {
      const now = performance.now();
      if (now - last < INTERVAL_MS && share < 1) return;
      last = now;
      shown = true;
      const width = process.stderr.columns ?? 80;
      process.stderr.write(`\r\x1b[K${`${Math.round(100 * share)} % ${what}`.slice(0, width - 1)}`);
    },
    clear: () => {
      if (shown) process.stderr.write("\r\x1b[K");
    },
  };
}
