/** Command `rates compare`: evaluations side by side, and what swapping them does to every abundance. */
import { compareFigure } from "../../charts/rates-compare.ts";
import type { RateLibrary } from "../../nuclear/library.ts";
import { noteLine } from "../../output/provenance-text.ts";
import { ratesCompareDescriptions, ratesCompareNotes, ratesCompareText } from "../../output/rates-compare-output.ts";
import { compareRates, ratioTable } from "../../requests/rates-compare.ts";
import { CHART_T9 } from "../../requests/rates-show.ts";
import { answerCommand } from "../answer.ts";
import type { Options } from "../options.ts";

export function run({ reaction, evaluations, ...options }: Options): Promise<void> {
  let library: RateLibrary;
  return answerCommand(options as Options, {
    compute: (keys, rates, progress) => {
      library = rates;
      const request = { reaction: reaction as string, evaluations: evaluations as readonly string[] };
      return compareRates(keys, request, rates, progress);
    },
    text: ratesCompareText,
    table: (results) => results.table,
    describe: ratesCompareDescriptions,
    notes: ratesCompareNotes,
    figure: (answer, name) => {
      const { results } = answer;
      const tables = results.evaluations.map(({ evaluation }) => library.table(results.reaction, evaluation));
      return compareFigure(results, ratioTable(tables, CHART_T9), noteLine(answer), name);
    },
  });
}
