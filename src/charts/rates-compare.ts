/** Figure of `rates compare`: ratios with their uncertainties, where the rate matters, changes of the abundances. */
import type { ChartConfiguration } from "chart.js";
import type { AnnotationOptions } from "chartjs-plugin-annotation";
import { formatReaction } from "../nuclear/reaction-name.ts";
import { abundanceLabel } from "../nucleosynthesis/labels.ts";
import { numericColumn, type Table } from "../numerics/table.ts";
import { curveLabels } from "./curve-labels.ts";
import { type AnyChart, type Figure, type LineChart, NOTE_HEIGHT, singleFigure } from "./figure.ts";
import { abundancesChart, COLORS, type Comparison, SHOWN } from "./rates-swaps.ts";
import { roundStep, sameWidth } from "./scan-axes.ts";
import {
  type Curve,
  DASHES,
  FONT_FAMILY,
  linearAxis,
  lineDataset,
  linePanel,
  logAxis,
  MARGINS,
  MUTED,
  PALETTE,
  type Point,
  type Range,
  SIZES,
} from "./style.ts";

/** Names for `--chart NAME=FILE`, in the order of the sheet. */
export const COMPARE_CHARTS = ["ratio", "sensitivity", "abundances"] as const;
/** The sheet [px]. */
const SHEET = { width: 860, ratio: 420, sensitivity: 300, abundances: 280 } as const;
/** Responses below this share of the largest are not drawn. */
const LEAST_SHARE = 0.02;
/** Ratios outside are cut off: the fits explode where the tables end. */
const LARGEST_RATIO: Range = { min: 0.4, max: 2.5 };

const LINES = [DASHES.solid, DASHES.dashed, DASHES.dashDot, DASHES.long, DASHES.dotted];
const ABUNDANCE_COLORS: Readonly<Record<string, string>> = {
  Yp: PALETTE.purple,
  dToH: PALETTE.blue,
  he3ToH: PALETTE.green,
  li7ToH: PALETTE.vermilion,
};

type Dataset = ChartConfiguration<"line", Point[]>["data"]["datasets"][number];

/** A band between two edges: filled where the uncertainty is published, else its edges alone. */
function band(
  T9: readonly number[],
  low: readonly number[],
  high: readonly number[],
  { color, published, index }: { readonly color: string; readonly published: boolean; readonly index: number },
): Dataset[] {
  const edge = (values: readonly number[], extra: Partial<Dataset>): Dataset => ({
    label: "",
    data: T9.map((x, i) => ({ x, y: values[i] })),
    borderWidth: published ? 0 : 1,
    borderColor: color,
    borderDash: [...DASHES.dotted],
    pointRadius: 0,
    yAxisID: "y",
    ...extra,
  });
  return [edge(low, {}), edge(high, published ? { backgroundColor: `${color}33`, fill: index } : {})];
}

/** T9 where the observed abundances respond most, shaded from top to bottom. */
function rangeBox(comparison: Comparison): Record<string, AnnotationOptions> {
  const strongest = Object.entries(comparison.abundances ?? {})
    .filter(([name, { range }]) => SHOWN.includes(name) && range !== undefined)
    .map(([name, { density, range }]) => ({ name, range: range!, size: density.reduce((a, b) => a + Math.abs(b), 0) }))
    .sort((a, b) => b.size - a.size)[0];
  if (strongest === undefined) return {};
  return {
    range: {
      type: "box",
      xMin: strongest.range[0],
      xMax: strongest.range[1],
      backgroundColor: "#8b95a322",
      borderWidth: 0,
      drawTime: "beforeDatasetsDraw",
      label: {
        display: true,
        drawTime: "afterDatasetsDraw",
        content: `90 % of the effect on ${abundanceLabel(strongest.name)}`,
        position: { x: "center", y: "end" },
        color: MUTED.text,
        font: { family: FONT_FAMILY, size: SIZES.label - 1, weight: "normal" },
        padding: 2,
      },
    },
  };
}

/** One evaluation on the grid: its ratio to the reference and where one standard deviation reaches. */
interface RatioCurve {
  readonly curve: Curve;
  readonly ratio: readonly number[];
  readonly low: readonly number[];
  readonly high: readonly number[];
  readonly published: boolean;
}

function ratioCurves({ evaluations, reference }: Comparison, table: Table): RatioCurve[] {
  const T9 = numericColumn(table, "T9");
  return evaluations.map(({ evaluation, uncertaintyBasis }, i) => {
    const ratio = evaluation === reference ? T9.map(() => 1) : numericColumn(table, `ratio_${evaluation}`);
    const factor = numericColumn(table, `f_u_${evaluation}`);
    const published = uncertaintyBasis === "published";
    return {
      curve: {
        label: `${evaluation}${published ? "" : "*"}`,
        color: i === 0 ? PALETTE.ink : COLORS[(i - 1) % COLORS.length],
        dash: LINES[Math.floor(Math.max(0, i - 1) / COLORS.length)],
        points: T9.map((x, k) => ({ x, y: ratio[k] })),
      },
      ratio,
      low: ratio.map((r, k) => r / factor[k]),
      high: ratio.map((r, k) => r * factor[k]),
      published,
    };
  });
}

/** A range that holds every ratio and every published band, within {@link LARGEST_RATIO}. */
function ratioRange(all: readonly RatioCurve[]): { y: Range; step: number } {
  const values = all
    .flatMap(({ ratio, low, high, published }) => (published ? [...low, ...high] : ratio))
    .map((value) => Math.min(Math.max(value, LARGEST_RATIO.min), LARGEST_RATIO.max));
  const [least, most] = [Math.min(...values, 0.99), Math.max(...values, 1.01)];
  const step = roundStep(most - least, 6);
  return { y: { min: step * Math.floor(least / step), max: step * Math.ceil(most / step) }, step };
}

function ratioChart(comparison: Comparison, table: Table, height: number): LineChart {
  const { reaction, reference } = comparison;
  const T9 = numericColumn(table, "T9");
  const x: Range = { min: T9[0], max: T9[T9.length - 1] };
  const all = ratioCurves(comparison, table);
  const { y, step } = ratioRange(all);
  const curves = all.map(({ curve }) => curve);
  const bands = all.flatMap(({ curve, low, high, published }, i) =>
    band(T9, low, high, { color: curve.color, published, index: 2 * i }),
  );
  const dotted = all.some(({ published }) => !published) ? " (* dotted: uncertainty not published)" : "";
  const panel = linePanel(
    `${formatReaction(reaction)}: ratio to ${reference} ± its standard deviation${dotted}`,
    curves,
    { x: logAxis("T9 [GK]", x), y: { ...linearAxis("rate / reference", y, step), afterFit: sameWidth } },
    { ...rangeBox(comparison), ...curveLabels(curves, { x, y, height: height - MARGINS.vertical }) },
  );
  panel.data.datasets = [...bands, ...curves.map(lineDataset)];
  return panel;
}

/** Name of a curve at its largest excursion. */
function peakLabel({ label, color, points }: Curve): AnnotationOptions<"label"> {
  const peak = points.reduce((a, b) => (Math.abs(b.y ?? 0) > Math.abs(a.y ?? 0) ? b : a));
  return {
    type: "label",
    xValue: peak.x,
    yValue: peak.y ?? 0,
    content: label,
    color,
    font: { family: FONT_FAMILY, size: SIZES.label, weight: "bold" },
    position: { x: "center", y: (peak.y ?? 0) > 0 ? "end" : "start" },
    yAdjust: (peak.y ?? 0) > 0 ? -4 : 4,
    padding: 0,
    textStrokeColor: MUTED.paper,
    textStrokeWidth: 3,
  };
}

/** @throws {RangeError} if there are no sensitivities */
function sensitivityChart({ sensitivityT9, abundances, reaction, evaluations }: Comparison): LineChart {
  if (sensitivityT9 === undefined || abundances === undefined) throw new RangeError(`${reaction}: no sensitivities`);
  const size = (name: string) => Math.max(...(abundances[name]?.density ?? []).map(Math.abs));
  const largest = Math.max(...SHOWN.map(size));
  const curves = SHOWN.filter((name) => size(name) > LEAST_SHARE * largest).map(
    (name): Curve => ({
      label: abundanceLabel(name),
      color: ABUNDANCE_COLORS[name],
      points: sensitivityT9.map((x, i) => ({ x, y: abundances[name].density[i] })),
    }),
  );
  const values = [0, ...curves.flatMap(({ points }) => points.map(({ y }) => y ?? 0))];
  const step = roundStep(1.25 * (Math.max(...values) - Math.min(...values)), 5);
  const pad = 0.2 * (Math.max(...values) - Math.min(...values));
  const low = Math.min(...values);
  const high = Math.max(...values);
  const y: Range = {
    min: low < 0 ? step * Math.floor((low - pad) / step) : 0,
    max: high > 0 ? step * Math.ceil((high + pad) / step) : 0,
  };
  const x: Range = { min: sensitivityT9[0], max: sensitivityT9[sensitivityT9.length - 1] };
  const room = Math.max(
    ...evaluations.map(
      ({ evaluation, uncertaintyBasis }) => evaluation.length + (uncertaintyBasis === "published" ? 0 : 1),
    ),
  );
  const panel = linePanel(
    "Where the rate matters: d ln X/(d ln rate d ln T9)",
    curves,
    { x: logAxis("T9 [GK]", x), y: { ...linearAxis("response per unit of ln T9", y, step), afterFit: sameWidth } },
    Object.fromEntries(curves.map((curve) => [`label-${curve.label}`, peakLabel(curve)])),
  );
  panel.options!.layout = { padding: { left: 8, right: 16 + MARGINS.letter * room, top: 4, bottom: 4 } };
  return panel;
}

/**
 * @param table ratios of `rates compare` on a fine grid of temperatures
 * @param note  one line at the foot
 * @param name  one chart alone; all of them without
 * @throws {RangeError} if a column is missing, or the chart asked for needs abundances and there are none
 */
export function compareFigure(comparison: Comparison, table: Table, note: string, name?: string): Figure<AnyChart> {
  const title = `Evaluations of ${formatReaction(comparison.reaction)}`;
  const draw: Readonly<Record<(typeof COMPARE_CHARTS)[number], (height: number) => AnyChart>> = {
    ratio: (height) => ratioChart(comparison, table, height),
    sensitivity: () => sensitivityChart(comparison),
    abundances: () => abundancesChart(comparison),
  };
  if (name !== undefined)
    return singleFigure<AnyChart>(title, note, name, (_, height) => draw[name as keyof typeof draw](height));
  let top = 0;
  const panels = COMPARE_CHARTS.filter((panel) => panel === "ratio" || comparison.swaps !== undefined).map((panel) => {
    const height = SHEET[panel];
    top += height;
    return { name: panel, x: 0, y: top - height, width: SHEET.width, height, chart: draw[panel](height) };
  });
  return { width: SHEET.width, height: top + NOTE_HEIGHT, title, note, panels };
}
