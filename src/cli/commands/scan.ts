/** Command `scan`: abundances along one or two parameters, as a table and as the abundance diagram. */
import { scanFigure } from "../../charts/scan.ts";
import type { RateLibrary } from "../../nuclear/library.ts";
import { DEFINITIONS } from "../../nucleosynthesis/abundances.ts";
import { scanText, sweepDescriptions, sweepNote, sweepNotes } from "../../output/scan-output.ts";
import { computeScan } from "../../requests/scan.ts";
import { scanMarks } from "../../requests/scan-marks.ts";
import { answerCommand } from "../answer.ts";
import { longCommand } from "../long-command.ts";
import type { Options } from "../options.ts";

export function run(options: Options): Promise<void> {
  let rates: RateLibrary;
  return longCommand("scan", options, (engine) =>
    answerCommand(options, {
      compute: (keys, library, progress) => {
        rates = library;
        return computeScan(keys, library, { progress, engine });
      },
      text: scanText,
      table: (results) => results.table,
      notes: sweepNotes,
      describe: (results) => sweepDescriptions(results, DEFINITIONS),
      figure: (answer, name) => scanFigure(answer.results.table, sweepNote(answer), scanMarks(answer, rates), name),
    }),
  );
}
