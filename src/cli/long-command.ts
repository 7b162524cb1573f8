/** What commands that run many cases share: threads, a lock on the output, a checkpoint, an orderly end on a signal. */
import { realpathSync, statSync } from "node:fs";
import { type Checkpoint, openCheckpoint, withCheckpoint } from "../node/checkpoint.ts";
import { Interrupted, listenForInterrupt } from "../node/interrupt.ts";
import { loadRates } from "../node/load-rates.ts";
import { lockOutput } from "../node/lock.ts";
import { makePool } from "../node/pool.ts";
import { removeLeftovers, requireWritable } from "../node/write-file.ts";
import { InputError } from "../numerics/check.ts";
import { ratesDigest } from "../requests/rates-digest.ts";
import type { TaskEngine } from "../requests/sweep.ts";
import { pointAnswerer } from "../requests/tasks.ts";
import { VERSION } from "../version.ts";
import { type Options, toKeys } from "./options.ts";

/**
 * Runs a command with a pool of threads. With `--out` the file is locked for this run, and finished pieces are kept in
 * a checkpoint beside it, from which `--resume` goes on; it is removed when the output is complete.
 * @param command name of the command
 * @param run     the command, given the engine for its tasks; it has written its output when it returns
 * @throws {InputError} if another run writes the same file; {@link Interrupted} on SIGINT or SIGTERM
 */
export async function longCommand(
  command: string,
  options: Options,
  run: (engine: TaskEngine) => Promise<void>,
): Promise<void> {
  if (options.out !== undefined) await requireWritable(options.out);
  const out = regularTarget(options.out);
  const resume = options.resume === true;
  if (resume && out === undefined)
    throw new InputError("conflict", "--resume: needs --out FILE, beside which the checkpoint of the earlier run lies");
  const library = loadRates(options.rates);
  const interrupt = listenForInterrupt();
  let unlock = () => {};
  let checkpoint: Checkpoint | undefined;
  try {
    if (out !== undefined) {
      unlock = await lockOutput(out);
      await removeLeftovers(out);
    }
    const keys = toKeys(options);
    const pool = makePool({
      jobs: options.jobs as number | undefined,
      rates: options.rates,
      answer: pointAnswerer(library),
      signal: interrupt.signal,
    });
    try {
      if (out !== undefined)
        checkpoint = openCheckpoint(
          out,
          { version: VERSION, command, ...keys, rates: await ratesDigest(library, keys) },
          resume,
        );
      await run(checkpoint === undefined ? pool : withCheckpoint(pool, checkpoint));
      checkpoint?.remove();
    } finally {
      await pool.close();
    }
  } catch (error) {
    throw error instanceof Interrupted ? new Interrupted(interruptedMessage(checkpoint)) : error;
  } finally {
    checkpoint?.close();
    interrupt.dispose();
    unlock();
  }
}

/** The output as a path without links; none for standard output or a device. */
function regularTarget(out: string | undefined): string | undefined {
  if (out === undefined) return undefined;
  const found = statSync(out, { throwIfNoEntry: false });
  if (found === undefined) return out;
  return found.isFile() ? realpathSync(out) : undefined;
}

function interruptedMessage(checkpoint: Checkpoint | undefined): string {
  if (checkpoint === undefined || checkpoint.kept === 0) return "interrupted: nothing was written";
  const again = `${commandLine(["--resume"])} --resume`;
  return `interrupted: ${checkpoint.kept} finished pieces are kept in ${checkpoint.path}; go on with: ${again}`;
}

/** The command line of this run, as one writes it, without some words. */
export function commandLine(without: readonly string[]): string {
  const words = process.argv.slice(2).filter((word) => !without.includes(word));
  return ["emberline", ...words.map(shellWord)].join(" ");
}

function shellWord(word: string): string {
  return /^[\w@%+=:,./±-]+$/.test(word) ? word : `'${word.replaceAll("'", `'\\''`)}'`;
}
