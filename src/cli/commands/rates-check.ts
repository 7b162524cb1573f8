/** Command `rates check`: all checks of a library; exit status 2 if one fails. */
import { openFolder } from "../../node/load-rates.ts";
import { InputError } from "../../numerics/check.ts";
import { OUR_FOLDER, ratesCheckDescriptions, ratesCheckText } from "../../output/rates-check-output.ts";
import type { RatesCheckResults } from "../../output/rates-result.ts";
import { counted } from "../../output/text.ts";
import { checkRates } from "../../requests/rates-check.ts";
import { answerCommand } from "../answer.ts";
import type { Options } from "../options.ts";

export async function run({ dir, ...options }: Options): Promise<void> {
  let found: RatesCheckResults | undefined;
  await answerCommand(options as Options, {
    compute: async (_, ours) => {
      const opened =
        dir === undefined ? { library: ours, prefix: OUR_FOLDER } : openFolder(dir as string, dir as string);
      const answer = checkRates({ folder: opened.prefix, ...opened }, opened.library);
      found = answer.results;
      return answer;
    },
    text: ratesCheckText,
    table: (results) => results.table,
    describe: ratesCheckDescriptions,
    notes: (answer) => ({ command: `emberline ${answer.version} rates check ${answer.results.folder}` }),
  });
  const first = found?.findings.find(({ severity }) => severity === "error");
  if (found !== undefined && first !== undefined)
    throw new InputError(
      "library",
      `${counted(found.errors, "error")} in ${found.folder}, the first at ${first.file}${first.line > 0 ? `:${first.line}` : ""}; put them right`,
    );
}
