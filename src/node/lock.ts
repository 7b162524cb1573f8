/** One run at a time on the same output: a lock file beside it, which a dead process loses. */
import { closeSync, openSync, readFileSync, renameSync, unlinkSync, writeSync } from "node:fs";
import { hostname } from "node:os";
import { InputError } from "../numerics/check.ts";
import { refusal } from "./write-file.ts";

interface Owner {
  readonly pid: number;
  readonly host: string;
  /** When the process started, where the system tells: a number may be given out again. */
  readonly start?: string;
}

/** Path of the lock of an output file. */
export function lockPath(out: string): string {
  return `${out}.lock`;
}

/** Start time of a process, in ticks since boot, on systems with /proc. */
function startOf(pid: number): string | undefined {
  try {
    const text = readFileSync(`/proc/${pid}/stat`, "utf8");
    // Fields after the name, which may hold blanks and ends in the last bracket; the start is field 22.
    return text.slice(text.lastIndexOf(")") + 2).split(" ")[19];
  } catch {
    return undefined;
  }
}

function isAlive({ pid, start }: Owner): boolean {
  try {
    process.kill(pid, 0);
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === "ESRCH") return false;
  }
  return start === undefined || startOf(pid) === undefined || startOf(pid) === start;
}

function readOwner(path: string): Owner | undefined {
  try {
    const owner = JSON.parse(readFileSync(path, "utf8")) as Owner;
    return typeof owner.pid === "number" && typeof owner.host === "string" ? owner : undefined;
  } catch {
    return undefined;
  }
}

/** Creates the lock; false if there is one. @throws {InputError} if it cannot be written */
function create(path: string, content: string): boolean {
  try {
    const file = openSync(path, "wx");
    try {
      writeSync(file, content);
    } finally {
      closeSync(file);
    }
    return true;
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === "EEXIST") return false;
    throw refusal(path, error);
  }
}

/** Time a lock without an owner's name is given, since it is written just after it is made [ms]. */
const GRACE_MS = 500;

/**
 * Takes the output file for this process.
 * @returns a function that gives it back
 * @throws {InputError} if another run has it, here or on another host
 */
export async function lockOutput(out: string): Promise<() => void> {
  const path = lockPath(out);
  const content = `${JSON.stringify({ pid: process.pid, host: hostname(), start: startOf(process.pid) })}\n`;
  for (let attempt = 0; attempt < 5; attempt++) {
    if (create(path, content))
      return () => {
        if (readOwner(path)?.pid === process.pid) unlinkSync(path);
      };
    let owner = readOwner(path);
    if (owner === undefined) {
      await new Promise((resolve) => setTimeout(resolve, GRACE_MS));
      owner = readOwner(path);
    }
    if (owner !== undefined && owner.host !== hostname())
      throw busy(out, `process ${owner.pid} on ${owner.host}`, `if it is dead, delete ${path}`);
    if (owner !== undefined && isAlive(owner))
      throw busy(out, `process ${owner.pid}`, "wait for it or choose another file");
    // Dead: moved away under a name of our own, so that of several that see it only one removes it.
    const away = `${path}.${process.pid}`;
    try {
      renameSync(path, away);
      unlinkSync(away);
    } catch {
      // Another run was faster; the next attempt sees its lock.
    }
  }
  throw busy(out, "another run", "wait for it or choose another file");
}

function busy(out: string, who: string, remedy: string): InputError {
  return new InputError("busy", `${out}: ${who} is writing this file; ${remedy}`);
}
