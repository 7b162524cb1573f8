// Charts of recombination: what each shows, in the models and cosmologies that change its shape.
import { describe, expect, test } from "vitest";
import type { Panel } from "../../../src/charts/figure.ts";
import { RECOMBINATION_CHARTS, recombinationFigure } from "../../../src/charts/recombination.ts";
import { recombinationResults, runRecombination } from "../../../src/model/recombination.ts";
import type { Keys } from "../../../src/parameters/cosmology.ts";

const figure = (keys: Keys, name?: string) => {
  const run = runRecombination({ ypMass: 0.2454, ...keys }, () => Number.NaN);
  const results = recombinationResults(run);
  return { results, parameters: run.parameters, made: recombinationFigure(results, run.parameters, "note", name) };
};
const annotations = ({ chart }: Panel) => Object.keys(chart.options?.plugins?.annotation?.annotations ?? {});

const CASES: readonly [string, Keys][] = [
  ["the default", {}],
  ["saha", { model: "saha" }],
  ["with reionisation", { tauReion: 0.06 }],
  ["without helium", { ypMass: 0 }],
  ["mostly helium", { ypMass: 0.99 }],
  ["few baryons", { omegaB: 1e-4 }],
  ["without cooling", { without: ["matter-cooling"] }],
];

describe.each(CASES)("%s", (_name, keys) => {
  const { made } = figure(keys);

  test("four panels side by side without overlap, within the sheet", () => {
    expect(made.panels.map((panel) => panel.name)).toEqual(RECOMBINATION_CHARTS);
    for (const [i, a] of made.panels.entries()) {
      expect(a.x + a.width).toBeLessThanOrEqual(made.width);
      expect(a.y + a.height).toBeLessThan(made.height);
      for (const b of made.panels.slice(i + 1))
        expect(a.x + a.width <= b.x || b.x + b.width <= a.x || a.y + a.height <= b.y).toBe(true);
    }
  });

  test("every curve has points within its axes, finite, and a look of its own", () => {
    for (const { chart, name } of made.panels) {
      const scales = chart.options?.scales as Record<string, { min: number; max: number }>;
      const looks = chart.data.datasets.map((set) => JSON.stringify([set.borderColor, set.borderDash, set.yAxisID]));
      expect(new Set(looks).size, name).toBe(looks.length);
      for (const set of chart.data.datasets) {
        const axis = scales[set.yAxisID as string];
        const shown = set.data.filter((p) => p.y !== null && p.y >= axis.min && p.y <= axis.max);
        expect(shown.length, `${name}, ${set.label}`).toBeGreaterThan(10);
        for (const p of set.data) expect(Number.isFinite(p.x) && (p.y === null || Number.isFinite(p.y))).toBe(true);
      }
      for (const axis of Object.values(scales)) expect(axis.max).toBeGreaterThan(axis.min);
    }
  });
});

test("ionisation shows the model beside Saha, and helium enlarged; the saha model stands alone", () => {
  const labels = (keys: Keys) => figure(keys, "ionisation").made.panels[0].chart.data.datasets.map((set) => set.label);
  expect(labels({})).toEqual(["Saha", "three-level", "He Saha", "helium"]);
  expect(labels({ ypMass: 0 })).toEqual(["Saha", "three-level"]);
  expect(labels({ model: "saha" })).toEqual(["saha", "helium"]);
});

test("both visibility functions reach 1 at their own peaks, 10 apart", () => {
  const { made, results } = figure({}, "visibility");
  const peaks = made.panels[0].chart.data.datasets.map((set) =>
    set.data.reduce((best, p) => ((p.y ?? 0) > (best.y ?? 0) ? p : best)),
  );
  for (const peak of peaks) expect(peak.y).toBe(1);
  expect(Math.abs(peaks[0].x - results.visibility.zPeak)).toBeLessThan(6);
  expect(Math.abs(peaks[1].x - results.visibility.zOfEtaPeak)).toBeLessThan(6);
});

test("last scattering and thermal decoupling are marked", () => {
  const { made } = figure({});
  expect(annotations(made.panels[0])).toContain("star");
  expect(annotations(made.panels[2])).toContain("decoupling");
  expect(annotations(figure({ without: ["matter-cooling"] }, "temperature").made.panels[0])).not.toContain(
    "decoupling",
  );
});

test("a table without a needed column is refused by its name", () => {
  const { results, parameters } = figure({});
  const { table, ...rest } = results;
  const columns = table.columns.map((column) => (column === "xe" ? "other" : column));
  const broken = { ...rest, table: { ...table, columns } };
  expect(() => recombinationFigure(broken, parameters, "note", "ionisation")).toThrow("column xe");
});
