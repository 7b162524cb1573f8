/** Command `report`: everything about one cosmology on one page of HTML. */
import { loadRates } from "../../node/load-rates.ts";
import { printResult } from "../../node/print.ts";
import { requireWritable, writeWhole } from "../../node/write-file.ts";
import { computeReport } from "../../requests/report.ts";
import { commandLine, longCommand } from "../long-command.ts";
import { type Options, toKeys } from "../options.ts";
import { progressLine } from "../progress.ts";

export async function run(options: Options): Promise<void> {
  if (options.out !== undefined) await requireWritable(options.out);
  return longCommand("report", options, async (engine) => {
    const library = loadRates(options.rates);
    const progress = progressLine(options.quiet === true);
    const data = await computeReport(toKeys(options), library, { progress: progress.report, engine }).finally(
      progress.clear,
    );
    const { renderReport } = await import("../../node/render-report.ts");
    const page = renderReport({ ...data, command: commandLine(["--quiet", "--debug"]) }, library);
    if (options.out === undefined) await printResult(page);
    else await writeWhole(options.out, page);
  });
}
