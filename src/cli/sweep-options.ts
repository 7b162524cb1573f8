/** The options of commands that run many cases: axes, parts, going on after an interruption. */
import { Option } from "commander";
import { outputOptions } from "./options.ts";

/** The axes of a scan or grid. */
export function overOptions(): Option[] {
  return [
    new Option(
      "--over <axis>",
      "axis, repeatable: KEY=START:STOP:COUNT, KEY=START:STOP:COUNTlog or KEY=a,b,c; KEY as in a request (eta10, omegaB, nEff, deltaNEff, tauN, xiE, ...) or scale:REACTION",
    ).argParser((text: string, previous: readonly string[] = []) => [...previous, text]),
  ];
}

/** Going on from the checkpoint of a run that was interrupted. */
export function resumeOptions(): Option[] {
  return [new Option("--resume", "go on from where an interrupted run with the same --out stopped, if there is one")];
}

/** The options of `batch`: everything else stands in the requests. */
export function batchOptions(): Option[] {
  const wanted = ["--jobs", "--quiet", "--debug"];
  return [
    new Option("--rates <dir>", "another rate library, whole or holding only the files that differ"),
    ...outputOptions().filter((option) => wanted.includes(option.long ?? "")),
  ];
}
