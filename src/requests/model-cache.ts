/** Prepared models that a thread keeps from request to request. */
import type { Model } from "../model/prepare.ts";
import type { RateLibrary } from "../nuclear/library.ts";
import type { Keys } from "../parameters/cosmology.ts";
import { modelFor } from "./model-for.ts";

/** Models a thread keeps: each holds a thermal history and a rate table, a few MB. */
const KEPT_MODELS = 4;

/** Models by their keys; the one unused for longest makes room. */
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
