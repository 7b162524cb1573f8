/** Axes -> numbered points: the order of the rows, the keys of each point, and the parts of a shared calculation. */
import { InputError } from "../numerics/check.ts";
import type { Keys } from "../parameters/cosmology.ts";
import { type Axis, parseAxis } from "./axis.ts";

/** The points of a scan or grid. The first axis varies slowest, so rows are ordered as the axes were given. */
export interface Plan {
  readonly axes: readonly Axis[];
  /** Number of points. */
  readonly count: number;
  /** Values of the axes at point `i`, 0 <= i < count. */
  coordinates(i: number): number[];
  /** Keys that make point `i` out of the base keys. */
  overrides(i: number): Keys;
}

/** Most cells a table may hold: about 60 bytes each while it is computed and written, 600 MB in all. */
export const MOST_CELLS = 1e7;
const BYTES_PER_CELL = 60;

/** Keys that set the same thing: one of them is a parameter or an axis, never both. */
const SAME: readonly (readonly (keyof Keys)[])[] = [
  ["omegaB", "eta10"],
  ["nEff", "deltaNEff"],
  ["tauReion", "zReion"],
];
/** Keys that the thermal history depends on: a new value costs a new history and new weak rates. */
const SLOW: readonly string[] = ["nEff", "deltaNEff", "xiE", "xiMu", "xiTau"];
/** Keys that nucleosynthesis does not depend on. */
const WITHOUT_EFFECT: readonly string[] = ["omegaC", "h0", "sumMnu", "ypMass", "alphaFactor", "tauReion", "zReion"];

/**
 * Parses axes and lays out their points.
 * @param texts      axes as given
 * @param base       the other keys of the request
 * @param reactionId id of a reaction given in any notation
 * @throws {InputError} for a malformed axis, two that set the same thing, or one that is also given as a key
 */
export function planSweep(texts: readonly string[], base: Keys, reactionId: (name: string) => string): Plan {
  const axes = texts.map((text) => parseAxis(text, reactionId));
  const taken = new Map<string, string>();
  for (const key of Object.keys(base).filter((name) => base[name as keyof Keys] !== undefined))
    for (const name of equivalents(key)) taken.set(name, `${key} is also given as a parameter`);
  for (const name of Object.keys(base.scales ?? {}))
    taken.set(`scale:${name === "n_p" ? name : reactionId(name)}`, `${name} is also scaled as a parameter`);
  for (const { key } of axes) {
    const other = taken.get(key);
    if (other !== undefined) throw new InputError("conflict", `over ${key}: ${other}; keep one of them`);
    for (const name of equivalents(key)) taken.set(name, `${key} is already an axis`);
  }
  const count = axes.reduce((product, axis) => product * axis.values.length, 1);
  const strides = axes.map((_, a) => axes.slice(a + 1).reduce((product, axis) => product * axis.values.length, 1));
  const coordinates = (i: number) =>
    axes.map((axis, a) => axis.values[Math.floor(i / strides[a]) % axis.values.length]);
  return {
    axes,
    count,
    coordinates,
    overrides: (i) => keysAt(axes, coordinates(i), base),
  };
}

/** Keys with the axes at the given values. */
export function keysAt(axes: readonly Axis[], values: readonly number[], base: Keys): Keys {
  const keys: Record<string, unknown> = {};
  const scales: Record<string, number> = { ...base.scales };
  axes.forEach((axis, a) => {
    if (axis.reaction !== undefined) scales[axis.reaction] = values[a];
    else keys[axis.key] = values[a];
  });
  if (axes.some((axis) => axis.reaction !== undefined)) keys.scales = scales;
  return keys as Keys;
}

function equivalents(key: string): readonly string[] {
  return SAME.find((pair) => (pair as readonly string[]).includes(key)) ?? [key];
}

/**
 * Says before anything is computed that a table would not fit into memory.
 * @param points  rows
 * @param columns cells a row
 * @throws {InputError} with the number of points that fit
 */
export function requireFits(command: string, points: number, columns: number): void {
  if (points * columns <= MOST_CELLS) return;
  const gigabytes = (points * columns * BYTES_PER_CELL) / 1e9;
  const most = Math.floor(MOST_CELLS / columns);
  throw new InputError(
    "too-many-points",
    `${command}: ${points} points need about ${gigabytes.toPrecision(2)} GB; at most ${most} fit: use fewer values` +
      `${command === "grid" ? ", or compute parts with --part K/N" : ""}`,
  );
}

/** The values of the axes that cost a new thermal history, as a word: points that share it are best computed together. */
export function affinity(plan: Plan, i: number): string {
  const values = plan.coordinates(i);
  return plan.axes.flatMap((axis, a) => (SLOW.includes(axis.key) ? [`${values[a]}`] : [])).join(" ");
}

/** Numbers of the points in the order in which computing them is cheapest: those of one thermal history together. */
export function computingOrder(plan: Plan, first: number, end: number): number[] {
  const groups = new Map<string, number[]>();
  for (let i = first; i < end; i++) {
    const name = affinity(plan, i);
    const group = groups.get(name);
    if (group === undefined) groups.set(name, [i]);
    else group.push(i);
  }
  return [...groups.values()].flat();
}

/** How a point is named in messages. */
export function placeOf(plan: Plan, i: number): string {
  const values = plan.coordinates(i);
  return plan.axes.map((axis, a) => `${axis.key} = ${values[a]}`).join(", ");
}

/** Warnings about axes along which nothing can change. */
export function axisWarnings(plan: Plan): string[] {
  return plan.axes
    .filter((axis) => WITHOUT_EFFECT.includes(axis.key))
    .map((axis) => `over ${axis.key}: nucleosynthesis does not depend on it; the abundances are the same throughout`);
}

/** Part K of N, written `K/N`. */
export interface Part {
  readonly k: number;
  readonly n: number;
}

/** @throws {InputError} unless 1 <= K <= N, whole numbers */
export function parsePart(text: string): Part {
  const found = /^\s*(\d+)\s*\/\s*(\d+)\s*$/.exec(text);
  const k = Number(found?.[1]);
  const n = Number(found?.[2]);
  if (!(k >= 1 && k <= n && n <= 1e6))
    throw new InputError("part", `part ${text}: write K/N with 1 <= K <= N, e.g. 3/8 for the third of eight`);
  return { k, n };
}

/**
 * The points of a part: contiguous, all parts together every point once.
 * @throws {InputError} if there are more parts than points
 */
export function partRange(count: number, { k, n }: Part): { first: number; end: number } {
  if (n > count)
    throw new InputError("part", `part ${k}/${n}: there are only ${count} points; use at most ${count} parts`);
  return { first: Math.floor(((k - 1) * count) / n), end: Math.floor((k * count) / n) };
}
