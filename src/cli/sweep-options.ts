/** The options of commands that run many cases: axes, parts, going on after an interruption. */
import { Option } from "commander";

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
