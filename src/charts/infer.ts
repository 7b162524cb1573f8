/** Figure of the command `infer`: likelihood of each element, contours of two parameters, marginal posteriors. */
import type { AnnotationOptions } from "chartjs-plugin-annotation";
import type { Contours, ElementCurves, Inference } from "../inference/infer.ts";
import { InputError } from "../numerics/check.ts";
import { type Figure, type LineChart, NOTE_HEIGHT, type Panel, singleFigure } from "./figure.ts";
import { LOOKS } from "./scan-look.ts";
import {
  type Curve,
  DASHES,
  FONT_FAMILY,
  linearAxis,
  linePanel,
  MUTED,
  PALETTE,
  type Range,
  SIZES,
  spreadApart,
} from "./style.ts";

/** What the figure needs of a result of `infer`. */
export type InferenceToDraw = Pick<Inference, "parameters" | "comparisons" | "elements"> & {
  readonly posterior: Pick<Inference["posterior"], "marginals" | "contours">;
};

/** Names for `--chart NAME=FILE`. */
export const INFER_CHARTS = ["elements", "contours", "posterior"] as const;

const TITLE = "Cosmology from observed abundances";
/** One chart of the sheet [px]. */
const PANEL = { width: 620, height: 470 } as const;
/** Width of the axes of a chart, for the distance of labels [px]. */
const AXES_WIDTH = 520;

const AXIS_TITLES: Readonly<Record<string, string>> = {
  omegaB: "ω_b = Ω_b h²",
  eta10: "η₁₀ = 10¹⁰ n_b/n_γ",
  nEff: "N_eff",
  tauN: "τₙ [s]",
  xiE: "ξₑ",
};

/** A round step that makes about five ticks. */
function roundStep({ min, max }: Range): number {
  const rough = (max - min) / 5;
  const power = 10 ** Math.floor(Math.log10(rough));
  return power * ([1, 2, 5, 10].find((f) => f * power >= rough) as number);
}

function nameAt(x: number, y: number, text: string, color: string): AnnotationOptions<"label"> {
  return {
    type: "label",
    xValue: x,
    yValue: y,
    content: text,
    color,
    font: { family: FONT_FAMILY, size: SIZES.label, weight: "bold" },
    position: { x: "center", y: "end" },
    padding: 1,
  };
}

/** An upright band of the inferred interval, with its line. */
function interval(lower: number, upper: number, best: number): Record<string, AnnotationOptions> {
  return {
    band: {
      type: "box",
      xMin: lower,
      xMax: upper,
      backgroundColor: MUTED.grid,
      borderWidth: 0,
      drawTime: "beforeDatasetsDraw",
    },
    best: {
      type: "line",
      scaleID: "x",
      value: best,
      borderColor: MUTED.axis,
      borderWidth: 1,
      borderDash: [...DASHES.dotted],
      drawTime: "beforeDatasetsDraw",
    },
  };
}

/** The chart with every point drawn: those of one column of pixels are merged in lines without tension. */
function everyPoint(chart: LineChart): LineChart {
  return { ...chart, data: { datasets: chart.data.datasets.map((set) => ({ ...set, tension: 1e-9 })) } };
}

/** Highest eta10 shown: beyond it no element has a likelihood worth showing. */
const TOP_ETA = 12;

function elementsChart(result: InferenceToDraw): LineChart {
  const { eta10, likelihood } = result.elements as ElementCurves;
  const x = { min: eta10[0], max: Math.min(TOP_ETA, eta10[eta10.length - 1]) };
  const shown = Object.keys(likelihood).filter((name) => LOOKS[name] !== undefined);
  const peaks = shown.map((name) => {
    const inside = likelihood[name].map((value, i) => (eta10[i] <= x.max ? value : 0));
    const top = Math.max(...inside);
    // The middle of a plateau, as an upper limit has it.
    const high = eta10.filter((_, i) => inside[i] > 0.999 * top);
    return (high[0] + high[high.length - 1]) / 2;
  });
  const gap = ((x.max - x.min) * 46) / AXES_WIDTH;
  const places = spreadApart(peaks, gap).map((place) => Math.min(x.max - gap / 2, Math.max(x.min + gap / 2, place)));
  const curves = shown.map(
    (name): Curve => ({
      label: "",
      color: LOOKS[name].color,
      dash: result.comparisons.some((c) => c.abundance === name && c.fitted) ? DASHES.solid : DASHES.dashed,
      points: eta10.flatMap((eta, i) => (eta <= x.max ? [{ x: eta, y: likelihood[name][i] }] : [])),
    }),
  );
  const { eta10: inferred } = result.parameters;
  const chart = linePanel(
    "Likelihood of each element (dashed: not fitted)",
    curves,
    { x: linearAxis(AXIS_TITLES.eta10, x, 1), y: linearAxis("likelihood / its highest", { min: 0, max: 1.12 }, 0.2) },
    {
      ...interval(inferred.lower68, inferred.upper68, inferred.best),
      ...Object.fromEntries(
        shown.map((name, i) => [`name-${name}`, nameAt(places[i], 1.02, LOOKS[name].label, LOOKS[name].color)]),
      ),
    },
  );
  return everyPoint(chart);
}

function contoursChart(result: InferenceToDraw): LineChart {
  const { x: keyX, y: keyY, level68, level95 } = result.posterior.contours as Contours;
  const curves = [
    ...level95.map((line) => ({ line, dash: DASHES.dashed, width: 1.6 })),
    ...level68.map((line) => ({ line, dash: DASHES.solid, width: 2.4 })),
  ].map(
    ({ line, dash, width }): Curve => ({
      label: "",
      color: PALETTE.blue,
      dash,
      width,
      points: line.map(([x, y]) => ({ x, y })),
    }),
  );
  const around = (key: string, values: readonly number[]): Range => {
    const [low, high] = [Math.min(...values), Math.max(...values)];
    const step = roundStep({ min: low, max: high });
    return key === "" ? { min: low, max: high } : { min: low - step / 2, max: high + step / 2 };
  };
  const all = level95.flat();
  const xRange = around(
    keyX,
    all.map(([x]) => x),
  );
  const yRange = around(
    keyY,
    all.map(([, y]) => y),
  );
  const { best: bestX } = result.parameters[keyX];
  const { best: bestY } = result.parameters[keyY];
  const chart = linePanel(
    "Regions of highest posterior (68 and 95 %)",
    curves,
    {
      x: linearAxis(AXIS_TITLES[keyX], xRange, roundStep(xRange)),
      y: linearAxis(AXIS_TITLES[keyY], yRange, roundStep(yRange)),
    },
    {
      best: {
        type: "point",
        xValue: bestX,
        yValue: bestY,
        radius: 4,
        backgroundColor: PALETTE.vermilion,
        borderColor: MUTED.paper,
        borderWidth: 1,
      },
      ...(keyY === "nEff" && yRange.min < 3.044 && yRange.max > 3.044
        ? {
            standard: {
              type: "line" as const,
              scaleID: "y",
              value: 3.044,
              borderColor: MUTED.axis,
              borderWidth: 1,
              borderDash: [...DASHES.dotted],
              drawTime: "beforeDatasetsDraw" as const,
              label: {
                display: true,
                content: "standard, 3.044",
                position: "end" as const,
                yAdjust: -9,
                color: MUTED.text,
                backgroundColor: "transparent",
                font: { family: FONT_FAMILY, size: SIZES.label - 1, weight: "normal" as const },
                padding: 2,
              },
            },
          }
        : {}),
    },
  );
  // Closed lines run back and forth in x: the chart must not take the points for sorted.
  return everyPoint({
    ...chart,
    options: { ...chart.options, parsing: { xAxisKey: "x", yAxisKey: "y" }, normalized: false },
  });
}

function posteriorChart(result: InferenceToDraw, key: string): LineChart {
  const { x: xs, density } = result.posterior.marginals[key];
  const top = Math.max(...density);
  const { lower68, upper68, best } = result.parameters[key];
  const seen = xs.filter((_, i) => density[i] > 1e-4 * top);
  const x = { min: seen[0], max: seen[seen.length - 1] };
  return linePanel(
    `Posterior of ${AXIS_TITLES[key].split(" ")[0]} (band: central 68 %)`,
    [
      {
        label: "",
        color: PALETTE.blue,
        points: xs.flatMap((value, i) => (value >= x.min && value <= x.max ? [{ x: value, y: density[i] / top }] : [])),
      },
    ],
    {
      x: linearAxis(AXIS_TITLES[key], x, roundStep(x)),
      y: linearAxis("density / its highest", { min: 0, max: 1.05 }, 0.2),
    },
    interval(lower68, upper68, best),
  );
}

/** The charts there are for a result: name and drawing. */
function chartsOf(result: InferenceToDraw): { name: (typeof INFER_CHARTS)[number]; chart: () => LineChart }[] {
  return [
    ...(result.elements ? [{ name: "elements" as const, chart: () => elementsChart(result) }] : []),
    ...(result.posterior.contours ? [{ name: "contours" as const, chart: () => contoursChart(result) }] : []),
    ...Object.keys(result.posterior.marginals).map((key) => ({
      name: "posterior" as const,
      chart: () => posteriorChart(result, key),
    })),
  ];
}

/**
 * @param result of `infer`
 * @param note   one line at the foot: parameters and program
 * @param name   one chart alone (`posterior`: that of every free parameter); all of them without
 * @throws {InputError} for a chart that this result does not have
 */
export function inferFigure(result: InferenceToDraw, note: string, name?: string): Figure {
  const charts = chartsOf(result).filter((each) => name === undefined || each.name === name);
  if (charts.length === 0)
    throw new InputError(
      "choice",
      `chart ${name}: not of this result; ${name === "contours" ? "contours need two free parameters (--free omegaB,nEff)" : "it needs omegaB to be free"}`,
    );
  if (charts.length === 1) return singleFigure(TITLE, note, charts[0].name, charts[0].chart, PANEL.width, PANEL.height);
  const rows = Math.ceil(charts.length / 2);
  const panels = charts.map(
    ({ name: panel, chart }, i): Panel => ({
      name: `${panel}-${i}`,
      x: (i % 2) * PANEL.width,
      y: Math.floor(i / 2) * PANEL.height,
      width: PANEL.width,
      height: PANEL.height,
      chart: chart(),
    }),
  );
  return { width: 2 * PANEL.width, height: rows * PANEL.height + NOTE_HEIGHT, title: TITLE, note, panels };
}
