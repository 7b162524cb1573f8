/** The examples in reports/: which there are, and how each is made. Nothing in them depends on time or machine. */

import { recombinationFigure } from "../charts/recombination.ts";
import { scanFigure } from "../charts/scan.ts";
import { loadRates } from "../node/load-rates.ts";
import { renderFigure } from "../node/render-chart.ts";
import { renderReport } from "../node/render-report.ts";
import { toCsv } from "../output/csv.ts";
import { recombinationNote, recombinationText } from "../output/recombination-output.ts";
import { sweepNote, sweepNotes } from "../output/scan-output.ts";
import { computeRecombination } from "../requests/recombination.ts";
import { computeReport } from "../requests/report.ts";
import { computeScan } from "../requests/scan.ts";
import { scanMarks } from "../requests/scan-marks.ts";

/** The axis of the diagram. */
const DIAGRAM_AXIS = "eta10=1:10:91log";

/** What each file is, for the list. */
const CONTENTS: readonly (readonly [file: string, what: string, command: string])[] = [
  [
    "eta-diagram.svg",
    "abundances against the baryon density, with error bands, observed ranges and the CMB",
    `emberline scan --over ${DIAGRAM_AXIS} --chart eta-diagram.svg`,
  ],
  [
    "eta-diagram.csv",
    "the same as a table",
    `emberline scan --over ${DIAGRAM_AXIS} --format csv --out eta-diagram.csv`,
  ],
  ["report.html", "everything about the default cosmology on one page", "emberline report --out report.html"],
  ["recombination.txt", "recombination of the default cosmology", "emberline recombination"],
  ["recombination.svg", "its charts", "emberline recombination --chart recombination.svg"],
];

function list(version: string): string {
  return `# Examples, made by emberline ${version}

\`npm run reports\` makes these files again; a test checks that text and numbers stay the same. Each file, or this
list, names the command, and the files name the parameters and the evaluation of every rate.

| file | what it is | command |
|---|---|---|
${CONTENTS.map(([file, what, command]) => `| [${file}](${file}) | ${what} | \`${command}\` |`).join("\n")}
`;
}

/** Content of every file in reports/ by its name. */
export async function makeReports(): Promise<Map<string, string>> {
  const library = loadRates();
  const scan = await computeScan({ over: [DIAGRAM_AXIS] }, library);
  const notes = Object.entries(sweepNotes(scan)).flatMap(([key, value]) =>
    typeof value === "string" ? [`${key}: ${value}`] : value.map((item) => `${key}: ${item}`),
  );
  const diagram = scanFigure(scan.results.table, sweepNote(scan), scanMarks(scan, library));
  const recombination = await computeRecombination({}, library);
  const { results, cosmology } = recombination;
  const sheet = recombinationFigure(results, cosmology, recombinationNote(recombination));
  const report = { ...(await computeReport({}, library)), command: "emberline report --out report.html" };
  return new Map([
    ["README.md", list(scan.version)],
    ["eta-diagram.svg", renderFigure(diagram, "diagram.svg").toString("utf8")],
    ["eta-diagram.csv", toCsv(scan.results.table, notes)],
    ["report.html", renderReport(report, library)],
    ["recombination.txt", `Command: emberline recombination\n\n${recombinationText(recombination)}`],
    ["recombination.svg", renderFigure(sheet, "recombination.svg").toString("utf8")],
  ]);
}
