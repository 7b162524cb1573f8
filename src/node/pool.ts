/** The pool: this thread and, where the measured cost says that it pays, workers beside it. Answers never depend on it. */
import { availableParallelism } from "node:os";
import type { TaskEngine } from "../requests/sweep.ts";
import type { PointAnswerer, PointTask } from "../requests/tasks.ts";
import type { PointAnswer } from "../sweep/point.ts";
import { makeSchedule } from "../sweep/schedule.ts";
import { startWorker, type WorkerThread } from "./worker-thread.ts";

/** How a pool works. */
export interface PoolOptions {
  /** Most threads, this one included; all cores without. */
  readonly jobs?: number;
  /** Folder of a second rate library, for the workers. */
  readonly rates?: string;
  /** Answers a task in this thread. */
  readonly answer: PointAnswerer;
  /** Ends the work with the signal's reason. */
  readonly signal?: AbortSignal;
}

/** An engine that can be closed. */
export interface Pool extends TaskEngine {
  /** Threads at work now, this one included. */
  readonly threads: number;
  /** Ends the workers. */
  close(): Promise<void>;
}

/**
 * Work left, measured on the tasks done so far, from which workers pay [ms]. A worker is of use 0.4 to 0.6 s after its
 * start (modules, rates, thermal history), during which it also takes its share of the memory bus.
 */
export const WORKERS_PAY_MS = 1000;
/** Time of tasks that are judged by [ms]. */
const JUDGED_MS = 60;
/** Work handed to a worker at once [ms], and at most so many tasks. */
const CHUNK_MS = 40;
const LARGEST_CHUNK = 64;

/** @throws whatever a task throws: of several the one of the first task, so that it does not depend on the threads */
export function makePool(options: PoolOptions): Pool {
  const most = options.jobs ?? availableParallelism();
  const workers: WorkerThread[] = [];
  const start = () => {
    while (workers.length < most - 1) workers.push(startWorker({ rates: options.rates }));
  };
  return {
    get threads() {
      return 1 + workers.length;
    },
    async close() {
      await Promise.all(workers.splice(0).map((worker) => worker.stop()));
    },
    answerAll(tasks, affinity, done) {
      return answerWith(tasks, affinity, done, options, workers, most > 1 ? start : undefined);
    },
  };
}

/** Lets timers, signals and messages of workers through. */
const breathe = () => new Promise<void>((resolve) => setImmediate(resolve));

async function answerWith(
  tasks: readonly PointTask[],
  affinity: (task: PointTask, index: number) => string,
  done: ((answer: PointAnswer, index: number) => void) | undefined,
  { answer, signal }: PoolOptions,
  workers: readonly WorkerThread[],
  startWorkers: (() => void) | undefined,
): Promise<PointAnswer[]> {
  const schedule = makeSchedule(tasks.length, (i) => affinity(tasks[i], i));
  const answers = new Array<PointAnswer>(tasks.length);
  let failure: { readonly index: number; readonly error: unknown } | undefined;
  let own = { tasks: 0, ms: 0 };
  const mean = () => own.ms / Math.max(1, own.tasks);
  const record = (index: number, found: PointAnswer) => {
    answers[index] = found;
    done?.(found, index);
  };
  const fail = (index: number, error: unknown) => {
    if (failure === undefined || index < failure.index) failure = { index, error };
    schedule.stopAt(index);
  };
  const outstanding = new Set<Promise<void>>();

  const feed = (worker: WorkerThread, thread: number) => {
    const size = Math.max(1, Math.min(LARGEST_CHUNK, Math.round(CHUNK_MS / Math.max(mean(), 1e-3))));
    while (worker.pending <= size / 2) {
      const indices = schedule.take(thread, size);
      if (indices.length === 0) return;
      worker.send(indices.map((i) => tasks[i])).forEach((promise, k) => {
        const settled = promise
          .then(
            (found) => record(indices[k], found as PointAnswer),
            (error) => fail(indices[k], error),
          )
          .then(() => {
            outstanding.delete(settled);
            feed(worker, thread);
          });
        outstanding.add(settled);
      });
    }
  };
  const feedAll = () => {
    workers.forEach((worker, i) => {
      feed(worker, i + 1);
    });
  };

  const interrupted = aborted(signal);
  if (workers.length > 0) own = { tasks: 1, ms: CHUNK_MS / 4 };
  for (let first = true; ; first = false) {
    signal?.throwIfAborted();
    if (workers.length > 0) feedAll();
    const [index] = schedule.take(0, 1);
    if (index === undefined) {
      if (outstanding.size === 0) break;
      await Promise.race([...outstanding, interrupted]);
      continue;
    }
    const begin = performance.now();
    try {
      record(index, await answer(tasks[index]));
    } catch (error) {
      fail(index, error);
    }
    const took = performance.now() - begin;
    // The first task of all prepares what the others share.
    if (!first || tasks.length === 1) own = { tasks: own.tasks + 1, ms: own.ms + took };
    if (startWorkers && workers.length === 0 && own.ms > JUDGED_MS && mean() * schedule.left > WORKERS_PAY_MS)
      startWorkers();
    await breathe();
  }
  if (failure !== undefined) throw failure.error;
  return answers;
}

/** Rejects when the signal is given; never settles otherwise. */
function aborted(signal: AbortSignal | undefined): Promise<never> {
  const promise = new Promise<never>((_, reject) => {
    signal?.addEventListener("abort", () => reject(signal.reason), { once: true });
  });
  promise.catch(() => {});
  return promise;
}
