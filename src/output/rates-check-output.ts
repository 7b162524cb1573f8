/** The answer of `rates check` as text: one finding a line, then the count. */
import { formatFinding } from "../nuclear/check-library.ts";
import type { RatesCheckResults } from "./rates-result.ts";
import type { Envelope } from "./result.ts";
import { counted } from "./text.ts";

/** How our own library is named in messages. */
export const OUR_FOLDER = "rates";

/** Findings as `file:line: problem`, each on one line of any length so that tools can read them, then the count. */
export function ratesCheckText({ results }: Envelope<RatesCheckResults>): string {
  const { findings, files, networks, errors, warnings, notes } = results;
  const where = results.folder === OUR_FOLDER ? OUR_FOLDER : `${results.folder} over ${OUR_FOLDER}`;
  const looked = `${where}: ${counted(files, "file")} and ${counted(networks, "network")} checked`;
  const found = `${counted(errors, "error")}, ${counted(warnings, "warning")}, ${counted(notes, "note")}`;
  return `${[...findings.map(formatFinding), `${looked}: ${found}`].join("\n")}\n`;
}

/** What the columns of the table are. */
export function ratesCheckDescriptions(): Record<string, string> {
  return {
    severity: "error: must be put right; warning: deserves a look; note: should be known",
    file: "path of the file",
    line: "line of the file, 0 where the finding has none of its own",
    problem: "what is wrong",
  };
}
