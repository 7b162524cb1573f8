/** One worker thread as seen from the main thread: tasks in, promises out. */
import { existsSync } from "node:fs";
import { createRequire } from "node:module";
import { dirname, join } from "node:path";
import { fileURLToPath, pathToFileURL } from "node:url";
import { Worker } from "node:worker_threads";
import { CalculationError, InputError } from "../numerics/check.ts";
import type { Task, TaskAnswer } from "../requests/tasks.ts";
import type { WorkerError, WorkerReply, WorkerStart, WorkerTasks } from "./worker.ts";

interface Waiting {
  readonly resolve: (answer: TaskAnswer) => void;
  readonly reject: (error: unknown) => void;
}

/** A thread with its own rates and models. */
export interface WorkerThread {
  /** Tasks handed over and not yet answered. */
  readonly pending: number;
  /** Hands tasks over; each promise settles when its answer is there. */
  send(tasks: readonly Task[]): Promise<TaskAnswer>[];
  stop(): Promise<unknown>;
}

/**
 * What a worker runs: the file of the build where this is built code, else the source through the development loader.
 * @throws {CalculationError} if the installation lacks it
 */
function workerEntry(): URL {
  const here = fileURLToPath(import.meta.url);
  if (here.endsWith(".ts")) return sourceEntry();
  for (let folder = dirname(here); ; folder = dirname(folder)) {
    const candidate = join(folder, "node", "worker.mjs");
    if (existsSync(candidate)) return pathToFileURL(candidate);
    if (dirname(folder) === folder)
      throw new CalculationError("worker", `node/worker.mjs not found above ${here}: reinstall the package`);
  }
}

function sourceEntry(): URL {
  const loader = pathToFileURL(
    createRequire(import.meta.url)
      .resolve("tsx/esm/api")
      .replace(/\.cjs$/, ".mjs"),
  ).href;
  const source = new URL("./worker.ts", import.meta.url).href;
  const code = `import { register } from ${JSON.stringify(loader)}; register(); await import(${JSON.stringify(source)});`;
  return new URL(`data:text/javascript,${encodeURIComponent(code)}`);
}

function revive({ kind, code, message, stack }: WorkerError): Error {
  const error =
    kind === "input"
      ? new InputError(code, message)
      : kind === "calculation"
        ? new CalculationError(code, message)
        : new Error(message);
  if (stack !== undefined) error.stack = stack;
  return error;
}

/** Starts a thread; it loads its rates while the caller goes on. */
export function startWorker(start: WorkerStart): WorkerThread {
  const worker = new Worker(workerEntry(), { workerData: start });
  const waiting: Waiting[] = [];
  let broken: unknown;
  worker.on("message", (reply: WorkerReply) => {
    const next = waiting.shift();
    if ("answer" in reply) next?.resolve(reply.answer);
    else next?.reject(revive(reply.error));
  });
  const fail = (error: unknown) => {
    broken ??= error;
    for (const each of waiting.splice(0)) each.reject(error);
  };
  worker.on("error", fail);
  worker.on("exit", (code) => fail(new CalculationError("worker", `a worker thread ended with status ${code}`)));
  return {
    get pending() {
      return waiting.length;
    },
    send(tasks) {
      if (broken !== undefined) return tasks.map(() => Promise.reject(broken));
      const answers = tasks.map(() => new Promise<TaskAnswer>((resolve, reject) => waiting.push({ resolve, reject })));
      worker.postMessage({ tasks } satisfies WorkerTasks);
      return answers;
    },
    stop: () => worker.terminate(),
  };
}
