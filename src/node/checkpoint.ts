/** Checkpoint of a long run: every finished piece is a line of a file beside the output, and is not computed again. */
import { createHash } from "node:crypto";
import {
  closeSync,
  existsSync,
  fsyncSync,
  openSync,
  readFileSync,
  truncateSync,
  unlinkSync,
  writeFileSync,
} from "node:fs";
import { InputError } from "../numerics/check.ts";
import type { Engine } from "../sweep/engine.ts";
import { refusal } from "./write-file.ts";

/** Finished lines are written so often [ms]: what a killed process loses at most. */
const WRITE_EVERY_MS = 200;
/** They are forced to the disk so often [ms]: what a machine that loses power loses at most. */
const SYNC_EVERY_MS = 3000;

/** Path of the checkpoint of an output file. */
export function checkpointPath(out: string): string {
  return `${out}.checkpoint`;
}

/** A checkpoint that is open for this run. */
export interface Checkpoint {
  readonly path: string;
  /** Pieces found from an earlier run. */
  readonly found: number;
  /** Pieces kept now. */
  readonly kept: number;
  /** An answer of an earlier run: piece `index` of the stage. */
  get(stage: number, index: number): unknown;
  /** Keeps an answer that JSON can hold. @throws {InputError} if the disk is full */
  put(stage: number, index: number, answer: unknown): void;
  /** Writes what is not yet written and closes the file. */
  close(): void;
  /** Removes the file: the output is complete. */
  remove(): void;
}

function signed(text: string): string {
  return `${createHash("sha256").update(text).digest("hex").slice(0, 8)} ${text}\n`;
}

/** The content of a line that is whole and unharmed. */
function verified(line: string): string | undefined {
  const text = line.slice(9);
  return signed(text) === `${line}\n` ? text : undefined;
}

/**
 * Opens the checkpoint of an output file.
 * @param request what the run computes, with everything its answers depend on
 * @param resume  whether an earlier run is to be continued
 * @throws {InputError} if there is a checkpoint but `resume` was not asked for, it belongs to another request, or its
 *   first line is damaged
 */
export function openCheckpoint(out: string, request: object, resume: boolean): Checkpoint {
  const path = checkpointPath(out);
  const header = JSON.stringify(request);
  const known = new Map<string, unknown>();
  let file: number | undefined;
  let started = false;
  if (existsSync(path)) {
    if (!resume)
      throw new InputError(
        "checkpoint",
        `${path}: left by a run that did not finish; add --resume to go on from it, or delete it to start anew`,
      );
    const whole = readLines(path, header, known);
    if (whole > 0) {
      truncateSync(path, whole);
      started = true;
    } else unlinkSync(path);
  }
  const found = known.size;
  let waiting: string[] = [];
  let written = performance.now();
  let synced = written;

  function write(): void {
    if (waiting.length === 0) return;
    try {
      file ??= openSync(path, started ? "a" : "wx");
      const text = `${started ? "" : signed(header)}${waiting.join("")}`;
      started = true;
      waiting = [];
      writeFileSync(file, text);
      const now = performance.now();
      if (now - synced > SYNC_EVERY_MS) {
        fsyncSync(file);
        synced = now;
      }
    } catch (error) {
      throw refusal(path, error);
    }
  }

  return {
    path,
    found,
    get kept() {
      return known.size;
    },
    get: (stage, index) => known.get(`${stage} ${index}`),
    put(stage, index, answer) {
      known.set(`${stage} ${index}`, true);
      waiting.push(signed(JSON.stringify([stage, index, answer])));
      const now = performance.now();
      if (now - written < WRITE_EVERY_MS) return;
      written = now;
      write();
    },
    close() {
      write();
      if (file === undefined) return;
      fsyncSync(file);
      closeSync(file);
      file = undefined;
    },
    remove() {
      if (file !== undefined) closeSync(file);
      file = undefined;
      waiting = [];
      if (existsSync(path)) unlinkSync(path);
    },
  };
}

/** Reads the pieces of a checkpoint up to the first line that is torn. @returns length of the whole lines [bytes] */
function readLines(path: string, header: string, known: Map<string, unknown>): number {
  const bytes = readFileSync(path);
  let whole = 0;
  for (let end = bytes.indexOf(10); end >= 0; end = bytes.indexOf(10, whole)) {
    const text = verified(bytes.toString("utf8", whole, end));
    if (text === undefined) {
      // A first line that is whole but not ours is no torn write: somebody changed the file.
      if (whole === 0)
        throw new InputError("checkpoint", `${path}:1: damaged, not a checkpoint; delete it to start anew`);
      break;
    }
    if (whole === 0) requireSame(path, header, text);
    else {
      const [stage, index, answer] = JSON.parse(text) as [number, number, unknown];
      known.set(`${stage} ${index}`, answer);
    }
    whole = end + 1;
  }
  return whole;
}

function requireSame(path: string, header: string, found: string): void {
  if (header === found) return;
  const [asked, other] = [header, found].map((text) => JSON.parse(text) as Record<string, unknown>);
  const names = [...new Set([...Object.keys(asked), ...Object.keys(other)])];
  const differing = names.filter((name) => JSON.stringify(asked[name]) !== JSON.stringify(other[name]));
  throw new InputError(
    "checkpoint",
    `${path}: belongs to another request (${differing.join(", ")} differ); give the same options, or delete it to start anew`,
  );
}

/** The same engine, which asks only for what the checkpoint does not hold, and keeps what it answers. */
export function withCheckpoint<Question, Answer>(
  engine: Engine<Question, Answer>,
  checkpoint: Checkpoint,
): Engine<Question, Answer> {
  let stages = 0;
  return {
    async answerAll(questions, affinity, done) {
      const stage = stages++;
      const answers = questions.map((_, i) => checkpoint.get(stage, i) as Answer | undefined);
      const missing = questions.map((_, i) => i).filter((i) => answers[i] === undefined);
      answers.forEach((answer, i) => {
        if (answer !== undefined) done?.(answer, i);
      });
      await engine.answerAll(
        missing.map((i) => questions[i]),
        (question, k) => affinity(question, missing[k]),
        (answer, k) => {
          answers[missing[k]] = answer;
          checkpoint.put(stage, missing[k], answer);
          done?.(answer, missing[k]);
        },
      );
      return answers as Answer[];
    },
  };
}
