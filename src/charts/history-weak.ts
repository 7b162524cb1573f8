/** Chart: weak rates and expansion rate against temperature, and the neutron-to-proton ratio below. */
import { NEUTRON_PROTON_MASS_DIFFERENCE } from "../constants/codata.ts";
import { numericColumn, type Table } from "../numerics/table.ts";
import { curveLabels } from "./curve-labels.ts";
import type { HistoryMarks, LineChart } from "./figure.ts";
import {
  type Curve,
  DASHES,
  linePanel,
  logAxis,
  MARGINS,
  milestoneLine,
  PALETTE,
  pointsWithin,
  type Range,
} from "./style.ts";

/** Shares of the height: rates, ratio. */
const WEIGHTS = { y: 4, yRatio: 3 } as const;
/** Temperatures shown [MeV]: from equilibrium to after free decay has taken over. */
const SHOWN: Range = { min: 0.03, max: 10 };

/**
 * @param table  result of `history`: columns T_MeV, H_per_s, n_to_p_per_s, p_to_n_per_s, Y_n, Y_h1
 * @param height of the panel [px], for the distance of labels
 * @param marks  freeze-out temperature, drawn as a line
 * @throws {RangeError} if a column is missing
 */
export function weakChart(table: Table, height: number, marks: HistoryMarks = {}): LineChart {
  const T = numericColumn(table, "T_MeV");
  const neutrons = numericColumn(table, "Y_n");
  const protons = numericColumn(table, "Y_h1");
  const xRange = { min: SHOWN.min, max: Math.min(SHOWN.max, Math.max(...T)) };
  const yRange = { min: 1e-4, max: 1e4 };
  const ratioRange = { min: 1e-2, max: 0.98 };
  const line = (ys: readonly number[]) => pointsWithin(T, ys, xRange);
  const rates: Curve[] = [
    { label: "n → p", color: PALETTE.blue, points: line(numericColumn(table, "n_to_p_per_s")) },
    { label: "p → n", color: PALETTE.green, dash: DASHES.dashed, points: line(numericColumn(table, "p_to_n_per_s")) },
    { label: "H", color: PALETTE.vermilion, dash: DASHES.long, points: line(numericColumn(table, "H_per_s")) },
  ];
  const ratios: Curve[] = [
    { label: "n/p", color: PALETTE.ink, points: line(neutrons.map((n, i) => n / protons[i])), axis: "yRatio" },
    {
      label: "equilibrium",
      color: PALETTE.purple,
      dash: DASHES.dotted,
      points: line(T.map((kT) => Math.exp(-NEUTRON_PROTON_MASS_DIFFERENCE.value / kT))),
      axis: "yRatio",
    },
  ];
  const share = (weight: number) => ((height - MARGINS.vertical) * weight) / (WEIGHTS.y + WEIGHTS.yRatio);
  const frame = { x: xRange, reverse: true };
  return linePanel(
    "Weak rates and neutron-to-proton ratio",
    [...rates, ...ratios],
    {
      x: logAxis("T [MeV], time runs to the right", xRange, { reverse: true }),
      yRatio: { ...logAxis("n/p", ratioRange), stack: "weak", stackWeight: WEIGHTS.yRatio },
      y: { ...logAxis("rate [1/s]", yRange), stack: "weak", stackWeight: WEIGHTS.y },
    },
    {
      ...(marks.freezeOutTemperature_MeV === undefined
        ? {}
        : { freezeOut: milestoneLine(marks.freezeOutTemperature_MeV, "weak freeze-out") }),
      ...curveLabels(rates, { ...frame, y: yRange, height: share(WEIGHTS.y) }),
      ...curveLabels(ratios, { ...frame, y: ratioRange, height: share(WEIGHTS.yRatio), axis: "yRatio" }),
    },
  );
}
