// Charts of the history: which columns they show, and the whole configuration as a snapshot.
import { expect, test } from "vitest";
import { HISTORY_CHARTS, historyFigure } from "../../../src/charts/history.ts";
import { sampleHistory } from "../output/sample-answer.ts";

const { table, milestones } = sampleHistory().results;

test("the sheet holds every chart once, side by side without overlap", () => {
  const { panels, width, height } = historyFigure(table, "note", milestones);
  expect(panels.map((panel) => panel.name)).toEqual(HISTORY_CHARTS);
  for (const [i, a] of panels.entries()) {
    expect(a.x + a.width).toBeLessThanOrEqual(width);
    expect(a.y + a.height).toBeLessThan(height);
    for (const b of panels.slice(i + 1)) {
      const apart = a.x + a.width <= b.x || b.x + b.width <= a.x || a.y + a.height <= b.y || b.y + b.height <= a.y;
      expect(apart, `${a.name} and ${b.name}`).toBe(true);
    }
  }
});

test.each(HISTORY_CHARTS)("chart %s: every curve has its own look and a label", (name) => {
  const { panels } = historyFigure(table, "note", milestones, name);
  expect(panels).toHaveLength(1);
  const { datasets } = panels[0].chart.data;
  const looks = datasets.map((set) => JSON.stringify([set.borderColor, set.borderDash, set.yAxisID]));
  expect(new Set(looks).size).toBe(looks.length);
  const annotations = Object.keys(panels[0].chart.options?.plugins?.annotation?.annotations ?? {});
  for (const set of datasets) expect(annotations, set.label).toContain(`label-${set.label}`);
});

test("the nuclides are drawn as shares of the nucleons, A n/n_b", () => {
  const [panel] = historyFigure(table, "note", milestones, "abundances").panels;
  const helium = panel.chart.data.datasets.find((set) => set.label === "⁴He");
  expect(helium?.data.at(-1)?.y).toBeCloseTo(4 * 0.06, 12);
});

test("a table without a needed column is refused by its name", () => {
  const columns = table.columns.map((column) => (column === "H_per_s" ? "other" : column));
  expect(() => historyFigure({ ...table, columns }, "note", milestones, "weak")).toThrow("column H_per_s");
});

test.each(HISTORY_CHARTS)("configuration of %s", (name) => {
  expect(historyFigure(table, "note", milestones, name).panels[0].chart).toMatchSnapshot();
});
