/** Command `budget`: where each abundance's error comes from, and its sensitivities. */
import { budgetFigure } from "../../charts/budget.ts";
import { budgetDescriptions, budgetTable, budgetText } from "../../output/budget-output.ts";
import { noteLine } from "../../output/provenance-text.ts";
import { computeBudget } from "../../requests/budget.ts";
import { answerCommand } from "../answer.ts";
import type { Options } from "../options.ts";

export function run(options: Options): Promise<void> {
  return answerCommand(options, {
    compute: computeBudget,
    text: budgetText,
    table: budgetTable,
    describe: budgetDescriptions,
    figure: (answer, name) => budgetFigure(answer.results, noteLine(answer), name),
  });
}
