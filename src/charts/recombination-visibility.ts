/** Chart: the two visibility functions, in redshift and in conformal time, each over its maximum. */
import { lateBackground } from "../background/expansion.ts";
import type { RecombinationResults } from "../model/recombination.ts";
import { numericColumn } from "../numerics/table.ts";
import type { CosmologyParameters } from "../parameters/cosmology.ts";
import { textAt } from "./curve-labels.ts";
import type { LineChart } from "./figure.ts";
import { type Curve, DASHES, linearAxis, linePanel, milestoneLine, PALETTE, type Point } from "./style.ts";

/** Widths (full, at half maximum) shown on either side of the peak. */
const SIDES = 1.7;

function widthText(width: number | undefined): string {
  return width === undefined ? "" : `, width ${width.toFixed(1)}`;
}

/**
 * @param results   of `recombination`: table with z, visibility_per_z
 * @param cosmology for H(z): g(eta) is g(z) H/c
 * @throws {RangeError} if a column is missing
 */
export function visibilityChart(results: RecombinationResults, cosmology: CosmologyParameters): LineChart {
  const { table, visibility, zStar } = results;
  const z = numericColumn(table, "z");
  const g = numericColumn(table, "visibility_per_z");
  const background = lateBackground(cosmology);
  const { zPeak, fwhmZ = zPeak / 2 } = visibility;
  const range = {
    min: Math.max(0, Math.round((zPeak - SIDES * fwhmZ) / 50) * 50),
    max: Math.round((zPeak + SIDES * fwhmZ) / 50) * 50,
  };
  const shown = z
    .map((value, i) => ({ z: value, i }))
    .filter((p) => p.z >= range.min * 0.97 && p.z <= range.max * 1.03);
  const normalised = (values: readonly number[]): Point[] => {
    const most = Math.max(...shown.map(({ i }) => values[i]));
    return shown.map(({ z: x, i }) => ({ x, y: values[i] / most }));
  };
  const perMpc = g.map((value, i) => value * background.hubble(z[i]));
  const curves: Curve[] = [
    { label: "g(z)", color: PALETTE.blue, width: 2.5, points: normalised(g) },
    { label: "g(η)", color: PALETTE.vermilion, dash: DASHES.dashed, points: normalised(perMpc) },
  ];
  const width = range.max - range.min;
  const step = [50, 100, 200, 500, 1000].find((s) => width / s < 9) ?? 2000;
  const text = (y: number, words: string, color: string) => ({
    ...textAt(range.max, y, words, color, "y"),
    position: { x: "start" as const, y: "center" as const },
    xAdjust: 12,
  });
  return linePanel(
    "Visibility, each over its maximum",
    curves,
    {
      x: { ...linearAxis("z, time runs to the right", range, step), reverse: true },
      y: linearAxis("g / maximum", { min: 0, max: 1.08 }, 0.2),
    },
    {
      star: milestoneLine(zStar, "last scattering"),
      "label-g(z)": text(0.97, `g(z): peak ${zPeak.toFixed(1)}${widthText(visibility.fwhmZ)}`, PALETTE.blue),
      "label-g(η)": text(
        0.89,
        `g(η): peak ${visibility.zOfEtaPeak.toFixed(1)}${widthText(visibility.fwhmZOfEta)}`,
        PALETTE.vermilion,
      ),
    },
  );
}
