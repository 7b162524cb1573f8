/** Section of the report: recombination, last scattering and baryon drag. */
import type { RecombinationResults } from "../model/recombination.ts";
import type { Envelope, Provenance } from "../output/result.ts";
import { formatNumber } from "../output/text.ts";
import { chartFigure } from "./charts.ts";
import { type Content, dataTable, type Markup, type Section } from "./html.ts";
import type { ReportCharts } from "./report.ts";
import { number, symbols } from "./symbols.ts";

function summaryRows(r: RecombinationResults): Content[][] {
  const v = r.visibility;
  return [
    ["z_star", r.zStar.toFixed(2), "optical depth 1, from recombination alone"],
    ["z_drag", r.zDrag.toFixed(2), "baryon-drag depth 1"],
    ["r_star", `${r.rStar_Mpc.toFixed(3)} Mpc`, "comoving sound horizon at z_star"],
    ["r_drag", `${r.rDrag_Mpc.toFixed(3)} Mpc`, "comoving sound horizon at z_drag"],
    ["100 θ_star", r.theta100Star.toFixed(5), "100 r_star/D_M(z_star)"],
    ["k_D", `${r.kD_invMpc.toFixed(5)} /Mpc`, "photon diffusion down to z_star"],
    ["z_eq", r.zEq.toFixed(1), "matter equals radiation"],
    ["T at z_star", `${r.temperatureAtStar_K.toFixed(1)} K`, "radiation temperature"],
    ["age at z_star", `${Math.round(r.ageAtStar_yr)} yr`, ""],
    ["age today", `${r.ageToday_Gyr.toFixed(3)} Gyr`, ""],
    ["z(x_e = 1/2)", r.zHalfIonised?.toFixed(2) ?? "never", `in Saha equilibrium ${r.zHalfIonisedSaha.toFixed(2)}`],
    ...Object.entries(r.xeAtZ).map(([z, xe]): Content[] => [`x_e at z = ${z}`, number(xe, 5), "without reionisation"]),
    [
      "peak of visibility",
      `z = ${v.zPeak.toFixed(2)}`,
      `g(z); full width at half maximum ${v.fwhmZ?.toFixed(1) ?? "none"}`,
    ],
    ...(r.zThermalDecoupling === undefined
      ? []
      : [["z(T_m/T_r = 0.9)", r.zThermalDecoupling.toFixed(1), "matter leaves the radiation temperature"]]),
    ...(r.opticalDepthReionisation === undefined
      ? []
      : [
          [
            "τ of reionisation",
            formatNumber(r.opticalDepthReionisation, 4),
            `at z = ${formatNumber(r.zReionisation ?? 0, 4)}`,
          ],
        ]),
    ["n_He/n_H", formatNumber(r.fHe, 5), `helium mass fraction ${formatNumber(r.ypMass, 5)}`],
  ];
}

export function recombinationSection(
  { results: r, cosmology, provenance }: Envelope<RecombinationResults>,
  charts: ReportCharts,
): Section {
  const table = dataTable(
    `Recombination (${cosmology.model}) and last scattering`,
    [{ head: "quantity" }, { head: "value", numeric: true }, { head: "definition" }],
    summaryRows(r).map((row) => row.map((cell) => (typeof cell === "string" ? symbols(cell) : cell))),
  );
  const figures = [
    chartFigure(charts, {
      name: "ionisation",
      title: "Free electrons against redshift",
      description: `The free-electron fraction falls from above 1, while helium is ionised, through 1/2 at z = ${r.zHalfIonised?.toFixed(0) ?? "never"} to ${formatNumber(r.xeAtZ["200"], 2)} at z = 200.`,
      caption: "Free electrons per hydrogen nucleus against redshift.",
    }),
    chartFigure(charts, {
      name: "visibility",
      title: "Visibility function",
      description: `The visibility against redshift peaks at z = ${r.visibility.zPeak.toFixed(1)} with a full width at half maximum of ${r.visibility.fwhmZ?.toFixed(0) ?? "none"}; last scattering is at ${r.zStar.toFixed(1)}, baryon drag at ${r.zDrag.toFixed(1)}.`,
      caption: "Where the photons of the CMB scattered last.",
    }),
    chartFigure(charts, {
      name: "matter",
      title: "Matter temperature",
      description: `Matter and radiation share one temperature until the residual electrons lose their grip; matter is at nine tenths of the radiation temperature at z = ${r.zThermalDecoupling?.toFixed(0) ?? "never"}.`,
      caption: "Temperature of matter and radiation against redshift.",
    }),
  ];
  return {
    id: "recombination",
    title: "Recombination",
    content: [table, ...figures, ...constantsTable(provenance.recombination)],
  };
}

function constantsTable(constants: Provenance["recombination"]): Markup[] {
  if (constants === undefined) return [];
  const rows = constants.map((each): Content[] => [
    each.meaning,
    each.uncertainty === undefined ? String(each.value) : `${each.value} ± ${each.uncertainty}`,
    each.unit,
    each.source,
  ]);
  return [
    dataTable(
      "Constants and fits of recombination",
      [{ head: "constant" }, { head: "value", numeric: true }, { head: "unit" }, { head: "source" }],
      rows,
    ),
  ];
}
