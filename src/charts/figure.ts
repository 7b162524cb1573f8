/** A figure: one panel, or several on one sheet, each a chart.js configuration with its place. */
import type { ChartConfiguration } from "chart.js";
import type { Point } from "./style.ts";

/** Configuration of a chart of curves. */
export type LineChart = ChartConfiguration<"line", Point[]>;
/** Configuration of a chart of bars, one a name. */
export type BarChart = ChartConfiguration<"bar", number[], string>;
/** Any chart a panel may hold. */
export type AnyChart = LineChart | BarChart;

/** Milestones that charts of the history mark; see the results of `history`. */
export interface HistoryMarks {
  readonly freezeOutTemperature_MeV?: number;
  readonly tDeuteriumPeak_s?: number;
}

/** One chart and the rectangle it fills [px]. */
export interface Panel<Chart extends AnyChart = LineChart> {
  readonly name: string;
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly height: number;
  readonly chart: Chart;
}

/** Everything that goes into one file. Sizes in px of a screen of 96 a inch. */
export interface Figure<Chart extends AnyChart = LineChart> {
  readonly width: number;
  readonly height: number;
  /** What it shows, for the metadata of the file. */
  readonly title: string;
  /** One line at the foot: parameters and program. */
  readonly note: string;
  readonly panels: readonly Panel<Chart>[];
}

/** Height kept free for the note [px]. */
export const NOTE_HEIGHT = 26;

/** A figure of one panel. */
export function singleFigure<Chart extends AnyChart = LineChart>(
  title: string,
  note: string,
  name: string,
  chart: (width: number, height: number) => Chart,
  width = 860,
  height = 580,
): Figure<Chart> {
  const panelHeight = height - NOTE_HEIGHT;
  return {
    width,
    height,
    title,
    note,
    panels: [{ name, x: 0, y: 0, width, height: panelHeight, chart: chart(width, panelHeight) }],
  };
}
