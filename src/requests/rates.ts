/** The request `rates` by its action: list, show, compare, check; for batch and the library. */
import type { RateLibrary } from "../nuclear/library.ts";
import { parseReactionName, suggestNearest } from "../nuclear/reaction-name.ts";
import { InputError } from "../numerics/check.ts";
import { OUR_FOLDER } from "../output/rates-check-output.ts";
import type {
  RatesCheckResults,
  RatesCompareResults,
  RatesListResults,
  RatesShowResults,
} from "../output/rates-result.ts";
import type { Keys } from "../parameters/cosmology.ts";
import type { Envelope, Progress } from "./envelope.ts";
import { checkRates } from "./rates-check.ts";
import { compareRates } from "./rates-compare.ts";
import { listRates } from "./rates-list.ts";
import { showRate } from "./rates-show.ts";

/** Actions that are requests; `make` reads a file and is a command only (see makeRate). */
export const RATES_ACTIONS = ["list", "show", "compare", "check"] as const;

/** Keys of `rates`. */
export interface RatesKeys extends Keys {
  /** `list` if left out. */
  readonly action?: string;
  /** list, show, compare: one reaction, in any notation. */
  readonly reaction?: string;
  /** list: only reactions that hold this nuclide. */
  readonly nuclide?: string;
  /** compare: evaluations, the reference first. */
  readonly names?: readonly string[];
  /** show: temperatures of the table [GK]. */
  readonly t9?: readonly number[];
}

/** `results` by action. */
export type RatesResults = RatesListResults | RatesShowResults | RatesCompareResults | RatesCheckResults;

function needReaction({ action, reaction }: RatesKeys): string {
  if (reaction === undefined) throw new InputError("reaction", `rates ${action} needs a reaction, such as d(p,g)he3`);
  return reaction;
}

/** The evaluation that `evaluations` chooses for a reaction. @throws {InputError} if it names others only */
function evaluationFor(evaluations: Keys["evaluations"], reaction: string, library: RateLibrary): string | undefined {
  if (evaluations === undefined) return undefined;
  const id = library.reactionId(reaction);
  const found = Object.entries(evaluations).find(([given]) => parseReactionName(given) === id);
  if (found !== undefined) return found[1];
  const others = Object.keys(evaluations);
  if (others.length === 0) return undefined;
  throw new InputError("evaluation", `evaluations ${others.join(", ")}: another reaction than the ${id} to show`);
}

/**
 * Answers `rates`.
 * @throws {InputError} for an unknown action, and as the action
 * @throws {CalculationError} if an integration of `compare` fails
 */
export async function computeRates(
  keys: RatesKeys,
  library: RateLibrary,
  progress?: Progress,
): Promise<Envelope<RatesResults>> {
  const { action = "list", reaction, nuclide, names, t9, ...plain } = keys;
  switch (action) {
    case "list":
      return listRates({ reaction, nuclide, network: plain.network }, library);
    case "show": {
      const shown = needReaction(keys);
      const evaluation = evaluationFor(plain.evaluations, shown, library);
      return showRate({ reaction: shown, evaluation, network: plain.network, T9: t9 }, library);
    }
    case "compare":
      return compareRates(plain, { reaction: needReaction(keys), evaluations: names }, library, progress);
    case "check":
      return checkRates({ folder: OUR_FOLDER }, library);
    default: {
      const nearest = suggestNearest(action, RATES_ACTIONS);
      const hint = nearest === undefined ? "" : `; did you mean ${nearest}?`;
      throw new InputError("choice", `action = ${action}: accepted are ${RATES_ACTIONS.join(", ")}${hint}`);
    }
  }
}
