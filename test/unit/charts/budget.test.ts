// The figure of the error budget: its bars are the shares, what is assumed is pale, what is small is summed up.
import { expect, test } from "vitest";
import { BUDGET_CHARTS, budgetFigure } from "../../../src/charts/budget.ts";
import type { ErrorBudget } from "../../../src/model/error-budget.ts";

const source = (name: string, basis: "published" | "assumed") => ({ name, basis, citation: "A 2020" });
const shares = { tauN: 0.3, "d-p_gamma-he3": 0.6, "he3-n_p-t": 0.0985, "d-d_p-t": 0.001, "d-d_n-he3": 0.0005 };
const budget: Pick<ErrorBudget, "abundances" | "variance" | "sources"> = {
  abundances: Object.fromEntries(["Yp", "dToH", "he3ToH", "li7ToH"].map((name) => [name, { value: 2, sigma: 0.03 }])),
  variance: Object.fromEntries(["Yp", "dToH", "he3ToH", "li7ToH"].map((name) => [name, shares])),
  sources: [
    source("tauN", "published"),
    source("d-p_gamma-he3", "published"),
    source("he3-n_p-t", "assumed"),
    source("d-d_p-t", "published"),
    source("d-d_n-he3", "published"),
  ],
};

test("bars fall, carry the trade's names, and the last one sums up what is small", () => {
  const { panels } = budgetFigure(budget, "note", "deuterium");
  const { data, options } = panels[0].chart;
  expect(data.labels).toEqual(["d(p,γ)³He", "τₙ", "³He(n,p)t", "2 others"]);
  const values = data.datasets[0].data;
  expect(values.slice(0, 3)).toEqual([0.6, 0.3, 0.0985]);
  expect(values[3]).toBeCloseTo(0.0015, 12);
  expect(options?.plugins?.title?.text).toBe("D/H: theory error 1.5 %");
});

test("an assumed error has another colour than a published one, and the axis says what it means", () => {
  const { data, options } = budgetFigure(budget, "note", "helium").panels[0].chart;
  const colors = data.datasets[0].backgroundColor as string[];
  expect(colors[0]).toBe(colors[1]);
  expect(colors[2]).not.toBe(colors[0]);
  expect(JSON.stringify(options?.scales?.x)).toContain("assumed");
});

test("the sheet holds a panel for each of the four, within its size", () => {
  const figure = budgetFigure(budget, "note");
  expect(figure.panels.map((panel) => panel.name)).toEqual(BUDGET_CHARTS);
  for (const { x, y, width, height } of figure.panels) {
    expect(x + width).toBeLessThanOrEqual(figure.width);
    expect(y + height).toBeLessThanOrEqual(figure.height);
  }
});

test("an abundance that the budget does not hold is refused", () => {
  expect(() => budgetFigure({ ...budget, abundances: {} }, "note", "helium")).toThrow(RangeError);
});
