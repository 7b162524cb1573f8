/** Sections of the report: the abundances beside the observed ones, and the diagram against the baryon density. */
import type { Observation } from "../inference/observations.ts";
import { type AbundanceName, DEFINITIONS } from "../nucleosynthesis/abundances.ts";
import { abundanceLabel } from "../nucleosynthesis/labels.ts";
import { numericColumn } from "../numerics/table.ts";
import type { Envelope, Estimate } from "../output/result.ts";
import type { ScanResults } from "../output/sweep-result.ts";
import { formatEstimate, formatNumber } from "../output/text.ts";
import { chartFigure } from "./charts.ts";
import { type Content, dataTable, type Section } from "./html.ts";
import type { ReportCharts, ReportData } from "./report.ts";
import { abundance, fixed, estimate as measuredEstimate, number, symbols } from "./symbols.ts";

/** First author and year of a source. */
export function shortName({ source, date }: Observation): string {
  const author = source.split(/[,&]| et al/)[0].trim();
  return date === undefined ? author : `${author} ${date}`;
}

/** How far a calculated abundance is from the observed one, in standard deviations of both together. */
function difference({ value, sigma = 0 }: Estimate, observed: Observation): string {
  const off = (value - observed.value) / Math.hypot(sigma, observed.sigma);
  if (observed.kind === "upper-limit") return off <= 0 ? "below the limit" : `${off.toFixed(1)} σ above the limit`;
  return `${off >= 0 ? "+" : "−"}${Math.abs(off).toFixed(1)} σ`;
}

export function abundanceSection({ abundances, observed }: ReportData): Section {
  const { results } = abundances;
  const entries = Object.entries(results.abundances) as [AbundanceName, Estimate][];
  const rows = entries.map(([name, estimate]): Content[] => {
    const found = observed.find((each) => each.abundance === name);
    const sizes = [
      measuredEstimate(estimate.value, estimate.sigma),
      estimate.sigma !== undefined && estimate.value > 0
        ? `${((100 * estimate.sigma) / estimate.value).toPrecision(2)} %`
        : "",
    ];
    const compared =
      found === undefined
        ? ["", "", ""]
        : [measuredEstimate(found.value, found.sigma), difference(estimate, found), shortName(found)];
    return [abundance(name), ...sizes, ...compared];
  });
  rows.push([symbols("N_eff"), number(results.nEffComputed), "", "", "", ""]);
  const table = dataTable(
    "Abundances: calculated with theory error, observed, and their difference in standard deviations of both",
    [
      { head: "abundance" },
      { head: "calculated", numeric: true },
      { head: "error", numeric: true },
      { head: "observed", numeric: true },
      { head: "difference", numeric: true },
      { head: "source" },
    ],
    rows,
  );
  const definitions = dataTable(
    "Definitions",
    [{ head: "abundance" }, { head: "meaning" }],
    [
      ...entries.map(([name]) => [abundance(name), symbols(DEFINITIONS[name])]),
      [symbols("N_eff"), "effective neutrino number that results from this cosmology"],
    ],
  );
  return {
    id: "abundances",
    title: "Abundances",
    content: [table, definitions, ...correlationTable(results.correlation)],
  };
}

const CORRELATED: readonly string[] = ["Yp", "dToH", "he3ToH", "li7ToH"];

function correlationTable(correlation: ReportData["abundances"]["results"]["correlation"]) {
  if (correlation === undefined) return [];
  const { order, matrix } = correlation;
  const shown = CORRELATED.filter((name) => order.includes(name));
  const rows = shown.map((name) => [
    abundance(name),
    ...shown.map((other) => fixed(matrix[order.indexOf(name)][order.indexOf(other)], 2)),
  ]);
  return [
    dataTable(
      "Correlation of the theory errors",
      [{ head: "abundance" }, ...shown.map((name) => ({ head: abundance(name), numeric: true }))],
      rows,
    ),
  ];
}

export function diagramSection(
  diagram: Envelope<ScanResults>,
  { observed, density, abundances }: ReportData,
  charts: ReportCharts,
): Section {
  const { table } = diagram.results;
  const eta = numericColumn(table, "eta10");
  const run = (name: AbundanceName) => {
    const values = numericColumn(table, name);
    return `${abundanceLabel(name)} goes from ${formatNumber(values[0], 3)} to ${formatNumber(values[values.length - 1], 3)}`;
  };
  const lithium = numericColumn(table, "li7ToH");
  const lowest = lithium.indexOf(Math.min(...lithium));
  const description =
    `Curves with error bands against eta10 from ${formatNumber(eta[0], 2)} to ${formatNumber(eta[eta.length - 1], 2)}. ` +
    `${run("Yp")}; ${run("dToH")}; ${run("he3ToH")}; ⁷Li/H has its minimum, ${formatNumber(lithium[lowest], 2)}, at eta10 = ${formatNumber(eta[lowest], 2)}. ` +
    `Observed: ${observed.map((o) => `${abundanceLabel(o.abundance)} ${formatEstimate(o.value, o.sigma)}`).join(", ")}. ` +
    `The band of the CMB is at omega_b = ${formatEstimate(density.omegaB, density.sigma)}; this report is for ${formatNumber(abundances.cosmology.omegaB, 4)}.`;
  const figure = chartFigure(charts, {
    name: "diagram",
    title: "Abundances against the baryon density",
    description,
    caption:
      "Calculated abundances against the baryon-to-photon ratio (below) and the baryon density (above), with bands of one standard deviation of theory. Boxes: observed ranges; dotted: an upper limit; upright band: the CMB, two standard deviations to either side.",
    upright: true,
  });
  return { id: "diagram", title: "Against the baryon density", content: [figure] };
}
