/** Command `grid`: abundances on two or more axes, whole, in parts, or joined from parts. */
import { joinParts } from "../../node/join-parts.ts";
import { DEFINITIONS } from "../../nucleosynthesis/abundances.ts";
import { InputError } from "../../numerics/check.ts";
import { gridNotes, gridText } from "../../output/grid-output.ts";
import { sweepDescriptions } from "../../output/scan-output.ts";
import { computeGrid } from "../../requests/grid.ts";
import { answerCommand } from "../answer.ts";
import { longCommand } from "../long-command.ts";
import { type Options, toKeys } from "../options.ts";

export async function run(options: Options): Promise<void> {
  const parts = options.join as readonly string[] | undefined;
  if (parts !== undefined) {
    const others = Object.keys(toKeys(options));
    if (others.length > 0 || options.resume === true)
      throw new InputError("conflict", `--join: takes everything from the parts; leave out ${others[0] ?? "--resume"}`);
    return joinParts(parts, options.out).catch((error: unknown) => {
      if (!(error instanceof InputError) || error.code === "unwritable") throw error;
      const file = parts.some((part) => error.message.startsWith(part));
      throw new InputError(error.code, `--join${file ? " " : ": "}${error.message}`);
    });
  }
  if (options.part !== undefined && options.format !== "csv" && options.format !== "ecsv")
    throw new InputError("conflict", `--part: needs --format csv or ecsv, which --join reads`);
  return longCommand("grid", options, (engine) =>
    answerCommand(options, {
      compute: (keys, library, progress) => computeGrid(keys, library, { progress, engine }),
      text: gridText,
      table: (results) => results.table,
      notes: gridNotes,
      describe: (results) => sweepDescriptions(results, DEFINITIONS),
    }),
  );
}
