// The figure of an inference: likelihoods, closed contours, marginals; what a result does not have is refused.
import { expect, test } from "vitest";
import { type InferenceToDraw, inferFigure } from "../../../src/charts/infer.ts";
import { InputError } from "../../../src/numerics/check.ts";

const estimate = (best: number, sigma: number) => ({
  best,
  mean: best,
  sigma,
  lower68: best - sigma,
  upper68: best + sigma,
  lower95: best - 2 * sigma,
  upper95: best + 2 * sigma,
});
const comparison = (abundance: "dToH" | "li7ToH", fitted: boolean) => ({
  abundance,
  fitted,
  value: 1,
  sigma: 1,
  kind: "measurement" as const,
  source: "given",
  basis: "given",
  predicted: 1,
  theorySigma: 1,
  posteriorSigma: 1,
  tension: 0,
});
const circle = Array.from({ length: 41 }, (_, i) => {
  const angle = (2 * Math.PI * i) / 40;
  return [0.022 + 0.001 * Math.cos(angle), 3 + 0.3 * Math.sin(angle)] as const;
});
const eta10 = [2, 3, 4, 5, 6, 7, 8, 9, 10, 14];
const marginal = { x: [0.021, 0.022, 0.023], density: [0, 1000, 0] };
const result: InferenceToDraw = {
  parameters: { omegaB: estimate(0.022, 0.0004), eta10: estimate(6.02, 0.1), nEff: estimate(3, 0.2) },
  comparisons: [comparison("dToH", true), comparison("li7ToH", false)],
  elements: {
    eta10,
    likelihood: { dToH: eta10.map((e) => (e === 6 ? 1 : 0)), li7ToH: eta10.map((e) => (e === 3 ? 1 : 0)) },
  },
  posterior: {
    marginals: { omegaB: marginal, nEff: { x: [2, 3, 4], density: [0, 1, 0] } },
    contours: { x: "omegaB", y: "nEff", level68: [circle], level95: [circle, circle] },
  },
};

test("the sheet holds likelihoods, contours and a marginal of each parameter, within its size", () => {
  const figure = inferFigure(result, "note");
  expect(figure.panels.map(({ name }) => name.replace(/-\d$/, ""))).toEqual([
    "elements",
    "contours",
    "posterior",
    "posterior",
  ]);
  for (const { x, y, width, height } of figure.panels) {
    expect(x + width).toBeLessThanOrEqual(figure.width);
    expect(y + height).toBeLessThanOrEqual(figure.height);
  }
});

test("an element that is fitted is drawn solid, one that is not dashed; nothing beyond the axis", () => {
  const { data, options } = inferFigure(result, "note", "elements").panels[0].chart;
  expect(data.datasets.map((set) => (set.borderDash as number[]).length > 0)).toEqual([false, true]);
  const top = (options!.scales!.x as { max: number }).max;
  for (const set of data.datasets) for (const { x } of set.data) expect(x).toBeLessThanOrEqual(top);
});

test("contours are closed, drawn point by point, and their axes hold them", () => {
  const { data, options } = inferFigure(result, "note", "contours").panels[0].chart;
  expect(data.datasets).toHaveLength(3);
  const [xs, ys] = [options?.scales?.x, options?.scales?.y] as { min: number; max: number }[];
  for (const { data: points, tension } of data.datasets) {
    expect(points[0]).toEqual(points.at(-1));
    expect(tension).toBeGreaterThan(0);
    for (const { x, y } of points) {
      expect(x).toBeGreaterThan(xs.min);
      expect(x).toBeLessThan(xs.max);
      expect(y).toBeGreaterThan(ys.min);
      expect(y).toBeLessThan(ys.max);
    }
  }
  expect(options?.parsing).not.toBe(false);
});

test("what a result does not have is refused, with what would give it", () => {
  const { contours: _, ...posterior } = result.posterior;
  expect(() => inferFigure({ ...result, posterior }, "note", "contours")).toThrow(InputError);
  expect(() => inferFigure({ ...result, posterior }, "note", "contours")).toThrow(/--free omegaB,nEff/);
});
