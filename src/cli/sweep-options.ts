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

/** Parts of a grid, and what is measured of it. */
export function gridOptions(): Option[] {
  return [
    new Option("--part <k/n>", "compute only the k-th of n parts, to be joined with --join; csv or ecsv"),
    new Option(
      "--join <files...>",
      "join the files of all parts to what a single run writes, and check that they belong together",
    ),
    new Option(
      "--check",
      "measure the error of interpolating the grid, at random points between its own; 12 values of omegaB from 0.018 to 0.027 by 8 of deltaNEff from -2 to 2 interpolate to 2e-6 in Y_p and 2e-5 of D/H",
    ),
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
