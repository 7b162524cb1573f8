/** Command `recombination`: ionisation history, last scattering and baryon drag. */
import { recombinationFigure } from "../../charts/recombination.ts";
import { InputError } from "../../numerics/check.ts";
import { recombinationDescriptions, recombinationNote, recombinationText } from "../../output/recombination-output.ts";
import { computeRecombination } from "../../requests/recombination.ts";
import { answerCommand } from "../answer.ts";
import type { Options } from "../options.ts";

export async function run(options: Options): Promise<void> {
  if (options.z !== undefined && options.chart !== undefined)
    throw new InputError("conflict", "--z and --chart: a chart needs all redshifts; give one of them");
  if (options.budget === true && options.chart !== undefined)
    throw new InputError("conflict", "--budget and --chart: there is no chart of the budget; give one of them");
  return answerCommand(options, {
    compute: computeRecombination,
    text: recombinationText,
    table: (results) => results.table,
    describe: recombinationDescriptions,
    figure: (answer, name) => recombinationFigure(answer.results, answer.cosmology, recombinationNote(answer), name),
  });
}
