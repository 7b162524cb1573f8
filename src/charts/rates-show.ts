/** Figure of `rates show`: forward and reverse rate, and the uncertainty, against temperature. */
import { numericColumn, type Table } from "../numerics/table.ts";
import { curveLabels } from "./curve-labels.ts";
import { type Figure, type LineChart, NOTE_HEIGHT, singleFigure } from "./figure.ts";
import { sameWidth } from "./scan-axes.ts";
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
  type Range,
} from "./style.ts";

/** What the figure needs. */
export interface RateCurves {
  /** `d(p,γ)³He`. */
  readonly name: string;
  readonly evaluation: string;
  /** Table of `rates show` on a fine grid of temperatures. */
  readonly table: Table;
  /** What the source claims [GK]. */
  readonly validT9: readonly [number, number];
  readonly assumed: boolean;
}

type Draw = (rate: RateCurves, height: number) => LineChart;

const CHARTS: Readonly<Record<string, Draw>> = { rate: rateChart, uncertainty: uncertaintyChart };
/** Names for `--chart NAME=FILE`. */
export const RATE_CHARTS = Object.keys(CHARTS);

/** The sheet [px]. */
const SHEET = { width: 860, rate: 480, uncertainty: 340 } as const;
/** Letters right of the axes, so that both panels have the same width. */
const LABEL_ROOM = "reverse".length;
/** Rates that far below the highest are not shown: nothing happens there. */
const MOST_DECADES = 24;

function temperatures(T9: readonly number[]): Range {
  return { min: T9[0], max: T9[T9.length - 1] };
}

/** Ends of the claim inside the axis, as upright lines. */
function claimLines({ validT9: [low, high] }: RateCurves, x: Range) {
  return {
    ...(low > x.min ? { claimFrom: milestoneLine(low, "claimed from here") } : {}),
    ...(high < x.max ? { claimTo: milestoneLine(high, "claimed to here") } : {}),
  };
}

function rateChart(rate: RateCurves, height: number): LineChart {
  const { table } = rate;
  const T9 = numericColumn(table, "T9");
  const x = temperatures(T9);
  const columns = [
    { column: "rate", label: "rate", color: PALETTE.blue, dash: DASHES.solid },
    { column: "reverse_rate", label: "reverse", color: PALETTE.vermilion, dash: DASHES.dashed },
  ].filter(({ column }) => table.columns.includes(column));
  const values = columns.map(({ column }) => numericColumn(table, column));
  const top = Math.max(...values.flat());
  const lowest = Math.min(...values.flat().filter((value) => value > 0));
  const y = {
    min: 10 ** Math.floor(Math.log10(Math.max(lowest, top * 10 ** -MOST_DECADES))),
    max: 10 ** Math.ceil(Math.log10(top) + 0.01),
  };
  const curves = columns.map(
    ({ label, color, dash }, i): Curve => ({ label, color, dash, points: pointsWithin(T9, values[i], x) }),
  );
  const units = columns.map(({ column, label }) => `${label} [${plainUnit(table, column)}]`);
  return linePanel(
    `${rate.name}, ${rate.evaluation}`,
    curves,
    { x: logAxis("T9 [GK]", x), y: { ...logAxis(units.join(", "), y), afterFit: sameWidth } },
    { ...claimLines(rate, x), ...curveLabels(curves, { x, y, height: height - MARGINS.vertical }) },
  );
}

function plainUnit(table: Table, column: string): string {
  return table.units[table.columns.indexOf(column)]
    .replace("cm6 / (mol2 s)", "cm⁶/(mol² s)")
    .replace("cm3 / (mol s)", "cm³/(mol s)")
    .replace(" / ", "/");
}

function uncertaintyChart(rate: RateCurves): LineChart {
  const T9 = numericColumn(rate.table, "T9");
  const x = temperatures(T9);
  const percent = numericColumn(rate.table, "f_u").map((factor) => 100 * (factor - 1));
  const most = Math.max(...percent);
  const step = niceStep(most);
  const y = { min: 0, max: step * (Math.floor(most / step) + 1) };
  const curve: Curve = {
    label: " ".repeat(LABEL_ROOM),
    color: PALETTE.blue,
    dash: rate.assumed ? DASHES.dashed : DASHES.solid,
    points: T9.map((each, i) => ({ x: each, y: percent[i] })),
  };
  return linePanel(
    `Uncertainty of ${rate.name}, ${rate.evaluation}${rate.assumed ? " (not published)" : ""}`,
    [curve],
    { x: logAxis("T9 [GK]", x), y: { ...linearAxis("f_u - 1 [per cent]", y, step), afterFit: sameWidth } },
    claimLines(rate, x),
  );
}

/** A step of 1, 2 or 5 times a power of ten that gives three to seven ticks. */
function niceStep(most: number): number {
  const power = 10 ** Math.floor(Math.log10(Math.max(most, 1e-6) / 3));
  const rest = most / 3 / power;
  return power * (rest >= 5 ? 5 : rest >= 2 ? 2 : 1);
}

/**
 * @param note one line at the foot
 * @param name one chart alone; both without
 * @throws {RangeError} if a column is missing
 */
export function rateFigure(rate: RateCurves, note: string, name?: string): Figure {
  const title = `Rate of ${rate.name}`;
  if (name !== undefined) return singleFigure(title, note, name, (_, height) => CHARTS[name](rate, height));
  return {
    width: SHEET.width,
    height: SHEET.rate + SHEET.uncertainty + NOTE_HEIGHT,
    title,
    note,
    panels: [
      { name: "rate", x: 0, y: 0, width: SHEET.width, height: SHEET.rate, chart: rateChart(rate, SHEET.rate) },
      {
        name: "uncertainty",
        x: 0,
        y: SHEET.rate,
        width: SHEET.width,
        height: SHEET.uncertainty,
        chart: uncertaintyChart(rate),
      },
    ],
  };
}
