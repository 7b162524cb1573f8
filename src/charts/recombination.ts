/** Figure of the command `recombination`: ionisation, visibility, temperatures, optical depth on one sheet, or one of them. */
import type { RecombinationResults } from "../model/recombination.ts";
import type { CosmologyParameters } from "../parameters/cosmology.ts";
import { type Figure, type LineChart, NOTE_HEIGHT, singleFigure } from "./figure.ts";
import { opticalDepthChart } from "./recombination-depth.ts";
import { ionisationChart } from "./recombination-ionisation.ts";
import { matterTemperatureChart } from "./recombination-temperature.ts";
import { visibilityChart } from "./recombination-visibility.ts";

type Make = (results: RecombinationResults, cosmology: CosmologyParameters, height: number) => LineChart;

/** The charts by name, in the order of the sheet. */
const CHARTS: Readonly<Record<string, Make>> = {
  ionisation: (results, cosmology, height) => ionisationChart(results, cosmology.model, height),
  visibility: (results, cosmology) => visibilityChart(results, cosmology),
  temperature: (results, _, height) => matterTemperatureChart(results, height),
  depth: (results) => opticalDepthChart(results),
};

/** Names for `--chart NAME=FILE`. */
export const RECOMBINATION_CHARTS = Object.keys(CHARTS);

const TITLE = "Recombination and last scattering";
/** One chart of the sheet [px]. */
const PANEL = { width: 620, height: 500 } as const;

/**
 * @param results   of `recombination`, with the table over all redshifts
 * @param cosmology parameters used
 * @param note      one line at the foot: parameters and program
 * @param name      one chart alone; all of them without
 * @throws {RangeError} if a column is missing
 */
export function recombinationFigure(
  results: RecombinationResults,
  cosmology: CosmologyParameters,
  note: string,
  name?: string,
): Figure {
  if (name !== undefined)
    return singleFigure(TITLE, note, name, (_, height) => CHARTS[name](results, cosmology, height));
  return {
    width: 2 * PANEL.width,
    height: 2 * PANEL.height + NOTE_HEIGHT,
    title: TITLE,
    note,
    panels: RECOMBINATION_CHARTS.map((chart, i) => ({
      name: chart,
      x: (i % 2) * PANEL.width,
      y: Math.floor(i / 2) * PANEL.height,
      width: PANEL.width,
      height: PANEL.height,
      chart: CHARTS[chart](results, cosmology, PANEL.height),
    })),
  };
}
