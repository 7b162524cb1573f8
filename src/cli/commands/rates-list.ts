/** Command `rates list`: every evaluation of the library. */
import { ratesListDescriptions, ratesListText } from "../../output/rates-list-output.ts";
import { listRates } from "../../requests/rates-list.ts";
import { answerCommand } from "../answer.ts";
import type { Options } from "../options.ts";

export function run({ network, nuclide, reaction, ...options }: Options): Promise<void> {
  const text = (value: unknown) => value as string | undefined;
  const filter = { network: text(network), nuclide: text(nuclide), reaction: text(reaction) };
  return answerCommand(options as Options, {
    compute: async (_, library) => listRates(filter, library),
    text: ratesListText,
    table: (results) => results.table,
    describe: ratesListDescriptions,
    notes: (answer) => ({ command: `emberline ${answer.version} rates list` }),
  });
}
