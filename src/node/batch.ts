/** Requests in, answers out, one JSON object a line, in order, with as many under way as memory and threads allow. */
import type { Readable, Writable } from "node:stream";
import { InputError } from "../numerics/check.ts";
import { lineError } from "../requests/batch-line.ts";
import { type InputLine, inputLines, LONGEST_LINE } from "./input-lines.ts";
import type { TaskStream } from "./task-stream.ts";
import { refusal } from "./write-file.ts";

/** What became of a batch. */
export interface BatchOutcome {
  readonly answers: number;
  /** The reader of the answers went away. */
  readonly closed: boolean;
}

/** Answers whose text is held until those before them are written, at most [characters]. */
const MOST_HELD = 64_000_000;

function problemOf(line: InputLine & { problem: string }): string {
  const what =
    line.problem === "too-long"
      ? new InputError("too-long", `the line is longer than ${LONGEST_LINE} bytes; split the request`)
      : new InputError("not-text", "the line is not UTF-8 text; write one JSON object a line");
  return lineError(line.number, what);
}

/**
 * Answers every line of the input. Reading stops while enough is under way, or while the output is not taken.
 * @param signal ends the batch after the answer that is being written
 * @param told   the number of answers, as they are written
 */
export async function runBatch(
  input: Readable,
  output: Writable,
  stream: TaskStream,
  signal: AbortSignal,
  told?: (answers: number) => void,
): Promise<BatchOutcome> {
  let answers = 0;
  let closed = false;
  let failure: unknown;
  let changed = () => {};
  let giveUp = () => {};
  const ended = new AbortController();
  const stop = () => {
    ended.abort();
    input.destroy();
    changed();
    giveUp();
  };
  signal.addEventListener("abort", stop, { once: true });
  const onError = (error: NodeJS.ErrnoException) => {
    if (error.code === "EPIPE" || error.code === "ERR_STREAM_DESTROYED") closed = true;
    else failure ??= refusal("standard output", error);
    stop();
  };
  // Stays: an output that is gone may say so once more after the end.
  output.on("error", onError);

  const underWay: Promise<string>[] = [];
  let held = 0;
  const change = () => new Promise<void>((resolve) => (changed = resolve));
  let reading = true;

  async function write(): Promise<void> {
    while (!ended.signal.aborted) {
      const head = underWay[0];
      if (head === undefined) {
        if (!reading) return;
        await change();
        continue;
      }
      // No Promise.race with a promise that lives as long as the batch: it would keep every answer.
      const text = await new Promise<string | undefined>((resolve, reject) => {
        giveUp = () => resolve(undefined);
        head.then(resolve, reject);
      });
      if (text === undefined || ended.signal.aborted) return;
      underWay.shift();
      held -= text.length;
      if (!output.write(`${text}\n`)) await drained(output, ended.signal);
      answers++;
      told?.(answers);
      changed();
    }
  }

  const writing = write();
  try {
    for await (const line of inputLines(input, ended.signal)) {
      const answer =
        "problem" in line
          ? Promise.resolve(problemOf(line))
          : stream.submit({ kind: "line", line: line.number, text: line.text }).then((found) => found.text);
      underWay.push(
        answer.then((text) => {
          held += text.length;
          return text;
        }),
      );
      changed();
      while (!ended.signal.aborted && (underWay.length >= stream.window || held > MOST_HELD)) await change();
      if (ended.signal.aborted) break;
    }
  } catch (error) {
    if (!ended.signal.aborted) failure ??= error;
  }
  reading = false;
  changed();
  await writing;
  signal.removeEventListener("abort", stop);
  if (failure !== undefined) throw failure;
  return { answers, closed };
}

/** Waits until the output takes more, or the batch is over. */
function drained(output: Writable, ended: AbortSignal): Promise<void> {
  if (ended.aborted) return Promise.resolve();
  return new Promise((resolve) => {
    const go = () => {
      output.off("drain", go);
      ended.removeEventListener("abort", go);
      resolve();
    };
    output.on("drain", go);
    ended.addEventListener("abort", go);
  });
}
