// The shared look: power labels, distances between labels, points that run to the edges.
import fc from "fast-check";
import { expect, test } from "vitest";
import { curveLabels } from "../../../src/charts/curve-labels.ts";
import { type Curve, PALETTE, pointsWithin, powerLabel, spreadApart } from "../../../src/charts/style.ts";

test("decades are written as powers of ten", () => {
  expect([1e-12, 0.1, 1, 10, 1000].map(powerLabel)).toEqual(["10⁻¹²", "10⁻¹", "1", "10", "10³"]);
});

test("labels keep their distance and their order, and stay where they are if they have it", () => {
  const gap = 0.05;
  fc.assert(
    fc.property(fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { minLength: 1, maxLength: 20 }), (wishes) => {
      const heights = spreadApart(wishes, gap);
      const order = wishes.map((_, i) => i).sort((a, b) => wishes[a] - wishes[b] || heights[a] - heights[b]);
      for (let k = 1; k < order.length; k++)
        expect(heights[order[k]] - heights[order[k - 1]]).toBeGreaterThanOrEqual(gap - 1e-9);
      const mean = (xs: number[]) => xs.reduce((sum, x) => sum + x, 0) / xs.length;
      expect(mean(heights)).toBeCloseTo(mean(wishes), 9);
      if (order.every((i, k) => k === 0 || wishes[i] - wishes[order[k - 1]] > gap))
        heights.forEach((height, i) => {
          expect(height).toBeCloseTo(wishes[i], 12);
        });
    }),
    { seed: 20260101 },
  );
});

test("two labels that wish the same height move apart evenly", () => {
  expect(spreadApart([0.5, 0.5], 0.1)).toEqual([0.45, 0.55]);
});

test("a curve keeps one point beyond each edge, rising or falling, and breaks at zero", () => {
  const range = { min: 2, max: 4 };
  expect(pointsWithin([0, 1, 3, 5, 6], [1, 2, 3, 4, 5], range).map((p) => p.x)).toEqual([1, 3, 5]);
  expect(pointsWithin([6, 5, 3, 1, 0], [1, 2, 3, 4, 5], range).map((p) => p.x)).toEqual([5, 3, 1]);
  expect(pointsWithin([2, 3], [0, null], range)).toEqual([
    { x: 2, y: null },
    { x: 3, y: null },
  ]);
});

test("a label stands at the end of its curve, at its peak, or near the foot of its fall", () => {
  const curve = (label: string, ys: (number | null)[]): Curve => ({
    label,
    color: PALETTE.ink,
    points: ys.map((y, i) => ({ x: 10 ** i, y })),
  });
  const labels = curveLabels(
    [
      curve("ends", [1e-3, 1e-2, 1e-1, 1e-1]),
      curve("peaks", [null, 1e-2, 1e-3, null]),
      curve("falls", [1, 0.1, 1e-3, null]),
      curve("below the floor", [1e-9, 1e-9, 1e-9, 1e-9]),
    ],
    { x: { min: 1, max: 1000 }, y: { min: 1e-4, max: 1 }, height: 400 },
  );
  expect(Object.keys(labels)).toHaveLength(3);
  expect(labels["label-ends"]).toMatchObject({ xValue: 1000, position: { x: "start" } });
  expect(labels["label-ends"].yValue).toBeCloseTo(0.1, 9);
  expect(labels["label-peaks"]).toMatchObject({ xValue: 10, yValue: 1e-2, position: { y: "end" } });
  expect(labels["label-falls"]).toMatchObject({ xValue: 100, yValue: 1e-3, position: { x: "start" } });
});
