/** Command `rates show`: one rate with all its fields, and against temperature. */
import { rateFigure } from "../../charts/rates-show.ts";
import type { RateLibrary } from "../../nuclear/library.ts";
import { formatReaction } from "../../nuclear/reaction-name.ts";
import { ratesShowDescriptions, ratesShowNotes, ratesShowText } from "../../output/rates-show-output.ts";
import { CHART_T9, type ShowRequest, showRate } from "../../requests/rates-show.ts";
import { answerCommand } from "../answer.ts";
import type { Options } from "../options.ts";
import { evaluationOf } from "../rates-commands.ts";

export function run({ reaction, evaluation, network, t9, ...options }: Options): Promise<void> {
  let library: RateLibrary;
  let request: ShowRequest;
  return answerCommand(options as Options, {
    compute: async (_, rates) => {
      library = rates;
      request = {
        reaction: reaction as string,
        evaluation: evaluationOf(evaluation as string | undefined, reaction as string, rates),
        network: network as string | undefined,
        T9: t9 as readonly number[] | undefined,
      };
      return showRate(request, rates);
    },
    text: ratesShowText,
    table: (results) => results.table,
    describe: ratesShowDescriptions,
    notes: ratesShowNotes,
    figure: (answer, name) => {
      const { results } = showRate({ ...request, T9: CHART_T9 }, library);
      const curves = {
        name: formatReaction(results.reaction),
        evaluation: results.evaluation,
        table: results.table,
        validT9: results.validT9,
        assumed: results.uncertaintyBasis !== "published",
      };
      return rateFigure(curves, `${results.citation.slice(0, 90)}; emberline ${answer.version}`, name);
    },
  });
}
