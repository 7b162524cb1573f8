/** Command `abundances`: light-element abundances of one cosmology. */
import { abundancesDescriptions, abundancesTable, abundancesText } from "../../output/abundances-output.ts";
import { computeAbundances } from "../../requests/abundances.ts";
import { answerCommand } from "../answer.ts";
import { longCommand } from "../long-command.ts";
import type { Options } from "../options.ts";

export function run(options: Options): Promise<void> {
  return longCommand("abundances", options, (engine) =>
    answerCommand(options, {
      compute: (keys, library, progress) => computeAbundances(keys, library, progress, engine),
      text: abundancesText,
      table: abundancesTable,
      describe: abundancesDescriptions,
    }),
  );
}
