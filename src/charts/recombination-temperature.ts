/** Chart: temperature of matter and radiation against redshift, and their ratio below. */
import type { RecombinationResults } from "../model/recombination.ts";
import { numericColumn } from "../numerics/table.ts";
import { curveLabels } from "./curve-labels.ts";
import type { LineChart } from "./figure.ts";
import {
  type Curve,
  DASHES,
  linearAxis,
  linePanel,
  logAxis,
  MARGINS,
  milestoneLine,
  PALETTE,
  pointsWithin,
} from "./style.ts";

/** Shares of the height: temperatures, ratio. */
const WEIGHTS = { y: 5, yRatio: 3 } as const;
const SHOWN = { min: 1, max: 2000 } as const;

/**
 * @param results of `recombination`: table with z, Tm_K, Tr_K
 * @param height  of the panel [px], for the distance of labels
 * @throws {RangeError} if a column is missing
 */
export function matterTemperatureChart(results: RecombinationResults, height: number): LineChart {
  const { table, zThermalDecoupling } = results;
  const z = numericColumn(table, "z");
  const matter = numericColumn(table, "Tm_K");
  const radiation = numericColumn(table, "Tr_K");
  const inside = z.map((value, i) => ({ value, i })).filter(({ value }) => value >= SHOWN.min && value <= SHOWN.max);
  const y = {
    min: 0.7 * Math.min(...inside.map(({ i }) => matter[i])),
    max: 1.5 * Math.max(...inside.map(({ i }) => radiation[i])),
  };
  const temperatures: Curve[] = [
    {
      label: "radiation",
      color: PALETTE.vermilion,
      dash: DASHES.dashed,
      points: pointsWithin(z, radiation, SHOWN),
    },
    { label: "matter", color: PALETTE.blue, width: 2.5, points: pointsWithin(z, matter, SHOWN) },
  ];
  const ratio: Curve = {
    label: "ratio",
    color: PALETTE.ink,
    points: pointsWithin(
      z,
      matter.map((T, i) => T / radiation[i]),
      SHOWN,
    ),
    axis: "yRatio",
  };
  const share = ((height - MARGINS.vertical) * WEIGHTS.y) / (WEIGHTS.y + WEIGHTS.yRatio);
  return linePanel(
    "Matter leaves the temperature of the radiation",
    [...temperatures, ratio],
    {
      x: logAxis("z, time runs to the right", SHOWN, { reverse: true }),
      yRatio: {
        ...linearAxis("T_m / T_r", { min: 0, max: 1.1 }, 0.2),
        stack: "temperature",
        stackWeight: WEIGHTS.yRatio,
      },
      y: { ...logAxis("T [K]", y), stack: "temperature", stackWeight: WEIGHTS.y },
    },
    {
      ...(zThermalDecoupling === undefined ? {} : { decoupling: milestoneLine(zThermalDecoupling, "T_m/T_r = 0.9") }),
      ...curveLabels(temperatures, { x: SHOWN, y, height: share, reverse: true }),
    },
  );
}
