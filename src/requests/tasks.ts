/** Work that may go to another thread: what is asked, and how any thread answers it. */
import type { RateLibrary } from "../nuclear/library.ts";
import type { Keys } from "../parameters/cosmology.ts";
import { answerPoint as answerPointOf, type PointAnswer, type PointQuestion } from "../sweep/point.ts";
import type { Kept } from "./dispatch.ts";
import { ModelCache } from "./model-cache.ts";

/** One point of a scan, grid or check. */
export interface PointTask {
  readonly kind: "point";
  /** Keys of the model; a thread keeps it for the next task. */
  readonly base: Keys;
  readonly question: PointQuestion;
}

/** One line of a batch. */
export interface LineTask {
  readonly kind: "line";
  /** Number of the line, from 1. */
  readonly line: number;
  readonly text: string;
}

/** The answer to a line, as a line; errors stand in it. */
export interface LineAnswer {
  readonly text: string;
}

export type Task = PointTask | LineTask;
export type TaskAnswer = PointAnswer | LineAnswer;
export type PointAnswerer = (task: PointTask) => Promise<PointAnswer>;

/** A function that answers questions about points one after the other, in this thread. */
export function pointAnswerer(library: RateLibrary, models = new ModelCache(library)): PointAnswerer {
  return async (task) => answerPointOf(await models.get(task.base), task.question);
}

/** Answers any task. */
export interface TaskAnswerer {
  (task: LineTask): Promise<LineAnswer>;
  (task: Task): Promise<TaskAnswer>;
  (task: PointTask): Promise<PointAnswer>;
}

/** A function that answers tasks one after the other, keeping what the next may share. */
export function taskAnswerer(library: RateLibrary): TaskAnswerer {
  const models = new ModelCache(library);
  const answerPoint = pointAnswerer(library, models);
  const kept: Kept = { library, models, answerPoint };
  // The requests of all commands are loaded with the first line: points need none of them.
  const line = async (task: LineTask) => (await import("./batch-line.ts")).answerLine(task, kept);
  return ((task: Task) => (task.kind === "point" ? answerPoint(task) : line(task))) as TaskAnswerer;
}
