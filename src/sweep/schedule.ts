/** Which task comes next for which thread: runs of tasks that share preparation stay together, late ones are split. */

interface Run {
  next: number;
  end: number;
  /** Whether a thread is at work on it. */
  taken: boolean;
}

/** Hands out the numbers 0 to count - 1, each once. */
export interface Schedule {
  /** Up to `most` numbers for a thread; none when all that is left is with others or beyond `limit`. */
  take(thread: number, most: number): number[];
  /** Numbers not yet handed out. */
  readonly left: number;
  /** Numbers from `limit` on are no longer handed out. */
  stopAt(limit: number): void;
}

/** Fewest numbers left of a run that is split in two: below, a new thermal history costs more than it saves. */
const SMALLEST_SPLIT = 4;

/**
 * @param count    number of tasks
 * @param affinity word of a task; neighbours of the same word form a run, which one thread does unless others idle
 */
export function makeSchedule(count: number, affinity: (index: number) => string): Schedule {
  const runs: Run[] = [];
  let last: string | undefined;
  for (let i = 0; i < count; i++) {
    const word = affinity(i);
    if (word === last) runs[runs.length - 1].end = i + 1;
    else runs.push({ next: i, end: i + 1, taken: false });
    last = word;
  }
  const current = new Map<number, Run>();
  let firstFree = 0;
  let limit = count;
  let left = count;

  const length = (run: Run) => Math.max(0, Math.min(run.end, limit) - run.next);

  function runFor(thread: number): Run | undefined {
    const own = current.get(thread);
    if (own !== undefined && length(own) > 0) return own;
    while (firstFree < runs.length && (runs[firstFree].taken || length(runs[firstFree]) === 0)) firstFree++;
    const free = runs[firstFree];
    if (free !== undefined) {
      free.taken = true;
      return free;
    }
    let longest: Run | undefined;
    for (const run of current.values()) if (longest === undefined || length(run) > length(longest)) longest = run;
    if (longest === undefined || length(longest) < SMALLEST_SPLIT) return undefined;
    const middle = longest.next + Math.ceil(length(longest) / 2);
    const half: Run = { next: middle, end: longest.end, taken: true };
    longest.end = middle;
    return half;
  }

  return {
    take(thread, most) {
      const run = runFor(thread);
      if (run === undefined) return [];
      current.set(thread, run);
      const size = Math.min(most, length(run));
      const numbers = Array.from({ length: size }, (_, i) => run.next + i);
      run.next += size;
      left -= size;
      return numbers;
    },
    get left() {
      return left;
    },
    stopAt(at) {
      limit = Math.min(limit, at);
    },
  };
}
