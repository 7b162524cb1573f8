/** Chart: share of the nucleons in each nuclide, A_i n_i/n_b, against time. */
import { formatNuclide, nuclideNumbers } from "../nuclear/nuclide.ts";
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

/** Shares below this are not shown: nothing measurable comes of them. */
const FLOOR = 1e-16;
/** Times shown [s]: from before the deuterium bottleneck opens to after the last reaction. */
const SHOWN: Range = { min: 1, max: 1e6 };

/** One colour an element, by charge; later elements start again with another dash. */
const ELEMENT_COLORS = [
  PALETTE.ink,
  PALETTE.blue,
  PALETTE.vermilion,
  PALETTE.green,
  PALETTE.purple,
  PALETTE.orange,
  PALETTE.sky,
];
/** One dash an isotope of the same element, in the order of the table. */
const ISOTOPE_DASHES = [DASHES.solid, DASHES.dashed, DASHES.dotted, DASHES.dashDot, DASHES.long];
/** Nuclides that carry most of the matter get a thicker line. */
const MAIN = ["h1", "he4"];

/**
 * @param table  result of `history`: columns t_s and Y_<nuclide> = n_i/n_b
 * @param height of the panel [px], for the distance of labels
 * @param marks  time of the deuterium peak, drawn as a line
 * @throws {RangeError} if a column is missing or names no nuclide
 */
export function abundancesChart(table: Table, height: number, marks: HistoryMarks = {}): LineChart {
  const t = numericColumn(table, "t_s");
  const x = { min: Math.max(SHOWN.min, t[0]), max: Math.min(SHOWN.max, t[t.length - 1]) };
  const isotopes = new Map<number, number>();
  const curves = table.columns.flatMap((name): Curve[] => {
    if (!name.startsWith("Y_")) return [];
    const id = name.slice(2);
    const numbers = nuclideNumbers(id === "h1" ? "p" : id);
    if (numbers === undefined) throw new RangeError(`column ${name}: no such nuclide`);
    const { Z, A } = numbers;
    const shares = numericColumn(table, name).map((Y) => (A * Y > FLOOR / 1e6 ? A * Y : null));
    const points = pointsWithin(t, shares, x);
    if (!points.some(({ y }) => y !== null && y > FLOOR)) return [];
    const rank = isotopes.get(Z) ?? 0;
    isotopes.set(Z, rank + 1);
    return [
      {
        label: id === "h1" ? "p" : formatNuclide(id),
        color: ELEMENT_COLORS[Z % ELEMENT_COLORS.length],
        dash: ISOTOPE_DASHES[(rank + Math.floor(Z / ELEMENT_COLORS.length)) % ISOTOPE_DASHES.length],
        width: MAIN.includes(id) ? 2.8 : 2,
        points,
      },
    ];
  });
  const y = { min: FLOOR, max: 1 };
  return linePanel(
    "Nuclides against time",
    curves,
    { x: logAxis("t [s]", x), y: logAxis("share of the nucleons, A n / n_b", y) },
    {
      ...(marks.tDeuteriumPeak_s === undefined
        ? {}
        : { peak: milestoneLine(marks.tDeuteriumPeak_s, "deuterium peak") }),
      ...curveLabels(curves, { x, y, height: height - MARGINS.vertical }),
    },
  );
}
