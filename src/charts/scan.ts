/** Figure of the command `scan`: Y_p, D/H with 3He/H, and 7Li/H over one axis, with error bands and observed ranges. */
import type { ChartConfiguration } from "chart.js";
import type { AnnotationOptions } from "chartjs-plugin-annotation";
import type { Table } from "../numerics/table.ts";
import { type Figure, type LineChart, singleFigure } from "./figure.ts";
import { densityBand, frame, labels, observedBoxes, type View } from "./scan-annotations.ts";
import { compactLinearAxis, compactLogAxis, factorTicks, sameWidth } from "./scan-axes.ts";
import { type BandedCurve, bandedCurves, orderedAxes } from "./scan-curves.ts";
import {
  axisTitle,
  LOOKS,
  type Look,
  type ObservedRange,
  PANELS,
  type PanelName,
  RAMP,
  SCAN_CHARTS,
  type ScanMarks,
  TEXT,
} from "./scan-look.ts";
import { FONT_FAMILY, MUTED, type Point, type Range } from "./style.ts";

/** The sheet [px]: at 86 mm, the width of a journal's column, its letters are 7 point high. */
const SHEET = { width: 430, height: 640, single: 340 } as const;
/** Most decades of a logarithmic panel, counted from its highest value. */
const MOST_DECADES = 4.5;
/** An empty axis between two panels. */
const GAP = {
  type: "linear",
  stack: "abundances",
  stackWeight: 0.25,
  border: { display: false },
  grid: { display: false },
  ticks: { display: false },
  afterFit: sameWidth,
} as const;

/**
 * The abundance diagram.
 * @param table result of `scan`
 * @param note  one line at the foot
 * @param name  one panel alone; all of them without
 * @throws {RangeError} if a column is missing
 */
export function scanFigure(table: Table, note: string, marks: ScanMarks, name?: string): Figure {
  const panels = name === undefined ? SCAN_CHARTS : [name as PanelName];
  const [along] = orderedAxes(table, marks.axes);
  const title = `Light-element abundances against ${along === "eta10" || along === "omegaB" ? "the baryon density" : axisTitle(along)}`;
  const height = name === undefined ? SHEET.height : SHEET.single;
  return singleFigure(
    title,
    note,
    name ?? "abundances",
    (_, inner) => diagram(table, marks, panels, inner),
    SHEET.width,
    height,
  );
}

function diagram(table: Table, marks: ScanMarks, names: readonly PanelName[], height: number): LineChart {
  const [along, other] = orderedAxes(table, marks.axes);
  const xs = bandedCurves(table, marks.axes, "Yp")[0].x;
  const x: Range = { min: xs[0], max: xs[xs.length - 1] };
  const scales: Record<string, unknown> = { x: xAxis(along, x, marks.log) };
  const opposite = oppositeAxis(along, x, marks);
  if (opposite !== undefined) scales.x2 = opposite;
  const datasets: LineChart["data"]["datasets"] = [];
  const annotations: Record<string, AnnotationOptions> = {};
  const weights = names.reduce((sum, name) => sum + PANELS[name].weight, 0);
  // The axis defined first stands at the bottom of the stack.
  for (const name of [...names].reverse()) {
    if (Object.keys(scales).some((key) => key.startsWith("y-"))) scales[`y-gap-${name}`] = GAP;
    const { abundances, weight } = PANELS[name];
    const axis = `y-${name}`;
    const curves = abundances.map((abundance) => ({ abundance, curves: bandedCurves(table, marks.axes, abundance) }));
    const observed = marks.observed.filter((o) => (abundances as readonly string[]).includes(o.abundance));
    const range =
      name === "helium"
        ? heliumRange(curves[0].curves, observed)
        : logRange(
            curves.flatMap((c) => c.curves),
            observed,
          );
    const title = other !== undefined && name === "deuterium" ? "D/H (full), ³He/H (dashed)" : PANELS[name].title;
    const scale =
      name === "helium" ? compactLinearAxis(title, range, TEXT.axis) : compactLogAxis(title, range, TEXT.axis);
    scales[axis] = { ...scale, stack: "abundances", stackWeight: weight, afterFit: sameWidth };
    for (const { abundance, curves: family } of curves)
      family.forEach((curve, i) => {
        const look = family.length === 1 ? LOOKS[abundance] : { ...LOOKS[abundance], color: RAMP[i] };
        datasets.push(...bandDatasets(curve, look, axis, range, datasets.length));
      });
    const inner = ((height - 110) * weight) / weights;
    const view: View = { axis, range, x, log: name !== "helium", height: inner, logX: marks.log };
    const all = curves.flatMap((c) => c.curves);
    Object.assign(
      annotations,
      frame(view),
      densityBand(along, marks, view, name === (names.includes("deuterium") ? "deuterium" : names[0])),
    );
    Object.assign(annotations, observedBoxes(observed, view, all));
    Object.assign(annotations, labels(curves, view));
  }
  return chart(
    datasets,
    scales,
    annotations,
    other === undefined ? undefined : `numbers at the curves: ${axisTitle(other)}`,
  );
}

function xAxis(key: string, range: Range, log: boolean) {
  const title = axisTitle(key);
  return log
    ? {
        ...compactLogAxis(title, range, TEXT.axis),
        afterBuildTicks: factorTicks(range),
        grid: { color: MUTED.grid, tickColor: MUTED.axis },
      }
    : compactLinearAxis(title, range, TEXT.axis);
}

/** omega_b over eta10, or eta10 over omega_b, at the top. */
function oppositeAxis(key: string, range: Range, marks: ScanMarks) {
  if (key !== "eta10" && key !== "omegaB") return undefined;
  const factor = key === "eta10" ? 1 / marks.eta10PerOmegaB : marks.eta10PerOmegaB;
  const converted = { min: range.min * factor, max: range.max * factor };
  const axis = xAxis(key === "eta10" ? "omegaB" : "eta10", converted, marks.log);
  return { ...axis, position: "top" as const, grid: { ...axis.grid, drawOnChartArea: false } };
}

function heliumRange(curves: readonly BandedCurve[], observed: readonly ObservedRange[]): Range {
  const values = [
    ...curves.flatMap((curve) => curve.value),
    ...observed.flatMap((o) => [o.value - 2 * o.sigma, o.value + 2 * o.sigma]),
  ];
  const low = Math.min(...values);
  const high = Math.max(...values);
  const margin = 0.08 * (high - low) || 0.001;
  return { min: low - margin, max: high + margin };
}

function logRange(curves: readonly BandedCurve[], observed: readonly ObservedRange[]): Range {
  const values = [...curves.flatMap((curve) => curve.value), ...observed.map((o) => o.value)].filter((v) => v > 0);
  const high = Math.max(...values) * 1.6;
  return { min: Math.max(Math.min(...values) / 1.6, high / 10 ** MOST_DECADES), max: high };
}

/** The band between value - sigma and value + sigma, and the curve over it. */
function bandDatasets(
  curve: BandedCurve,
  look: Look,
  axis: string,
  range: Range,
  index: number,
): LineChart["data"]["datasets"] {
  const points = (ys: readonly number[]): Point[] =>
    curve.x.map((x, i) => ({ x, y: ys[i] > 0 ? Math.max(ys[i], range.min / 100) : null }));
  const common = { yAxisID: axis, pointRadius: 0, borderJoinStyle: "round" as const };
  const line = {
    ...common,
    label: look.label,
    data: points(curve.value),
    borderColor: look.color,
    borderDash: [...look.dash],
    borderWidth: 1.8,
  };
  const { sigma } = curve;
  if (sigma === undefined) return [line];
  const edge = (sign: number) => points(curve.value.map((v, i) => v + sign * sigma[i]));
  return [
    { ...common, label: "", data: edge(-1), borderWidth: 0, borderColor: look.color },
    {
      ...common,
      label: "",
      data: edge(1),
      borderWidth: 0,
      borderColor: look.color,
      backgroundColor: `${look.color}66`,
      fill: index,
    },
    line,
  ];
}

function chart(
  datasets: LineChart["data"]["datasets"],
  scales: Record<string, unknown>,
  annotations: Record<string, AnnotationOptions>,
  title?: string,
): LineChart {
  return {
    type: "line",
    data: { datasets },
    options: {
      animation: false,
      responsive: false,
      parsing: false,
      normalized: true,
      events: [],
      layout: { padding: { left: 6, right: title === undefined ? 40 : 54, top: 8, bottom: 2 } },
      plugins: {
        legend: { display: false },
        tooltip: { enabled: false },
        title: {
          display: title !== undefined,
          text: title ?? "",
          align: "start",
          color: MUTED.text,
          font: { family: FONT_FAMILY, size: TEXT.axis, weight: "normal" },
        },
        annotation: { clip: false, annotations },
      },
      scales: scales as NonNullable<NonNullable<ChartConfiguration<"line", Point[]>["options"]>["scales"]>,
    },
  };
}
