/** The look that all charts share: palette, fonts, axes, titles, and curve labels at the end of the line. */
import type { ChartConfiguration, ChartDataset } from "chart.js";
import type { AnnotationOptions } from "chartjs-plugin-annotation";

/** Family name under which the renderer registers its font; a browser falls back to its own sans-serif. */
export const FONT_FAMILY = "Ember Sans";

/**
 * Colours that stay apart for every kind of colour vision and fall on different greys.
 * @see Okabe & Ito 2008, Color Universal Design (from memory); yellow left out, orange and sky a little darker, for thin lines on white
 */
export const PALETTE = {
  ink: "#1b1f27",
  blue: "#0072b2",
  vermilion: "#d55e00",
  green: "#009e73",
  purple: "#a8578a",
  orange: "#dd9500",
  sky: "#48a9e0",
} as const;
/** Greys of text and lines that are not data. */
export const MUTED = { text: "#5a6472", axis: "#8b95a3", grid: "#e7eaee", paper: "#ffffff" } as const;

/** Dash patterns, so that curves stay apart without colour. */
export const DASHES = { solid: [], dashed: [7, 4], dotted: [2, 3], dashDot: [9, 3, 2, 3], long: [14, 5] } as const;

/** Text sizes [px]. */
export const SIZES = { title: 15, text: 12, label: 12 } as const;
/** Room that titles and axes take of a panel's height, and one letter of a label right of the axes [px]. */
export const MARGINS = { vertical: 118, letter: 7.6 } as const;

/** A point of a curve; null breaks the line. */
export interface Point {
  readonly x: number;
  readonly y: number | null;
}

/** A curve with its label. */
export interface Curve {
  readonly label: string;
  readonly color: string;
  readonly dash?: readonly number[];
  readonly width?: number;
  readonly points: readonly Point[];
  /** Name of the y axis it belongs to; `y` unless the panel has several. */
  readonly axis?: string;
}

/** Axes of a panel by name. */
export type Scales = NonNullable<NonNullable<ChartConfiguration<"line", Point[]>["options"]>["scales"]>;

/** Range of an axis. */
export interface Range {
  readonly min: number;
  readonly max: number;
}

const RAISED: Readonly<Record<string, string>> = { "-": "⁻" };
const DIGITS = "⁰¹²³⁴⁵⁶⁷⁸⁹";

/** `10⁻³` for 0.001; 1 and 10 in full. */
export function powerLabel(value: number): string {
  const power = Math.round(Math.log10(value));
  if (power === 0 || power === 1) return String(10 ** power);
  return `10${[...String(power)].map((c) => RAISED[c] ?? DIGITS[Number(c)]).join("")}`;
}

function isPower(value: number, every: number): boolean {
  const power = Math.log10(value);
  return Math.abs(power - Math.round(power)) < 1e-9 && Math.round(power) % every === 0;
}

const axisLine = { border: { color: MUTED.axis, width: 1 } } as const;
const tickFont = { family: FONT_FAMILY, size: SIZES.text } as const;

function axisTitle(text: string) {
  return { display: true, text, color: MUTED.text, font: tickFont };
}

/** Logarithmic axis that labels decades only, every n-th one where there are many. */
export function logAxis(title: string, range: Range, extra: { readonly reverse?: boolean } = {}) {
  const every = Math.ceil(Math.log10(range.max / range.min) / 9);
  return {
    type: "logarithmic" as const,
    ...extra,
    min: range.min,
    max: range.max,
    title: axisTitle(title),
    ...axisLine,
    grid: { color: MUTED.grid, tickColor: MUTED.axis, tickLength: 5, lineWidth: 1 },
    afterBuildTicks: (axis: { ticks: { value: number }[] }) => {
      axis.ticks = axis.ticks.filter((tick) => isPower(tick.value, every));
    },
    ticks: {
      color: MUTED.text,
      font: tickFont,
      maxRotation: 0,
      autoSkip: false,
      callback: (value: number | string) => (isPower(Number(value), every) ? powerLabel(Number(value)) : ""),
    },
  } satisfies Scales[string];
}

/** Linear axis. */
export function linearAxis(title: string, range: Range, stepSize: number) {
  return {
    type: "linear" as const,
    min: range.min,
    max: range.max,
    title: axisTitle(title),
    ...axisLine,
    grid: { color: MUTED.grid, tickColor: MUTED.axis, tickLength: 5, lineWidth: 1 },
    ticks: { color: MUTED.text, font: tickFont, maxRotation: 0, stepSize, includeBounds: false },
  } satisfies Scales[string];
}

/**
 * Points of a curve inside a range and one more on either side, so that it runs to the edges.
 * @param xs monotonic, rising or falling
 * @param ys null or not positive: a gap
 */
export function pointsWithin(xs: readonly number[], ys: readonly (number | null)[], range: Range): Point[] {
  const inside = (i: number) => xs[i] >= range.min && xs[i] <= range.max;
  return xs.flatMap((x, i) => {
    if (!inside(i) && !inside(i - 1) && !inside(i + 1)) return [];
    const y = ys[i];
    return [{ x, y: y !== null && y > 0 ? y : null }];
  });
}

/** Curve as a chart.js data set. */
export function lineDataset(curve: Curve): ChartDataset<"line", Point[]> {
  return {
    label: curve.label,
    data: [...curve.points],
    borderColor: curve.color,
    borderDash: [...(curve.dash ?? DASHES.solid)],
    borderWidth: curve.width ?? 2,
    borderJoinStyle: "round",
    pointRadius: 0,
    yAxisID: curve.axis ?? "y",
  };
}

/** A thin upright line with its name above the axes: a milestone. */
export function milestoneLine(x: number, text: string): AnnotationOptions<"line"> {
  return {
    type: "line",
    scaleID: "x",
    value: x,
    borderColor: MUTED.axis,
    borderWidth: 1,
    borderDash: [...DASHES.dotted],
    drawTime: "beforeDatasetsDraw",
    label: {
      display: true,
      drawTime: "afterDatasetsDraw",
      content: text,
      position: "start",
      yAdjust: -16,
      color: MUTED.text,
      backgroundColor: "transparent",
      font: { family: FONT_FAMILY, size: SIZES.label - 1, weight: "normal" },
      padding: 2,
    },
  };
}

/**
 * Heights moved apart so that neighbours keep a distance, each as near to its wish as that allows.
 * @param wishes heights in any unit
 * @param gap    least distance, same unit
 * @returns heights in the order of the wishes
 */
export function spreadApart(wishes: readonly number[], gap: number): number[] {
  const order = wishes.map((_, i) => i).sort((a, b) => wishes[a] - wishes[b]);
  // Groups that touch are pooled; each sits where its members' wishes have their mean.
  const groups: { members: number[]; start: number }[] = [];
  const place = (members: number[]) =>
    members.reduce((sum, member, k) => sum + wishes[member] - k * gap, 0) / members.length;
  for (const i of order) {
    let members = [i];
    let before = groups.at(-1);
    while (before !== undefined && before.start + before.members.length * gap > place(members)) {
      members = [...before.members, ...members];
      groups.pop();
      before = groups.at(-1);
    }
    groups.push({ members, start: place(members) });
  }
  const heights = new Array<number>(wishes.length);
  for (const { members, start } of groups)
    members.forEach((member, k) => {
      heights[member] = start + k * gap;
    });
  return heights;
}

/** A panel of curves: title on the left, no legend, since each curve carries its name. */
export function linePanel(
  title: string,
  curves: readonly Curve[],
  scales: Scales,
  annotations: Record<string, AnnotationOptions>,
): ChartConfiguration<"line", Point[]> {
  const longest = Math.max(...curves.map((curve) => curve.label.length));
  return {
    type: "line",
    data: { datasets: curves.map(lineDataset) },
    options: {
      animation: false,
      responsive: false,
      parsing: false,
      normalized: true,
      events: [],
      layout: { padding: { left: 8, right: 16 + MARGINS.letter * longest, top: 4, bottom: 4 } },
      plugins: {
        legend: { display: false },
        tooltip: { enabled: false },
        title: {
          display: true,
          text: title,
          align: "start",
          color: PALETTE.ink,
          font: { family: FONT_FAMILY, size: SIZES.title, weight: "bold" },
          padding: { top: 6, bottom: 12 },
        },
        annotation: { clip: false, annotations },
      },
      scales,
    },
  };
}
