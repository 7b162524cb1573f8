/** Command `abundances`: light-element abundances of one cosmology. */
import { abundancesDescriptions, abundancesTable, abundancesText } from "../../output/abundances-output.ts";
import { computeAbundances } from "../../requests/abundances.ts";
import { answerCommand } from "../answer.ts";
import type { Options } from "../options.ts";

export function run(options: Options): Promise<void> {
  return answerCommand(options, {
    compute: computeAbundances,
    text: abundancesText,
    table: abundancesTable,
    describe: abundancesDescriptions,
  });
}
