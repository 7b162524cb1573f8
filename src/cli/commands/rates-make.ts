/** Command `rates make`: an S-factor table to a rate file. */
import { readText } from "../../node/load-rates.ts";
import { printNotice } from "../../node/print.ts";
import { ratesMakeDescriptions } from "../../output/rates-make-output.ts";
import { makeRate } from "../../requests/rates-make.ts";
import { answerCommand } from "../answer.ts";
import type { Options } from "../options.ts";

/** Where the command writes and what for: the place in a library, and the next command. */
async function sayNext(out: string, path: string, reaction: string, name: string): Promise<void> {
  if (!out.replaceAll("\\", "/").endsWith(`/${path}`))
    await printNotice(
      `emberline: warning: a library takes this file as FOLDER/${path}; move it there, or write it there`,
    );
  else
    await printNotice(
      `emberline: use it with --rates ${out.slice(0, -path.length - 1)} --evaluation "${reaction}=${name}"`,
    );
}

export async function run({
  from,
  reaction,
  name,
  citation,
  valid,
  doi,
  basis,
  note,
  ...options
}: Options): Promise<void> {
  const text = (value: unknown) => value as string;
  let path = "";
  let id = "";
  await answerCommand(options as Options, {
    compute: async (_, library) => {
      const answer = makeRate(
        {
          source: readText(text(from), "from"),
          reaction: text(reaction),
          name: text(name),
          citation: text(citation),
          doi: text(doi),
          basis: text(basis),
          note: text(note),
          validT9: valid as [number, number] | undefined,
          entered: `${new Date().toISOString().slice(0, 10)}; emberline rates make`,
        },
        library,
      );
      ({ path, reaction: id } = answer.results);
      return answer;
    },
    text: (answer) => answer.results.text,
    table: (results) => results.table,
    describe: ratesMakeDescriptions,
    notes: (answer) => ({ command: `emberline ${answer.version} rates make`, citation: text(citation) }),
  });
  if (options.out !== undefined && options.format === "text" && options.quiet !== true)
    await sayNext(options.out as string, path, id, text(name));
}
