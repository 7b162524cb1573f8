/** Chart: free electrons per hydrogen nucleus against redshift, beside Saha equilibrium; helium enlarged below. */
import type { RecombinationResults } from "../model/recombination.ts";
import { numericColumn } from "../numerics/table.ts";
import { sahaEquilibrium } from "../recombination/saha.ts";
import { curveLabels, textAt } from "./curve-labels.ts";
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

/** Shares of the height: hydrogen, helium. */
const WEIGHTS = { y: 5, yHelium: 2 } as const;
/** Redshifts shown. */
const SHOWN = { min: 10, max: 1e4 } as const;
/** Points of the Saha curve. */
const SAHA_POINTS = 400;
/** Height at which the Saha curve is labelled. */
const FALL = 3e-4;

/**
 * @param results of `recombination`: table with z, xe; fHe and n_H for the Saha curve
 * @param model   name of the model, for the label of its curve
 * @param height  of the panel [px], for the distance of labels
 * @throws {RangeError} if a column is missing
 */
export function ionisationChart(results: RecombinationResults, model: string, height: number): LineChart {
  const { table, fHe, nHToday_per_cm3, zStar } = results;
  const z = numericColumn(table, "z");
  const xe = numericColumn(table, "xe");
  // Reionisation shows at its own redshifts.
  const x = { ...SHOWN, min: results.zReionisation === undefined ? SHOWN.min : 2 };
  const full = 1 + 2 * fHe;
  const y = { min: 1e-5, max: Math.max(2, 1.5 * full) };
  const tCmb = numericColumn(table, "Tr_K")[0] / (1 + z[0]);
  const saha = Array.from({ length: SAHA_POINTS }, (_, i) => {
    const at = x.min * (x.max / x.min) ** (i / (SAHA_POINTS - 1));
    return { z: at, xe: sahaEquilibrium(tCmb * (1 + at), nHToday_per_cm3 * (1 + at) ** 3, fHe).xe };
  }).filter((point) => point.xe > y.min / 10);
  const sahaZ = saha.map((point) => point.z);
  const sahaXe = saha.map((point) => point.xe);
  const isSaha = model === "saha";
  const curve = (axis: "y" | "yHelium"): Curve[] => [
    ...(isSaha
      ? []
      : [
          {
            label: axis === "y" ? "Saha" : "He Saha",
            color: PALETTE.vermilion,
            dash: DASHES.dashed,
            points: pointsWithin(sahaZ, sahaXe, x),
            axis,
          },
        ]),
    {
      label: axis === "y" ? model : "helium",
      color: PALETTE.blue,
      width: 2.5,
      points: pointsWithin(z, xe, x),
      axis,
    },
  ];
  const helium = { min: 0.98, max: full + 0.02 * Math.max(1, fHe) };
  const share = (weight: number) => ((height - MARGINS.vertical) * weight) / (WEIGHTS.y + WEIGHTS.yHelium);
  const hydrogen = curve("y");
  const fall = saha.find((point) => point.xe > FALL);
  const step = [0.02, 0.05, 0.1, 0.2, 0.5, 1, 2, 5].find((s) => (helium.max - helium.min) / s < 5) ?? 10;
  return linePanel(
    "Free electrons per hydrogen nucleus",
    [...hydrogen, ...(fHe > 0 ? curve("yHelium") : [])],
    {
      x: logAxis("z, time runs to the right", x, { reverse: true }),
      ...(fHe > 0
        ? {
            yHelium: {
              ...linearAxis("x_e, enlarged", helium, step),
              stack: "ionisation",
              stackWeight: WEIGHTS.yHelium,
            },
          }
        : {}),
      y: { ...logAxis("x_e = n_e/n_H", y), stack: "ionisation", stackWeight: WEIGHTS.y },
    },
    {
      star: milestoneLine(zStar, "last scattering"),
      ...(isSaha
        ? {}
        : curveLabels(
            hydrogen.filter((c) => c.label !== "Saha"),
            { x, y, height: share(WEIGHTS.y), reverse: true },
          )),
      ...(fall === undefined
        ? {}
        : {
            "label-Saha": {
              ...textAt(fall.z, FALL, "Saha", isSaha ? PALETTE.blue : PALETTE.vermilion, "y"),
              position: { x: "end" as const, y: "center" as const },
              xAdjust: -8,
            },
          }),
    },
  );
}
