/** Command `history`: temperatures, expansion, weak rates and every nuclide through the first hours. */
import { historyFigure } from "../../charts/history.ts";
import { historyText } from "../../output/history-output.ts";
import { noteLine } from "../../output/provenance-text.ts";
import { computeHistory } from "../../requests/history.ts";
import { answerCommand } from "../answer.ts";
import type { Options } from "../options.ts";

export function run(options: Options): Promise<void> {
  return answerCommand(options, {
    compute: computeHistory,
    text: historyText,
    table: (results) => results.table,
    figure: (answer, name) => historyFigure(answer.results.table, noteLine(answer), answer.results.milestones, name),
  });
}
