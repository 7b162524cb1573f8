/** Single tasks to whichever thread is free: this one first, workers once the measured cost says that they pay. */
import { availableParallelism } from "node:os";
import type { LineAnswer, LineTask } from "../requests/tasks.ts";
import { startWorker, type WorkerThread } from "./worker-thread.ts";

/** How a stream works. */
export interface StreamOptions {
  /** Most threads; all cores without. */
  readonly jobs?: number;
  /** Folder of a second rate library, for the workers. */
  readonly rates?: string;
  /** Answers a task in this thread. */
  readonly answer: (task: LineTask) => Promise<LineAnswer>;
}

export interface TaskStream {
  /** Answers a task; tasks begin in the order they come. */
  submit(task: LineTask): Promise<LineAnswer>;
  /** Tasks it is worth having under way at once. */
  readonly window: number;
  close(): Promise<void>;
}

/**
 * Time of work in this thread after which, with more waiting, workers are started [ms]: about what their start costs,
 * so that a batch of unknown length takes at most twice the time of the better choice.
 */
const START_AFTER_MS = 1500;
/** Tasks handed to a worker before it has answered the first. */
const AHEAD = 16;
/** Tasks under way for each thread. */
const WINDOW = 32;

interface Waiting {
  readonly task: LineTask;
  readonly resolve: (answer: LineAnswer) => void;
  readonly reject: (error: unknown) => void;
}

export function makeTaskStream({ jobs = availableParallelism(), rates, answer }: StreamOptions): TaskStream {
  const queue: Waiting[] = [];
  const workers: WorkerThread[] = [];
  let spent = 0;
  let busyHere = false;

  async function workHere(): Promise<void> {
    busyHere = true;
    // With workers this thread reads and writes only.
    while (queue.length > 0 && workers.length === 0) {
      const { task, resolve, reject } = queue.shift() as Waiting;
      const begin = performance.now();
      await answer(task).then(resolve, reject);
      spent += performance.now() - begin;
      await new Promise((go) => setImmediate(go));
      if (jobs > 1 && spent > START_AFTER_MS && queue.length >= jobs) {
        for (let i = 0; i < jobs; i++) workers.push(startWorker({ rates }));
        feed();
      }
    }
    busyHere = false;
  }

  function feed(): void {
    for (;;) {
      const worker = workers.reduce((a, b) => (b.pending < a.pending ? b : a));
      if (queue.length === 0 || worker.pending >= AHEAD) return;
      const { task, resolve, reject } = queue.shift() as Waiting;
      const [promise] = worker.send([task]);
      promise
        .then((found) => resolve(found as LineAnswer), reject)
        .finally(() => {
          if (workers.length > 0) feed();
        });
    }
  }

  return {
    window: WINDOW * jobs,
    submit(task) {
      return new Promise((resolve, reject) => {
        queue.push({ task, resolve, reject });
        if (workers.length > 0) feed();
        else if (!busyHere) void workHere();
      });
    },
    async close() {
      await Promise.all(workers.splice(0).map((worker) => worker.stop()));
    },
  };
}
