// The abundance diagram: what is drawn where, in which order, readable at the width of a journal's column.
import { expect, test } from "vitest";
import { scanFigure } from "../../../src/charts/scan.ts";
import { bandedCurves, MOST_CURVES } from "../../../src/charts/scan-curves.ts";
import type { ScanMarks } from "../../../src/charts/scan-look.ts";
import { TEXT } from "../../../src/charts/scan-look.ts";
import type { Table } from "../../../src/numerics/table.ts";

const NAMES = ["Yp", "dToH", "he3ToH", "li7ToH"];
const VALUES = [0.247, 2.4e-5, 1e-5, 5e-10];

function table(axes: readonly (readonly [string, readonly number[]])[], withErrors = true): Table {
  const points = axes.reduce<number[][]>(
    (rows, [, values]) => rows.flatMap((row) => values.map((v) => [...row, v])),
    [[]],
  );
  const cells = VALUES.flatMap((value) => (withErrors ? [value, 0.05 * value] : [value]));
  const columns = [
    ...axes.map(([key]) => key),
    ...NAMES.flatMap((name) => (withErrors ? [name, `${name}_sigma`] : [name])),
  ];
  return { columns, units: columns.map(() => "1"), rows: points.map((point) => [...point, ...cells]) };
}

const marks = (axes: readonly string[], log = true): ScanMarks => ({
  axes,
  log,
  eta10PerOmegaB: 273.75,
  observed: [
    { abundance: "Yp", value: 0.245, sigma: 0.003, kind: "measurement", source: "A 2022" },
    { abundance: "he3ToH", value: 1.1e-5, sigma: 0.2e-5, kind: "upper-limit", source: "B 2002" },
  ],
  density: { omegaB: 0.02237, sigma: 0.00015, source: "C 2020" },
});
const etas = [1, 2, 4, 8];

interface Drawn {
  readonly data: { readonly datasets: readonly { yAxisID: string; fill?: number; label: string }[] };
  readonly options: {
    readonly scales: Readonly<Record<string, { min: number; max: number; position?: string; type: string }>>;
    readonly plugins: {
      readonly annotation: { readonly annotations: Readonly<Record<string, Record<string, number>>> };
    };
  };
}
const drawn = (figure: ReturnType<typeof scanFigure>) => figure.panels[0].chart as unknown as Drawn;

test("three panels share one axis of eta10, with omega_b opposite", () => {
  const { options, data } = drawn(scanFigure(table([["eta10", etas]]), "note", marks(["eta10"])));
  const panels = Object.keys(options.scales).filter((key) => /^y-(?!gap)/.test(key));
  expect(panels).toEqual(["y-lithium", "y-deuterium", "y-helium"]);
  expect(options.scales["y-helium"].type).toBe("linear");
  expect(options.scales["y-lithium"].type).toBe("logarithmic");
  expect(options.scales.x2.position).toBe("top");
  expect(options.scales.x2.min).toBeCloseTo(1 / 273.75, 12);
  expect(options.scales.x2.max).toBeCloseTo(8 / 273.75, 12);
  // Of each abundance: lower edge, upper edge filled down to it, curve.
  expect(data.datasets.length).toBe(12);
  data.datasets.forEach((dataset, i) => {
    if (i % 3 === 1) expect(dataset.fill).toBe(i - 1);
    else expect(dataset.fill).toBeUndefined();
  });
});

test("boxes stand at one standard deviation, a limit at its upper edge, the CMB at two", () => {
  const { annotations } = drawn(scanFigure(table([["eta10", etas]]), "", marks(["eta10"]))).options.plugins.annotation;
  expect(annotations["observed-Yp"]).toMatchObject({ type: "box", yMin: 0.242, yMax: 0.248 });
  expect(annotations["observed-he3ToH"]).toMatchObject({ type: "line", yMin: 1.3e-5, yMax: 1.3e-5 });
  for (const panel of ["helium", "deuterium", "lithium"]) {
    expect(annotations[`density-y-${panel}`].xMin).toBeCloseTo((0.02237 - 2 * 0.00015) * 273.75, 10);
    expect(annotations[`density-y-${panel}`].xMax).toBeCloseTo((0.02237 + 2 * 0.00015) * 273.75, 10);
  }
});

test("against omega_b the axes change places; against another key there is no opposite axis and no CMB", () => {
  const omega = drawn(scanFigure(table([["omegaB", [0.01, 0.03]]]), "", marks(["omegaB"])));
  expect(omega.options.scales.x2.max).toBeCloseTo(0.03 * 273.75, 10);
  expect(omega.options.plugins.annotation.annotations["density-y-helium"].xMin).toBeCloseTo(0.02207, 10);
  const life = drawn(scanFigure(table([["tauN", [870, 890]]]), "", marks(["tauN"], false)));
  expect(life.options.scales.x2).toBeUndefined();
  expect(life.options.plugins.annotation.annotations["density-y-helium"]).toBeUndefined();
  const far = drawn(scanFigure(table([["eta10", [20, 40]]]), "", marks(["eta10"])));
  expect(far.options.plugins.annotation.annotations["density-y-helium"]).toBeUndefined();
});

test("of two axes the longer one runs along, with at most a few curves of the other", () => {
  const many = Array.from({ length: 9 }, (_, i) => 2 + i / 10);
  const two = table([
    ["nEff", many],
    ["eta10", Array.from({ length: 12 }, (_, i) => 1 + i)],
  ]);
  const curves = bandedCurves(two, ["nEff", "eta10"], "Yp");
  expect(curves.length).toBe(MOST_CURVES);
  expect(curves[0].at).toBe(2);
  expect(curves[MOST_CURVES - 1].at).toBe(2.8);
  expect(curves[0].x).toEqual(Array.from({ length: 12 }, (_, i) => 1 + i));
  const figure = drawn(scanFigure(two, "", marks(["nEff", "eta10"])));
  expect(figure.options.scales.x2).toBeDefined();
});

test("without errors there are curves alone; one panel may be drawn by itself", () => {
  const plain = drawn(scanFigure(table([["eta10", etas]], false), "", marks(["eta10"])));
  expect(plain.data.datasets.length).toBe(4);
  const one = drawn(scanFigure(table([["eta10", etas]]), "", marks(["eta10"]), "lithium"));
  expect(Object.keys(one.options.scales).filter((key) => key.startsWith("y-"))).toEqual(["y-lithium"]);
});

test("at 86 mm, the width of a column, no letter is below 6 point", () => {
  const { width } = scanFigure(table([["eta10", etas]]), "", marks(["eta10"]));
  const pointsPerPx = ((86 / 25.4) * 72) / width;
  for (const size of Object.values(TEXT)) expect(size * pointsPerPx).toBeGreaterThan(6);
});
