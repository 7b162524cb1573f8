/** Chart of `rates compare`: how much each abundance changes by each evaluation, as bars. */
import type { AnnotationOptions } from "chartjs-plugin-annotation";
import { abundanceLabel } from "../nucleosynthesis/labels.ts";
import type { BarChart } from "./figure.ts";
import { roundStep, sameWidth } from "./scan-axes.ts";
import { FONT_FAMILY, linearAxis, MUTED, PALETTE, SIZES } from "./style.ts";

/** What the figure needs of a result of `rates compare`. */
export interface Comparison {
  readonly reaction: string;
  readonly reference: string;
  readonly evaluations: readonly { readonly evaluation: string; readonly uncertaintyBasis: string }[];
  readonly sensitivityT9?: readonly number[];
  readonly abundances?: Readonly<
    Record<string, { readonly density: readonly number[]; readonly range?: readonly [number, number] }>
  >;
  readonly swaps?: Readonly<Record<string, Readonly<Record<string, { readonly change: number }>>>>;
}

/** The abundances that are observed: the others are in the text. */
export const SHOWN = ["Yp", "dToH", "he3ToH", "li7ToH"];
/** One colour an evaluation, after the reference. */
export const COLORS = [PALETTE.vermilion, PALETTE.blue, PALETTE.green, PALETTE.purple, PALETTE.orange, PALETTE.sky];

/** @throws {RangeError} if there are no swaps */
export function abundancesChart({ swaps, reaction, reference, evaluations }: Comparison): BarChart {
  if (swaps === undefined) throw new RangeError(`${reaction}: no swaps`);
  const tickFont = { family: FONT_FAMILY, size: SIZES.text } as const;
  const others = evaluations.slice(1).map(({ evaluation }) => evaluation);
  const all = others.flatMap((name) => SHOWN.map((abundance) => 100 * swaps[name][abundance].change));
  const span = Math.max(...all, 0) - Math.min(...all, 0) || 1;
  const annotations = Object.fromEntries(
    others.flatMap((name, k) =>
      SHOWN.map((abundance, i): [string, AnnotationOptions<"label">] => {
        const value = 100 * swaps[name][abundance].change;
        const offset = (k + 0.5) / others.length - 0.5;
        return [
          `value-${k}-${i}`,
          {
            type: "label",
            xValue: i + 0.9 * offset,
            yValue: value,
            content: Math.abs(value) < 0.0095 ? "0" : value.toFixed(Math.abs(value) < 0.95 ? 2 : 1),
            color: COLORS[k % COLORS.length],
            font: { family: FONT_FAMILY, size: SIZES.label - 1 },
            yAdjust: value >= 0 ? -8 : 8,
            padding: 0,
          },
        ];
      }),
    ),
  );
  return {
    type: "bar",
    data: {
      labels: SHOWN.map((name) => abundanceLabel(name).replace("Y_p", "Yₚ")),
      datasets: others.map((name, k) => ({
        label: name,
        data: SHOWN.map((abundance) => 100 * swaps[name][abundance].change),
        backgroundColor: COLORS[k % COLORS.length],
        barPercentage: 0.85,
        categoryPercentage: 0.9,
      })),
    },
    options: {
      animation: false,
      responsive: false,
      events: [],
      layout: { padding: { left: 8, right: 16, top: 4, bottom: 4 } },
      plugins: {
        legend: {
          display: true,
          position: "right",
          labels: { color: PALETTE.ink, font: tickFont, boxWidth: 12 },
        },
        tooltip: { enabled: false },
        title: {
          display: true,
          text: `Change of each abundance if ${reference} is replaced`,
          align: "start",
          color: PALETTE.ink,
          font: { family: FONT_FAMILY, size: SIZES.title, weight: "bold" },
          padding: { top: 6, bottom: 12 },
        },
        annotation: { clip: false, annotations },
      },
      scales: {
        x: {
          border: { color: MUTED.axis },
          grid: { display: false },
          ticks: { color: PALETTE.ink, font: tickFont },
        },
        y: {
          ...linearAxis(
            "change [per cent]",
            { min: Math.min(...all, 0) - 0.15 * span, max: Math.max(...all, 0) + 0.15 * span },
            roundStep(1.3 * span, 5),
          ),
          afterFit: sameWidth,
        },
      },
    },
  };
}
