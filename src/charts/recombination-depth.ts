/** Chart: Thomson optical depth from today against redshift. */
import type { RecombinationResults } from "../model/recombination.ts";
import { numericColumn } from "../numerics/table.ts";
import type { LineChart } from "./figure.ts";
import { DASHES, linePanel, logAxis, MUTED, milestoneLine, PALETTE, pointsWithin } from "./style.ts";

const SHOWN = { min: 10, max: 1e4 } as const;

/**
 * @param results of `recombination`: table with z, opticalDepth
 * @throws {RangeError} if a column is missing
 */
export function opticalDepthChart(results: RecombinationResults): LineChart {
  const { table, zStar, zReionisation } = results;
  const z = numericColumn(table, "z");
  const tau = numericColumn(table, "opticalDepth");
  const x = { ...SHOWN, min: zReionisation === undefined ? SHOWN.min : 1 };
  const lowest = tau[z.findIndex((value) => value >= x.min)];
  const y = { min: Math.max(1e-7, 10 ** Math.floor(Math.log10(Math.max(lowest, 1e-7)))), max: 2000 };
  const curve = { label: "τ", color: PALETTE.blue, width: 2.5, points: pointsWithin(z, tau, x) };
  return linePanel(
    zReionisation === undefined ? "Optical depth, without reionisation" : "Optical depth, with reionisation",
    [curve],
    { x: logAxis("z, time runs to the right", x, { reverse: true }), y: logAxis("optical depth from today", y) },
    {
      star: milestoneLine(zStar, "last scattering"),
      one: {
        type: "line",
        scaleID: "y",
        value: 1,
        borderColor: MUTED.axis,
        borderWidth: 1,
        borderDash: [...DASHES.dotted],
        drawTime: "beforeDatasetsDraw",
      },
    },
  );
}
