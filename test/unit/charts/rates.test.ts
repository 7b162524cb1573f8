// Figures of the rates commands: panels, curves, labels, and the ranges of their axes.
import { expect, test } from "vitest";
import { COMPARE_CHARTS, compareFigure } from "../../../src/charts/rates-compare.ts";
import { RATE_CHARTS, rateFigure } from "../../../src/charts/rates-show.ts";

const T9 = [0.01, 0.1, 1, 10];
const evaluation = (name: string, uncertaintyBasis = "published") => ({ evaluation: name, uncertaintyBasis });
const density = [0, 0.1, -0.4, 0];
const comparison = {
  reaction: "d-p_gamma-he3",
  reference: "first2000",
  evaluations: [evaluation("first2000"), evaluation("second2010"), evaluation("third2020", "assumed")],
  sensitivityT9: T9,
  abundances: Object.fromEntries(
    ["Yp", "dToH", "he3ToH", "li7ToH"].map((name) => [name, { density, range: [0.2, 0.9] as const }]),
  ),
  swaps: Object.fromEntries(
    ["second2010", "third2020"].map((name) => [
      name,
      Object.fromEntries(["Yp", "dToH", "he3ToH", "li7ToH"].map((abundance) => [abundance, { change: -0.01 }])),
    ]),
  ),
};
const ratios = {
  columns: ["T9", "f_u_first2000", "ratio_second2010", "f_u_second2010", "ratio_third2020", "f_u_third2020"],
  units: ["GK", "1", "1", "1", "1", "1"],
  rows: T9.map((each, i) => [each, 1.02, 1 + 0.01 * i, 1.03, 0.95, 2]),
};

test("compare: three panels below each other; bands where the uncertainty is published, dotted edges elsewhere", () => {
  const { panels, height } = compareFigure(comparison, ratios, "note");
  expect(panels.map(({ name }) => name)).toEqual([...COMPARE_CHARTS]);
  for (const [i, { y, height: own }] of panels.entries()) expect(y + own).toBe(panels[i + 1]?.y ?? height - 26);
  const ratio = panels[0].chart as {
    data: { datasets: { label?: string; fill?: unknown; data: { y: number }[] }[] };
    options: unknown;
  };
  const { datasets } = ratio.data;
  expect(datasets.map(({ label }) => label).filter((label) => label !== "")).toEqual([
    "first2000",
    "second2010",
    "third2020*",
  ]);
  expect(datasets.filter(({ fill }) => fill !== undefined)).toHaveLength(2);
  // The range holds the published bands and every ratio, not the assumed factor of 2.
  const { min, max } = (ratio.options as { scales: { y: { min: number; max: number } } }).scales.y;
  expect(min).toBeLessThanOrEqual(0.95);
  expect(max).toBeGreaterThanOrEqual(1.03 * 1.03);
  expect(max).toBeLessThan(1.5);
});

test("compare without abundances: ratios alone; a chart by its name", () => {
  const { sensitivityT9: _, abundances: __, swaps: ___, ...alone } = comparison;
  expect(compareFigure(alone, ratios, "note").panels.map(({ name }) => name)).toEqual(["ratio"]);
  expect(() => compareFigure(alone, ratios, "note", "abundances")).toThrow(/d-p_gamma-he3: no swaps/);
  expect(compareFigure(comparison, ratios, "note", "sensitivity").panels).toHaveLength(1);
});

test("show: rate with its reverse, and the uncertainty, with the ends of the claim", () => {
  const table = {
    columns: ["T9", "rate", "f_u", "reverse_rate", "ln_reverse_over_forward", "claim"],
    units: ["GK", "cm3 / (mol s)", "1", "1 / s", "1", ""],
    rows: T9.map((each, i) => [each, 10 ** i, 1.03, i === 0 ? 0 : 10 ** (i - 40), -1, "inside"]),
  };
  const rate = { name: "d(p,γ)³He", evaluation: "some2000", table, validT9: [0.05, 10] as const, assumed: true };
  const figure = rateFigure(rate, "note");
  expect(figure.panels.map(({ name }) => name)).toEqual(RATE_CHARTS);
  const [first, second] = figure.panels.map(({ chart }) => chart);
  expect(first.data.datasets.map(({ label }) => label)).toEqual(["rate", "reverse"]);
  const scales = first.options!.scales as Record<string, { min: number; max: number; title: { text: string } }>;
  expect(scales.y.max / scales.y.min).toBeLessThanOrEqual(1e26);
  expect(scales.y.title.text).toBe("rate [cm³/(mol s)], reverse [1/s]");
  const notes = (first.options!.plugins!.annotation as { annotations: Record<string, unknown> }).annotations;
  expect(Object.keys(notes)).toContain("claimFrom");
  expect(Object.keys(notes)).not.toContain("claimTo");
  expect((second.options!.plugins!.title as { text: string }).text).toContain("not published");
});
