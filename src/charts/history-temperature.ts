/** Chart: temperature of photons and neutrinos against time, and their ratio below. */
import { numericColumn, type Table } from "../numerics/table.ts";
import { curveLabels } from "./curve-labels.ts";
import type { LineChart } from "./figure.ts";
import { type Curve, DASHES, linearAxis, linePanel, logAxis, MARGINS, PALETTE } from "./style.ts";

/** Shares of the height: temperatures, ratio. */
const WEIGHTS = { y: 5, yRatio: 2 } as const;

/**
 * @param table  result of `history`: columns t_s, T_MeV, Tnue_over_T, Tnumu_over_T
 * @param height of the panel [px], for the distance of labels
 * @throws {RangeError} if a column is missing
 */
export function temperatureChart(table: Table, height: number): LineChart {
  const t = numericColumn(table, "t_s");
  const photon = numericColumn(table, "T_MeV");
  const electron = numericColumn(table, "Tnue_over_T");
  const muon = numericColumn(table, "Tnumu_over_T");
  const line = (ys: readonly number[]) => t.map((x, i) => ({ x, y: ys[i] }));
  const temperatures: Curve[] = [
    { label: "photons", color: PALETTE.vermilion, points: line(photon) },
    {
      label: "neutrinos",
      color: PALETTE.blue,
      dash: DASHES.dashed,
      points: line(photon.map((T, i) => T * electron[i])),
    },
  ];
  const ratios: Curve[] = [
    { label: "νe", color: PALETTE.blue, dash: DASHES.dashed, points: line(electron), axis: "yRatio" },
    { label: "νμ, ντ", color: PALETTE.green, dash: DASHES.dotted, points: line(muon), axis: "yRatio" },
  ];
  const x = { min: t[0], max: t[t.length - 1] };
  const y = { min: Math.min(...photon.map((T, i) => T * electron[i])), max: Math.max(...photon) };
  const ratioRange = { min: 0.66, max: 1.04 };
  const inner = height - MARGINS.vertical;
  const share = (weight: number) => (inner * weight) / (WEIGHTS.y + WEIGHTS.yRatio);
  return linePanel(
    "Temperature against time",
    [...temperatures, ...ratios],
    {
      x: logAxis("t [s]", x),
      yRatio: {
        ...linearAxis("Tν / T", ratioRange, 0.1),
        stack: "temperature",
        stackWeight: WEIGHTS.yRatio,
      },
      y: { ...logAxis("T [MeV]", y), stack: "temperature", stackWeight: WEIGHTS.y },
    },
    {
      ...curveLabels(temperatures, { x, y, height: share(WEIGHTS.y) }),
      ...curveLabels(ratios, { x, y: ratioRange, height: share(WEIGHTS.yRatio), axis: "yRatio" }),
    },
  );
}
