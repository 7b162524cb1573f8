/** A worker thread: answers tasks in the order they come. */
import { parentPort, workerData } from "node:worker_threads";
import { EmberlineError, InputError } from "../numerics/check.ts";
import { type Task, type TaskAnswer, taskAnswerer } from "../requests/tasks.ts";
import { loadRates } from "./load-rates.ts";

/** What a worker is given when it starts. */
export interface WorkerStart {
  /** Folder of a second rate library. */
  readonly rates?: string;
}

/** Tasks to a worker. */
export interface WorkerTasks {
  readonly tasks: readonly Task[];
}

/** An error as it travels: its class is known by name. */
export interface WorkerError {
  readonly kind: "input" | "calculation" | "other";
  readonly code: string;
  readonly message: string;
  readonly stack?: string;
}

/** One answer of a worker, in the order of the tasks. */
export type WorkerReply = { readonly answer: TaskAnswer } | { readonly error: WorkerError };

function describe(error: unknown): WorkerError {
  if (error instanceof EmberlineError)
    return { kind: error instanceof InputError ? "input" : "calculation", code: error.code, message: error.message };
  const { message, stack } = error instanceof Error ? error : new Error(String(error));
  return { kind: "other", code: "failed", message, stack };
}

if (parentPort !== null) {
  const port = parentPort;
  const { rates } = workerData as WorkerStart;
  const answer = taskAnswerer(loadRates(rates));
  let busy = Promise.resolve();
  port.on("message", ({ tasks }: WorkerTasks) => {
    busy = busy.then(async () => {
      for (const task of tasks) {
        try {
          port.postMessage({ answer: await answer(task) } satisfies WorkerReply);
        } catch (error) {
          port.postMessage({ error: describe(error) } satisfies WorkerReply);
        }
      }
    });
  });
}
