/** The figures of a report, to be drawn as svg by whoever has a canvas. */
import { budgetFigure } from "../charts/budget.ts";
import type { AnyChart, Figure } from "../charts/figure.ts";
import { historyFigure } from "../charts/history.ts";
import { recombinationFigure } from "../charts/recombination.ts";
import { scanFigure } from "../charts/scan.ts";
import type { RateLibrary } from "../nuclear/library.ts";
import { noteLine } from "../output/provenance-text.ts";
import { recombinationNote } from "../output/recombination-output.ts";
import { sweepNote } from "../output/scan-output.ts";
import type { ReportData } from "../report/report.ts";
import { scanMarks } from "./scan-marks.ts";

/** Figures by the names that the report asks for. @throws {RangeError} if a result lacks what its figure shows */
export function reportFigures(
  { history, budget, diagram, recombination }: Omit<ReportData, "command">,
  library: RateLibrary,
): Record<string, Figure<AnyChart>> {
  const figures: Record<string, Figure<AnyChart>> = {};
  if (diagram !== undefined)
    figures.diagram = scanFigure(diagram.results.table, sweepNote(diagram), scanMarks(diagram, library));
  if (history !== undefined) {
    const { table, milestones } = history.results;
    const one = (name: string) => historyFigure(table, noteLine(history), milestones, name);
    Object.assign(figures, { temperature: one("temperature"), weak: one("weak"), nuclides: one("abundances") });
  }
  if (budget !== undefined) figures.budget = budgetFigure(budget.results, noteLine(budget));
  if (recombination !== undefined) {
    const { results, cosmology } = recombination;
    const one = (name: string) => recombinationFigure(results, cosmology, recombinationNote(recombination), name);
    Object.assign(figures, {
      ionisation: one("ionisation"),
      visibility: one("visibility"),
      matter: one("temperature"),
    });
  }
  return figures;
}
