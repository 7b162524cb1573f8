/** Labels at the curves themselves, so that no legend has to be looked up. */
import type { AnnotationOptions } from "chartjs-plugin-annotation";
import { type Curve, FONT_FAMILY, MUTED, type Point, type Range, SIZES, spreadApart } from "./style.ts";

/** Height at which a curve that falls from the start is labelled, as a share of its own. */
const LOW = 0.22;

/** Where labels stand: axis ranges, and whether the x axis runs from large to small. */
export interface LabelFrame {
  readonly x: Range;
  readonly y: Range;
  readonly reverse?: boolean;
  readonly axis?: string;
  /** Height of the axes [px]. */
  readonly height: number;
}

/** Height of a curve where it crosses x, straight in the logarithms; undefined where it does not reach or has a gap. */
function heightAt(points: readonly Point[], x: number): number | undefined {
  for (let i = 0; i < points.length; i++) {
    const [p, q] = [points[i], points[Math.min(i + 1, points.length - 1)]];
    if ((p.x - x) * (q.x - x) > 0 || p.y === null || q.y === null) continue;
    if (p.x === x) return p.y;
    if (q.x === x) return q.y;
    const share = Math.log(x / p.x) / Math.log(q.x / p.x);
    return p.y * (q.y / p.y) ** share;
  }
  return undefined;
}

/**
 * Labels in the colour of their curves: right of the axes where a curve reaches the end, else above its highest point,
 * or near its foot if it falls from the start.
 */
export function curveLabels(curves: readonly Curve[], frame: LabelFrame): Record<string, AnnotationOptions<"label">> {
  const [start, end] = frame.reverse === true ? [frame.x.max, frame.x.min] : [frame.x.min, frame.x.max];
  const axis = frame.axis ?? "y";
  const logHeight = Math.log(frame.y.max / frame.y.min);
  const fraction = (y: number) => Math.log(y / frame.y.min) / logHeight;
  const visible = curves.map((curve) => ({
    curve,
    points: curve.points.filter(
      (p): p is { x: number; y: number } =>
        p.y !== null && p.y >= frame.y.min && p.x >= frame.x.min && p.x <= frame.x.max,
    ),
  }));
  const drawn = visible.filter(({ points }) => points.length > 0);
  const ending = drawn.flatMap(({ curve }) => {
    const y = heightAt(curve.points, end);
    return y !== undefined && y >= frame.y.min ? [{ curve, y: Math.min(y, frame.y.max) }] : [];
  });
  const inner = drawn.filter(({ curve }) => !ending.some((item) => item.curve === curve));
  const heights = spreadApart(
    ending.map(({ y }) => fraction(y)),
    (SIZES.label + 3) / frame.height,
  );
  const labels: Record<string, AnnotationOptions<"label">> = {};
  ending.forEach(({ curve }, i) => {
    labels[`label-${curve.label}`] = {
      ...textAt(end, frame.y.min * Math.exp(heights[i] * logHeight), curve.label, curve.color, axis),
      position: { x: "start", y: "center" },
      xAdjust: 7,
    };
  });
  const isStart = (x: number) => Math.abs(Math.log(x / start)) < 0.04 * Math.log(frame.x.max / frame.x.min);
  for (const { curve, points } of inner) {
    const top = points.reduce((best, p) => (p.y > best.y ? p : best));
    const falls = isStart(top.x);
    const low = frame.y.min * Math.exp(LOW * fraction(Math.min(top.y, frame.y.max)) * logHeight);
    const { x, y } = falls ? points.findLast((p) => p.y >= low)! : top;
    labels[`label-${curve.label}`] = {
      ...textAt(x, y, curve.label, curve.color, axis),
      position: falls ? { x: "start", y: "center" } : { x: "center", y: "end" },
      ...(falls ? { xAdjust: 7 } : { yAdjust: -4 }),
    };
  }
  return labels;
}

/** Text at a point of the axes. */
export function textAt(x: number, y: number, text: string, color: string, axis: string): AnnotationOptions<"label"> {
  return {
    type: "label",
    xValue: x,
    yValue: y,
    yScaleID: axis,
    content: text,
    color,
    font: { family: FONT_FAMILY, size: SIZES.label, weight: "bold" },
    padding: 0,
    textStrokeColor: MUTED.paper,
    textStrokeWidth: 3,
  };
}
