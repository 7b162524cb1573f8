/** Work that may go to another thread: what is asked, and how any thread answers it. */
import type { Model } from "../model/prepare.ts";
import type { RateLibrary } from "../nuclear/library.ts";
import type { Keys } from "../parameters/cosmology.ts";
import { answerPoint, type PointAnswer, type PointQuestion } from "../sweep/point.ts";
import { modelFor } from "./model-for.ts";

/** One point of a scan, grid or check. */
export interface PointTask {
  readonly kind: "point";
  /** Keys of the model; a thread keeps it for the next task. */
  readonly base: Keys;
  readonly question: PointQuestion;
}

export type Task = PointTask;
export type TaskAnswer = PointAnswer;

/** Models kept by their keys; the one unused for longest makes room. */
export class ModelCache {
  readonly #library: RateLibrary;
  readonly #models = new Map<string, Model>();
  constructor(library: RateLibrary) {
    this.#library = library;
  }

  /** The model of these keys, prepared at its first use. @throws {InputError} as {@link modelFor} */
  async get(keys: Keys): Promise<Model> {
    const name = JSON.stringify(keys);
    const model = this.#models.get(name) ?? (await modelFor(keys, this.#library));
    this.#models.delete(name);
    this.#models.set(name, model);
    if (this.#models.size > KEPT_MODELS) this.#models.delete(this.#models.keys().next().value as string);
    return model;
  }
}

/** Models a thread keeps: each holds a thermal history and a rate table, a few MB. */
const KEPT_MODELS = 4;

/** A function that answers tasks one after the other. */
export function taskAnswerer(library: RateLibrary): (task: Task) => Promise<TaskAnswer> {
  const models = new ModelCache(library);
  return async (task) => answerPoint(await models.get(task.base), task.question);
}
