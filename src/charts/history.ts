/** Figure of the command `history`: temperatures, weak rates and nuclides on one sheet, or one of them. */
import type { Table } from "../numerics/table.ts";
import { type Figure, type HistoryMarks, type LineChart, NOTE_HEIGHT, singleFigure } from "./figure.ts";
import { abundancesChart } from "./history-abundances.ts";
import { temperatureChart } from "./history-temperature.ts";
import { weakChart } from "./history-weak.ts";

/** The charts by name, in the order of the sheet. */
const CHARTS: Readonly<Record<string, (table: Table, height: number, marks: HistoryMarks) => LineChart>> = {
  temperature: temperatureChart,
  weak: weakChart,
  abundances: abundancesChart,
};

/** Names for `--chart NAME=FILE`. */
export const HISTORY_CHARTS = Object.keys(CHARTS);

const TITLE = "Thermal history and nucleosynthesis";
/** The sheet [px]: two charts above, the third below over the whole width. */
const SHEET = { width: 1240, upper: 500, lower: 560 } as const;

/**
 * @param table result of `history`
 * @param note  one line at the foot: parameters and program
 * @param marks milestones to mark
 * @param name  one chart alone; all of them without
 * @throws {RangeError} if a column is missing
 */
export function historyFigure(table: Table, note: string, marks: HistoryMarks = {}, name?: string): Figure {
  if (name !== undefined) return singleFigure(TITLE, note, name, (_, height) => CHARTS[name](table, height, marks));
  const half = SHEET.width / 2;
  return {
    width: SHEET.width,
    height: SHEET.upper + SHEET.lower + NOTE_HEIGHT,
    title: TITLE,
    note,
    panels: [
      {
        name: "temperature",
        x: 0,
        y: 0,
        width: half,
        height: SHEET.upper,
        chart: temperatureChart(table, SHEET.upper),
      },
      { name: "weak", x: half, y: 0, width: half, height: SHEET.upper, chart: weakChart(table, SHEET.upper, marks) },
      {
        name: "abundances",
        x: 0,
        y: SHEET.upper,
        width: SHEET.width,
        height: SHEET.lower,
        chart: abundancesChart(table, SHEET.lower, marks),
      },
    ],
  };
}
