/** The report as one file: its charts drawn here, put into the page. */
import type { RateLibrary } from "../nuclear/library.ts";
import { type ReportData, reportPage } from "../report/report.ts";
import { reportFigures } from "../requests/report-figures.ts";
import { renderFigure } from "./render-chart.ts";

/** HTML of the report, the same at every call with the same data. */
export function renderReport(data: ReportData, library: RateLibrary): string {
  const charts = Object.fromEntries(
    Object.entries(reportFigures(data, library)).map(([name, figure]) => [
      name,
      renderFigure(figure, `${name}.svg`).toString("utf8"),
    ]),
  );
  return reportPage(data, charts);
}
