/** Command `infer`: baryon density, N_eff and more from observed abundances. */
import { inferFigure } from "../../charts/infer.ts";
import { inferDescriptions, inferNotes, inferTable, inferText } from "../../output/infer-output.ts";
import { noteLine, provenanceNotes } from "../../output/provenance-text.ts";
import { computeInfer } from "../../requests/infer.ts";
import { answerCommand } from "../answer.ts";
import { longCommand } from "../long-command.ts";
import type { Options } from "../options.ts";

export function run(options: Options): Promise<void> {
  return longCommand("infer", options, (engine) =>
    answerCommand(options, {
      compute: (keys, library, progress) => computeInfer(keys, library, { progress, engine }),
      text: inferText,
      table: inferTable,
      notes: (answer) => ({ ...inferNotes(answer), ...provenanceNotes(answer) }),
      describe: inferDescriptions,
      figure: (answer, name) => inferFigure(answer.results, noteLine(answer), name),
    }),
  );
}
