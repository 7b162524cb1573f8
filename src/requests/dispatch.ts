/** Command name -> the function that answers it: for requests that name their command, as in `batch`. */
import type { RateLibrary } from "../nuclear/library.ts";
import { suggestNearest } from "../nuclear/reaction-name.ts";
import { InputError } from "../numerics/check.ts";
import type { Keys } from "../parameters/cosmology.ts";
import { singleThread } from "../sweep/engine.ts";
import { abundancesOf } from "./abundances.ts";
import { computeBudget } from "./budget.ts";
import { checkKeys } from "./check-keys.ts";
import type { Envelope } from "./envelope.ts";
import { computeGrid } from "./grid.ts";
import { computeHistory } from "./history.ts";
import { computeInfer } from "./infer.ts";
import type { ModelCache } from "./model-cache.ts";
import { computeRates } from "./rates.ts";
import { computeRecombination } from "./recombination.ts";
import { computeScan } from "./scan.ts";
import type { PointAnswerer } from "./tasks.ts";

/** What a thread keeps from request to request. */
export interface Kept {
  readonly library: RateLibrary;
  readonly models: ModelCache;
  readonly answerPoint: PointAnswerer;
}

type Answerer = (keys: Keys, kept: Kept) => Promise<Envelope>;

/** Keys that a prepared model is made for; all others may change from request to request. */
const MODEL_KEYS = ["network", "evaluations", "without", "expansion"] as const;

/** Every command that is a request. */
const ANSWERERS: Readonly<Record<string, Answerer>> = {
  abundances: async (keys, { models }) => {
    const base = Object.fromEntries(MODEL_KEYS.flatMap((key) => (keys[key] === undefined ? [] : [[key, keys[key]]])));
    return abundancesOf(await models.get(base as Keys), keys);
  },
  history: (keys, { library }) => computeHistory(keys, library),
  scan: (keys, { library, answerPoint }) => computeScan(keys, library, { engine: singleThread(answerPoint) }),
  grid: (keys, { library, answerPoint }) => computeGrid(keys, library, { engine: singleThread(answerPoint) }),
  budget: (keys, { library }) => computeBudget(keys, library),
  infer: (keys, { library, answerPoint }) => computeInfer(keys, library, { engine: singleThread(answerPoint) }),
  rates: (keys, { library }) => computeRates(keys, library),
  recombination: (keys, { library }) => computeRecombination(keys, library),
};

/** Names of the commands that may be requested. */
export const REQUESTS = Object.keys(ANSWERERS);

/**
 * Answers a request.
 * @param command name of the command
 * @param keys    its keys as they came, checked here
 * @throws {InputError} for an unknown command or key (nearest named); {@link InputError | CalculationError} of the command
 */
export async function answerRequest(
  command: unknown,
  keys: Readonly<Record<string, unknown>>,
  kept: Kept,
): Promise<Envelope> {
  if (typeof command !== "string" || !Object.hasOwn(ANSWERERS, command)) {
    if (command === "report")
      throw new InputError("command", "report is not offered in batch: it is a page of HTML; run emberline report");
    const shown =
      command === undefined ? "no command" : `unknown command ${String(JSON.stringify(command)).slice(0, 100)}`;
    const nearest = typeof command === "string" ? suggestNearest(command, REQUESTS) : undefined;
    const hint = nearest === undefined ? "" : ` did you mean ${nearest}?`;
    throw new InputError("command", `${shown};${hint} commands are ${REQUESTS.join(", ")}`);
  }
  checkKeys(command, keys);
  return ANSWERERS[command](keys as Keys, kept);
}
