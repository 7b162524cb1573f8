/** The commands that run many cases, as entries of the command line. */
import type { Option } from "commander";
import { SCAN_CHARTS } from "../charts/scan-look.ts";
import { errorOptions, nucleosynthesisOptions, type Options, outputOptions } from "./options.ts";
import { batchOptions, gridOptions, overOptions, resumeOptions } from "./sweep-options.ts";

interface SweepCommand {
  readonly name: string;
  readonly summary: string;
  readonly options: () => readonly Option[];
  readonly example: string;
  readonly load: () => Promise<{ run(options: Options): Promise<void> }>;
}

export const SWEEP_COMMANDS: readonly SweepCommand[] = [
  {
    name: "scan",
    summary: "abundances along one or two parameters: the diagram against the baryon density and its relatives",
    options: () => [
      ...overOptions(),
      ...nucleosynthesisOptions(),
      ...errorOptions(),
      ...outputOptions(SCAN_CHARTS),
      ...resumeOptions(),
    ],
    example: "emberline scan --over eta10=1:10:100log --chart diagram.svg --format csv --out scan.csv",
    load: () => import("./commands/scan.ts"),
  },
  {
    name: "grid",
    summary: "abundances on two or more axes for further analysis, whole or in parts on many machines",
    options: () => [
      ...overOptions(),
      ...gridOptions(),
      ...nucleosynthesisOptions(),
      ...errorOptions(),
      ...outputOptions(),
      ...resumeOptions(),
    ],
    example:
      "emberline grid --over omegaB=0.018:0.027:40 --over deltaNEff=-2:2:20 --errors none --check --format ecsv --out grid.ecsv",
    load: () => import("./commands/grid.ts"),
  },
  {
    name: "report",
    summary: "everything about one cosmology on one page of HTML that opens without a network",
    options: () => [
      ...nucleosynthesisOptions(),
      ...errorOptions(),
      ...outputOptions().filter(({ long }) => long !== "--format"),
      ...resumeOptions(),
    ],
    example: "emberline report --omega-b 0.0224±0.0001 --out report.html",
    load: () => import("./commands/report.ts"),
  },
  {
    name: "batch",
    summary:
      "one JSON request a line on standard input, one JSON answer a line on standard output, in order; blank lines are skipped",
    options: batchOptions,
    example: `echo '{"command": "abundances", "omegaB": 0.022, "network": "twelve"}' | emberline batch`,
    load: () => import("./commands/batch.ts"),
  },
];
