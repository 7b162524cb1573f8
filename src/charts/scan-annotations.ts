/** What stands in the abundance diagram beside its curves: frames, observed ranges, the CMB's density, names. */
import type { AnnotationOptions } from "chartjs-plugin-annotation";
import type { BandedCurve } from "./scan-curves.ts";
import { LOOKS, type ObservedRange, RAMP, type ScanMarks, TEXT } from "./scan-look.ts";
import { DASHES, FONT_FAMILY, MUTED, type Range, spreadApart } from "./style.ts";

/** One panel: its axes and how they map. */
export interface View {
  readonly axis: string;
  readonly range: Range;
  readonly x: Range;
  /** Whether y and x are logarithmic. */
  readonly log: boolean;
  readonly logX: boolean;
  /** Height of the axes [px]. */
  readonly height: number;
}

/** Height of a value in a panel, 0 at its foot, 1 at its top. */
function share(y: number, { log, range }: View): number {
  return log ? Math.log(y / range.min) / Math.log(range.max / range.min) : (y - range.min) / (range.max - range.min);
}

function heightAt(s: number, { log, range }: View): number {
  return log ? range.min * (range.max / range.min) ** s : range.min + s * (range.max - range.min);
}

/** The edge of a panel. */
export function frame({ axis, range }: View): Record<string, AnnotationOptions> {
  return {
    [`frame-${axis}`]: {
      type: "box",
      xScaleID: "x",
      yScaleID: axis,
      yMin: range.min,
      yMax: range.max,
      backgroundColor: "transparent",
      borderColor: MUTED.axis,
      borderWidth: 0.8,
      drawTime: "beforeDatasetsDraw",
    },
  };
}

/** Observed ranges: boxes of one standard deviation to either side, a dotted line for an upper limit, each with its source. */
export function observedBoxes(
  observed: readonly ObservedRange[],
  view: View,
  curves: readonly BandedCurve[],
): Record<string, AnnotationOptions> {
  const boxes: Record<string, AnnotationOptions> = {};
  for (const { abundance, value, sigma, kind, source } of observed) {
    const color = LOOKS[abundance].color;
    const limit = kind === "upper-limit";
    const top = value + sigma;
    boxes[`observed-${abundance}`] = {
      ...(limit
        ? { type: "line", yMin: top, yMax: top, borderDash: [...DASHES.dotted], borderColor: color, borderWidth: 1.2 }
        : {
            type: "box",
            yMin: value - sigma,
            yMax: top,
            backgroundColor: `${color}2e`,
            borderColor: `${color}99`,
            borderWidth: 0.7,
          }),
      yScaleID: view.axis,
      drawTime: "beforeDatasetsDraw",
    };
    const others = observed.filter((o) => o.abundance !== abundance).map((o) => o.value + o.sigma);
    const place = freePlace(curves, [value - sigma, top], others, view);
    boxes[`source-${abundance}`] = {
      type: "label",
      xValue: place.x,
      yValue: place.above ? top : limit ? top : value - sigma,
      yScaleID: view.axis,
      content: `${limit ? "upper limit" : "observed"}: ${source}`,
      color,
      font: { family: FONT_FAMILY, size: TEXT.small },
      position: { x: "start", y: place.above ? "end" : "start" },
      xAdjust: 4,
      padding: 1,
      textStrokeColor: MUTED.paper,
      textStrokeWidth: 2,
    };
  }
  return boxes;
}

/** Share of the width that a source's name takes, and in how many steps it is tried along the axis. */
const NAME = { width: 0.47, steps: 6 } as const;

/** The place above or below a box where a name is farthest from curves and from other ranges; the left end first. */
function freePlace(
  curves: readonly BandedCurve[],
  [low, high]: readonly [number, number],
  others: readonly number[],
  view: View,
): { x: number; above: boolean } {
  const { x, logX, height } = view;
  const across = (at: number) =>
    logX ? Math.log(at / x.min) / Math.log(x.max / x.min) : (at - x.min) / (x.max - x.min);
  const offset = TEXT.small / height;
  let best = { x: x.min, above: true, free: -1 };
  for (const above of [true, false])
    for (let step = 0; step <= NAME.steps; step++) {
      const start = (step * (1 - NAME.width - 0.02)) / NAME.steps;
      const middle = above ? share(high, view) + 0.7 * offset : share(low, view) - 0.7 * offset;
      const distances = [
        ...others.map((y) => Math.abs(share(y, view) - middle)),
        ...curves.flatMap((curve) =>
          curve.value.flatMap((y, i) => {
            const u = across(curve.x[i]);
            return y > 0 && u > start - 0.03 && u < start + NAME.width + 0.03
              ? [Math.abs(share(y, view) - middle)]
              : [];
          }),
        ),
      ];
      // Beyond two letters' height nothing is gained; then the first place is the best.
      const free = middle > 0.06 && middle < 0.96 ? Math.min(2 * offset, ...distances) : 0;
      if (free > best.free + 1e-9)
        best = { x: logX ? x.min * (x.max / x.min) ** start : x.min + start * (x.max - x.min), above, free };
    }
  return best;
}

/** The baryon density of the CMB: an upright band of two standard deviations to either side, named in the panel where most is free. */
export function densityBand(
  key: string,
  marks: ScanMarks,
  view: View,
  named: boolean,
): Record<string, AnnotationOptions> {
  const { density, eta10PerOmegaB } = marks;
  if (density === undefined || (key !== "eta10" && key !== "omegaB")) return {};
  const factor = key === "eta10" ? eta10PerOmegaB : 1;
  const at = (sigmas: number) => (density.omegaB + sigmas * density.sigma) * factor;
  if (at(2) < view.x.min || at(-2) > view.x.max) return {};
  const band: AnnotationOptions = {
    type: "box",
    xScaleID: "x",
    xMin: at(-2),
    xMax: at(2),
    yScaleID: view.axis,
    yMin: view.range.min,
    yMax: view.range.max,
    backgroundColor: "#5a647255",
    borderWidth: 0,
    drawTime: "beforeDatasetsDraw",
  };
  if (!named) return { [`density-${view.axis}`]: band };
  const { min, max } = view.x;
  const room = 0.37;
  const left = at(0) > (view.logX ? min * (max / min) ** room : min + room * (max - min));
  const label: AnnotationOptions = {
    type: "label",
    xValue: at(left ? -2 : 2),
    yValue: heightAt(0.03, view),
    yScaleID: view.axis,
    content: `CMB: ${density.source}`,
    color: MUTED.text,
    font: { family: FONT_FAMILY, size: TEXT.small },
    position: { x: left ? "end" : "start", y: "end" },
    xAdjust: left ? -3 : 3,
    padding: 0,
  };
  return { [`density-${view.axis}`]: band, "density-name": label };
}

/** Names of the curves right of the axes, moved apart where they would touch, or where a curve leaves its panel. */
export function labels(
  families: readonly { readonly abundance: string; readonly curves: readonly BandedCurve[] }[],
  view: View,
): Record<string, AnnotationOptions> {
  const items = families
    .flatMap(({ abundance, curves }) =>
      curves.map((curve, i) => {
        const last = curve.value.findLastIndex((y) => y >= view.range.min);
        return {
          text: curve.at === undefined ? LOOKS[abundance].label : String(Number(curve.at.toPrecision(4))),
          color: curves.length === 1 ? LOOKS[abundance].color : RAMP[i],
          x: curve.x[Math.max(last, 0)],
          wish: Math.min(1, Math.max(0, share(Math.max(curve.value[Math.max(last, 0)], view.range.min), view))),
          shown: curve.at === undefined || abundance === families[0].abundance,
        };
      }),
    )
    .filter((item) => item.shown);
  const ending = items.filter((item) => item.x === view.x.max);
  const heights = spreadApart(
    ending.map((item) => item.wish),
    (TEXT.label + 1) / view.height,
  );
  return Object.fromEntries(
    items.map((item, i) => {
      const inside = item.x !== view.x.max;
      const height = inside ? Math.max(item.wish, 0.06) : heights[ending.indexOf(item)];
      return [
        `label-${view.axis}-${i}`,
        {
          type: "label",
          xValue: item.x,
          yValue: heightAt(height, view),
          yScaleID: view.axis,
          content: item.text,
          color: item.color,
          font: { family: FONT_FAMILY, size: TEXT.label, weight: "bold" },
          position: { x: "start", y: "center" },
          xAdjust: 5,
          padding: 0,
        } satisfies AnnotationOptions,
      ];
    }),
  );
}
