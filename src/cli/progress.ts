/** One line of progress on standard error, only when that is a terminal: share, rate, time left. */
import type { Progress } from "../requests/envelope.ts";

/** Shortest time between two updates [ms]. */
const INTERVAL_MS = 100;
/** Time after which rate and time left are known well enough to be shown [ms]. */
const SETTLED_MS = 500;

/** A time in words: `8 s`, `3 min 20 s`, `2 h 5 min`. */
export function duration(seconds: number): string {
  const whole = Math.max(0, Math.ceil(seconds));
  if (whole < 60) return `${whole} s`;
  if (whole < 3600) return `${Math.floor(whole / 60)} min ${whole % 60} s`;
  return `${Math.floor(whole / 3600)} h ${Math.floor((whole % 3600) / 60)} min`;
}

/**
 * The text of a progress line.
 * @param share  done, 0 to 1
 * @param gained share done since the measurement began
 * @param ms     time of that [ms]
 */
export function progressText(
  share: number,
  what: string,
  total: number | undefined,
  gained: number,
  ms: number,
): string {
  const parts = [`${Math.round(100 * share)} % ${total === undefined ? what : `of ${total} ${what}`}`];
  if (ms >= SETTLED_MS && gained > 0) {
    if (total !== undefined) parts.push(`${Number(((1000 * gained * total) / ms).toPrecision(2))} a second`);
    parts.push(`${duration((((1 - share) / gained) * ms) / 1000)} left`);
  }
  return parts.join(", ");
}

/** A reporter for {@link Progress} and the function that wipes its line. */
export function progressLine(quiet: boolean): { readonly report?: Progress; readonly clear: () => void } {
  if (quiet || !process.stderr.isTTY) return { clear: () => {} };
  let last = Number.NEGATIVE_INFINITY;
  let shown = false;
  let stage: { what: string; share: number; at: number } | undefined;
  return {
    report: (share, what, total) => {
      const now = performance.now();
      if (stage?.what !== what || share < stage.share) stage = { what, share, at: now };
      if (now - last < INTERVAL_MS && share < 1) return;
      last = now;
      shown = true;
      const width = process.stderr.columns || 80;
      const text = progressText(share, what, total, share - stage.share, now - stage.at);
      process.stderr.write(`\r\x1b[K${text.slice(0, width - 1)}`);
    },
    clear: () => {
      if (shown) process.stderr.write("\r\x1b[K");
    },
  };
}
