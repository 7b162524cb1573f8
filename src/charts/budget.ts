/** Figure of the command `budget`: share of each source in the variance, one chart of bars an abundance. */
import type { AnnotationOptions } from "chartjs-plugin-annotation";
import { type ErrorBudget, isAssumed, sortedShares } from "../model/error-budget.ts";
import { formatReaction } from "../nuclear/reaction-name.ts";
import { abundanceLabel } from "../nucleosynthesis/labels.ts";
import { type BarChart, type Figure, NOTE_HEIGHT, singleFigure } from "./figure.ts";
import { FONT_FAMILY, MUTED, PALETTE, SIZES } from "./style.ts";

/** What the figure needs of a result of `budget`. */
export type BudgetShares = Pick<ErrorBudget, "abundances" | "variance" | "sources">;

/** Chart name -> abundance, in the order of the sheet. */
const CHARTS = { helium: "Yp", deuterium: "dToH", helium3: "he3ToH", lithium: "li7ToH" } as const;
/** Names for `--chart NAME=FILE`. */
export const BUDGET_CHARTS = Object.keys(CHARTS);

const TITLE = "Error budget of the light elements";
/** Bars in one chart at most, and the least share of one; the rest is summed up in a last bar. */
const BARS = 7;
const LEAST_SHARE = 0.002;
/** One chart of the sheet [px]. */
const PANEL = { width: 620, height: 360 } as const;
/** Bars whose error is not published are pale. */
const PALE = "#e9c3a5";

const LABELS: Readonly<Record<string, string>> = { tauN: "τₙ", omegaB: "ω_b" };

function valueLabel(index: number, share: number): AnnotationOptions<"label"> {
  return {
    type: "label",
    xValue: share,
    yValue: index,
    content: share >= 0.0995 ? `${(100 * share).toFixed(0)} %` : `${(100 * share).toPrecision(1)} %`,
    color: PALETTE.ink,
    font: { family: FONT_FAMILY, size: SIZES.label },
    position: { x: "start", y: "center" },
    xAdjust: 4,
    padding: 0,
  };
}

/** @throws {RangeError} for an abundance that the budget does not hold */
function sharesChart(budget: BudgetShares, abundance: "Yp" | "dToH" | "he3ToH" | "li7ToH"): BarChart {
  const estimate = budget.abundances[abundance];
  if (estimate === undefined) throw new RangeError(`${abundance}: not in this budget`);
  const all = sortedShares(budget, abundance);
  const count = Math.min(BARS, all.filter(({ share }) => share >= LEAST_SHARE).length);
  const bars = all.slice(0, count).map(({ source, share }) => ({
    label: LABELS[source.name] ?? formatReaction(source.name),
    share,
    assumed: isAssumed(source),
  }));
  const rest = all.slice(count);
  bars.push({ label: `${rest.length} others`, share: rest.reduce((sum, r) => sum + r.share, 0), assumed: false });
  const color = ({ assumed }: (typeof bars)[number], i: number) =>
    i === count ? MUTED.axis : assumed ? PALE : PALETTE.blue;
  const tickFont = { family: FONT_FAMILY, size: SIZES.text } as const;
  const relative = ((100 * estimate.sigma) / estimate.value).toPrecision(2);
  return {
    type: "bar",
    data: {
      labels: bars.map(({ label }) => label),
      datasets: [
        {
          data: bars.map(({ share }) => share),
          backgroundColor: bars.map(color),
          borderColor: bars.map(({ assumed }, i) => (assumed ? PALETTE.vermilion : color(bars[i], i))),
          borderWidth: 1,
          maxBarThickness: 26,
          barPercentage: 0.8,
          categoryPercentage: 0.9,
        },
      ],
    },
    options: {
      indexAxis: "y",
      animation: false,
      responsive: false,
      events: [],
      layout: { padding: { left: 8, right: 52, top: 4, bottom: 4 } },
      plugins: {
        legend: { display: false },
        tooltip: { enabled: false },
        title: {
          display: true,
          text: `${abundanceLabel(abundance).replace("Y_p", "Yₚ")}: theory error ${relative} %`,
          align: "start",
          color: PALETTE.ink,
          font: { family: FONT_FAMILY, size: SIZES.title, weight: "bold" },
          padding: { top: 6, bottom: 10 },
        },
        annotation: {
          clip: false,
          annotations: Object.fromEntries(bars.map(({ share }, i) => [`share-${i}`, valueLabel(i, share)])),
        },
      },
      scales: {
        x: {
          min: 0,
          max: 1,
          title: {
            display: true,
            text: bars.some(({ assumed }) => assumed)
              ? "share of the variance (pale: size of the error assumed)"
              : "share of the variance",
            color: MUTED.text,
            font: tickFont,
          },
          border: { color: MUTED.axis },
          grid: { color: MUTED.grid, tickColor: MUTED.axis },
          ticks: {
            color: MUTED.text,
            font: tickFont,
            stepSize: 0.2,
            callback: (x) => `${(100 * Number(x)).toFixed(0)} %`,
          },
        },
        y: {
          border: { color: MUTED.axis },
          grid: { display: false },
          ticks: { color: PALETTE.ink, font: tickFont, autoSkip: false },
        },
      },
    },
  };
}

/**
 * @param budget result of `budget`
 * @param note   one line at the foot: parameters and program
 * @param name   one chart alone; all of them without
 * @throws {RangeError} if an abundance is missing
 */
export function budgetFigure(budget: BudgetShares, note: string, name?: string): Figure<BarChart> {
  if (name !== undefined)
    return singleFigure(
      TITLE,
      note,
      name,
      () => sharesChart(budget, CHARTS[name as keyof typeof CHARTS]),
      PANEL.width,
      PANEL.height + NOTE_HEIGHT,
    );
  return {
    width: 2 * PANEL.width,
    height: 2 * PANEL.height + NOTE_HEIGHT,
    title: TITLE,
    note,
    panels: Object.entries(CHARTS).map(([panel, abundance], i) => ({
      name: panel,
      x: (i % 2) * PANEL.width,
      y: Math.floor(i / 2) * PANEL.height,
      width: PANEL.width,
      height: PANEL.height,
      chart: sharesChart(budget, abundance),
    })),
  };
}
