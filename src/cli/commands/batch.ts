/** Command `batch`: one JSON request a line in, one JSON answer a line out. */
import { runBatch } from "../../node/batch.ts";
import { Interrupted, listenForInterrupt } from "../../node/interrupt.ts";
import { loadRates } from "../../node/load-rates.ts";
import { printNotice } from "../../node/print.ts";
import { makeTaskStream } from "../../node/task-stream.ts";
import { taskAnswerer } from "../../requests/tasks.ts";
import type { Options } from "../options.ts";

/** Shortest time between two progress lines [ms]. */
const INTERVAL_MS = 200;

/** Number of answers and their rate on one line, only to a terminal. */
function counter(quiet: boolean): { readonly told?: (answers: number) => void; readonly clear: () => void } {
  if (quiet || !process.stderr.isTTY) return { clear: () => {} };
  const start = performance.now();
  let last = start;
  return {
    told: (answers) => {
      const now = performance.now();
      if (now - last < INTERVAL_MS) return;
      last = now;
      const rate = Number(((1000 * answers) / (now - start)).toPrecision(3));
      process.stderr.write(`\r\x1b[K${answers} answers, ${rate} a second`);
    },
    clear: () => process.stderr.write("\r\x1b[K"),
  };
}

export async function run(options: Options): Promise<void> {
  const library = loadRates(options.rates);
  const stream = makeTaskStream({
    jobs: options.jobs as number | undefined,
    rates: options.rates,
    answer: taskAnswerer(library),
  });
  const interrupt = listenForInterrupt();
  const { told, clear } = counter(options.quiet === true);
  if (process.stdin.isTTY && options.quiet !== true)
    await printNotice('emberline: one JSON request a line, e.g. {"command": "abundances", "omegaB": 0.022}');
  try {
    const { answers } = await runBatch(process.stdin, process.stdout, stream, interrupt.signal, told);
    if (interrupt.signal.aborted)
      throw new Interrupted(`interrupted: ${answers} answers were written; the rest of the input was not read`);
  } finally {
    clear();
    interrupt.dispose();
    await stream.close();
  }
}
