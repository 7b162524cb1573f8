/** The answer of `grid` as text, and its header in CSV and ECSV. */
import { abundanceLabel } from "../nucleosynthesis/labels.ts";
import { provenanceLines, titleLine } from "./provenance-text.ts";
import type { Envelope } from "./result.ts";
import { sweepLines, sweepNotes } from "./scan-output.ts";
import type { GridResults, InterpolationCheck } from "./sweep-result.ts";
import { alignColumns, wrap } from "./text.ts";

const METHOD =
  "tensor product of cubic splines (not-a-knot ends) in the axes, log10 where an axis is logarithmic or spans a factor of 3; of Yp and YpMass, and of the logarithm of every other abundance";

/** The interpolation error in a sentence, for the header of a file. */
function checkNote({ points, seed, largest }: InterpolationCheck): string {
  const errors = Object.entries(largest).map(([name, { absolute, relative }]) =>
    name.startsWith("Yp") ? `${name} ${absolute.toExponential(1)}` : `${name} ${relative.toExponential(1)} relative`,
  );
  return `largest error at ${points} random points (seed ${seed}), ${METHOD}: ${errors.join(", ")}`;
}

/** Header of CSV and ECSV: provenance, the request, the part, and the checksum of the lines that are no comments. */
export function gridNotes(answer: Envelope<GridResults>): Record<string, string | readonly string[]> {
  const { over, ratesDigest, part, checksum, check } = answer.results;
  const { command, axes, warnings, ...rest } = sweepNotes(answer);
  return {
    command,
    over,
    axes,
    ...rest,
    rates_sha256: ratesDigest,
    ...(check === undefined ? {} : { interpolation: checkNote(check) }),
    ...(part === undefined ? {} : { part: `${part.k}/${part.n}, points ${part.from} to ${part.to} of ${part.points}` }),
    ...(warnings === undefined ? {} : { warnings }),
    checksum: `sha256 ${checksum}`,
  };
}

/** Text of a `grid` answer. */
export function gridText(answer: Envelope<GridResults>): string {
  const { part, checksum, check } = answer.results;
  const lines = [
    titleLine("Grid of abundances", answer.version),
    "",
    ...sweepLines(answer.results),
    "",
    ...(part === undefined
      ? []
      : [`  part ${part.k} of ${part.n}: points ${part.from} to ${part.to} of ${part.points}`]),
    ...wrap(`sha256 of the table as CSV without comments: ${checksum}`, "  ", "    "),
  ];
  if (check !== undefined) {
    const rows = Object.entries(check.largest).map(([name, { absolute, relative }]) => [
      `  ${abundanceLabel(name)}`,
      absolute.toExponential(1),
      relative.toExponential(1),
    ]);
    lines.push(
      "",
      "Interpolation error",
      ...wrap(`Largest of ${check.points} random points (seed ${check.seed}): ${METHOD}.`, "  "),
      ...alignColumns([["", "absolute", "relative"], ...rows], [1, 2]),
    );
  }
  lines.push("", "Calculation", ...provenanceLines(answer));
  return `${lines.join("\n")}\n`;
}
