/** Axes of the abundance diagram: small, with labels that do not meet where panels touch. */
import { FONT_FAMILY, MUTED, powerLabel, type Range } from "./style.ts";

interface Axis {
  ticks: { value: number }[];
}

function look(title: string, size: number) {
  const font = { family: FONT_FAMILY, size };
  return {
    title: { display: true, text: title, color: MUTED.text, font, padding: 2 },
    border: { color: MUTED.axis, width: 1 },
    grid: { color: MUTED.grid, tickColor: MUTED.axis, tickLength: 4, lineWidth: 0.8 },
    ticks: { color: MUTED.text, font, maxRotation: 0, autoSkip: false, padding: 2 },
  };
}

/** Width of the upright axes [px]: room for a title and `2·10⁻¹⁰`. */
const WIDTH = 66;

/** Gives stacked axes one width. */
export function sameWidth(axis: { width: number }): void {
  axis.width = WIDTH;
}

/** A step of 1, 2 or 5 times a power of ten that cuts a range into about `parts`. */
export function roundStep(span: number, parts: number): number {
  const power = 10 ** Math.floor(Math.log10(span / parts));
  const rest = span / parts / power;
  return power * (rest < 1.5 ? 1 : rest < 3.5 ? 2 : rest < 7.5 ? 5 : 10);
}

/** Linear axis whose labels keep off its ends. */
export function compactLinearAxis(title: string, range: Range, size: number) {
  const span = range.max - range.min;
  const step = roundStep(span, 4);
  const first = Math.ceil((range.min + 0.04 * span) / step);
  const last = Math.floor((range.max - 0.04 * span) / step);
  const decimals = Math.max(0, -Math.floor(Math.log10(step) + 1e-9));
  const base = look(title, size);
  return {
    type: "linear" as const,
    min: range.min,
    max: range.max,
    ...base,
    afterBuildTicks: (axis: Axis) => {
      axis.ticks = Array.from({ length: Math.max(0, last - first + 1) }, (_, i) => ({ value: (first + i) * step }));
    },
    ticks: { ...base.ticks, callback: (value: number | string) => Number(value).toFixed(decimals) },
  };
}

/** Logarithmic axis that labels decades; where there is less than one inside, 1-2-5 steps. */
export function compactLogAxis(title: string, range: Range, size: number) {
  const base = look(title, size);
  return {
    type: "logarithmic" as const,
    min: range.min,
    max: range.max,
    ...base,
    afterBuildTicks: decadeTicks(range),
    ticks: { ...base.ticks, callback: (value: number | string) => tickLabel(Number(value)) },
  };
}

function decadeTicks(range: Range): (axis: Axis) => void {
  const low = Math.ceil(Math.log10(range.min) + 0.02);
  const high = Math.floor(Math.log10(range.max) - 0.02);
  if (high - low < 1) return factorTicks(range);
  return (axis) => {
    axis.ticks = Array.from({ length: high - low + 1 }, (_, i) => ({ value: 10 ** (low + i) }));
  };
}

/** Ticks at 1, 2, 5 times powers of ten; at powers alone over more than three decades. */
export function factorTicks(range: Range): (axis: Axis) => void {
  const factors = range.max / range.min > 1000 ? [1] : [1, 2, 5];
  const values: number[] = [];
  for (let power = Math.floor(Math.log10(range.min)); 10 ** power <= range.max; power++)
    for (const factor of factors) {
      const value = Number(`${factor}e${power}`);
      if (value >= range.min * (1 - 1e-9) && value <= range.max * (1 + 1e-9)) values.push(value);
    }
  return (axis) => {
    axis.ticks = values.map((value) => ({ value }));
  };
}

/** 0.02, 5, 10, 100 in full; 10⁻⁵ for powers; 2·10⁻⁵ between. */
function tickLabel(value: number): string {
  if (value >= 0.001 && value < 10000) return String(Number(value.toPrecision(3)));
  const power = Math.floor(Math.log10(value) + 1e-9);
  const factor = Number((value / 10 ** power).toPrecision(3));
  return factor === 1 ? powerLabel(value) : `${factor}·${powerLabel(10 ** power)}`;
}
