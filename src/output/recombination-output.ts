/** The answer of `recombination` as text: last scattering with definitions, short table, sensitivities, constants. */
import { lateBackground } from "../background/expansion.ts";
import {
  aubourg2015DragHorizon,
  desi2025DragHorizon,
  eisensteinHu1998DragRedshift,
  huSugiyama1996,
} from "../lineofsight/published-fits.ts";
import type { RecombinationResults } from "../model/recombination.ts";
import { localPolynomials } from "../numerics/local-polynomial.ts";
import { numericColumn, type Table } from "../numerics/table.ts";
import type { CosmologyParameters } from "../parameters/cosmology.ts";
import { entry, titleLine } from "./provenance-text.ts";
import { constantLines, ingredientLines } from "./recombination-ingredients.ts";
import type { Envelope } from "./result.ts";
import { alignColumns, formatNumber, pad, wrap } from "./text.ts";

/** Redshifts of the short table. */
const SHOWN = [8000, 6000, 5000, 3000, 2000, 1600, 1400, 1200, 1100, 1000, 800, 500, 200, 100, 20, 0];

/** Smaller values (of the visibility) are printed as 0. */
const NEGLIGIBLE = 1e-30;

/** Quantity, value with unit, definition. */
type Line = readonly [name: string, value: string, definition: string];

function section(title: string, lines: readonly Line[]): string[] {
  const heads = alignColumns(lines.map(([name, value]) => [`  ${name}`, value, ""]));
  const width = Math.max(...heads.map((line) => line.length)) + 2;
  return ["", title, ...lines.flatMap(([, , text], i) => wrap(text, pad(heads[i], width), " ".repeat(width)))];
}

function scattering(r: RecombinationResults, nEff: number): Line[] {
  return [
    ["z_star", r.zStar.toFixed(3), "optical depth 1, recombination alone, counted from z = 0"],
    ["z_drag", r.zDrag.toFixed(3), "drag depth 1: Thomson integrand over R = 3 rho_b/(4 rho_gamma)"],
    ["r_star", `${r.rStar_Mpc.toFixed(3)} Mpc`, "comoving sound horizon at z_star"],
    ["r_drag", `${r.rDrag_Mpc.toFixed(3)} Mpc`, "comoving sound horizon at z_drag"],
    ["D_M", `${r.DMStar_Mpc.toFixed(2)} Mpc`, "comoving distance to z_star"],
    ["100 theta_star", r.theta100Star.toFixed(5), "100 r_star/D_M"],
    ["k_D", `${r.kD_invMpc.toFixed(5)} /Mpc`, "photon diffusion down to z_star (Kaiser 1983)"],
    [
      "z_eq",
      r.zEq.toFixed(1),
      `omega_b + omega_c against photons${nEff > 0 ? " and three massless neutrinos" : ", as there are no neutrinos"}`,
    ],
    ["T at z_star", `${r.temperatureAtStar_K.toFixed(1)} K`, "radiation temperature"],
    ["age at z_star", `${Math.round(r.ageAtStar_yr)} yr`, "Julian years of 365.25 d"],
    ["age today", `${r.ageToday_Gyr.toFixed(4)} Gyr`, "the same"],
  ];
}

function ionisation(r: RecombinationResults): Line[] {
  return [
    ["z(x_e = 1/2)", r.zHalfIonised?.toFixed(2) ?? "never", "x_e = n_e/n_H, above 1 while helium is ionised"],
    ["z(x_e = 1/2), Saha", r.zHalfIonisedSaha.toFixed(2), "in equilibrium, same cosmology"],
    ...Object.entries(r.xeAtZ).map(([z, xe]): Line => [`x_e at z = ${z}`, formatNumber(xe, 6), "without reionisation"]),
    ...(r.zThermalDecoupling === undefined
      ? []
      : [["z(T_m/T_r = 0.9)", r.zThermalDecoupling.toFixed(2), "matter leaves the radiation temperature"] as Line]),
    ["n_He/n_H", formatNumber(r.fHe, 6), `helium mass fraction ${formatNumber(r.ypMass, 5)} of neutral H + He`],
    ...(r.zReionisation === undefined || r.opticalDepthReionisation === undefined
      ? []
      : ([
          ["z of reionisation", r.zReionisation.toFixed(3), "tanh form of Lewis 2008, width 0.5; helium again at 3.5"],
          ["its optical depth", formatNumber(r.opticalDepthReionisation, 5), "electrons of the tanh form alone"],
        ] as Line[])),
  ];
}

function visibility({ visibility: v }: RecombinationResults): Line[] {
  return [
    ["peak of g(z)", `z = ${v.zPeak.toFixed(2)}`, "g(z) = e^-tau |d tau/dz|"],
    ["width of g(z)", v.fwhmZ?.toFixed(2) ?? "none", "full width at half maximum in z (not FWHM/2.355, not r.m.s.)"],
    [
      "peak of g(eta)",
      `${v.etaPeak_Mpc.toFixed(2)} Mpc`,
      `g(eta) = e^-tau |d tau/d eta|, eta conformal time; z = ${v.zOfEtaPeak.toFixed(2)}`,
    ],
    [
      "width of g(eta)",
      v.fwhmEta_Mpc === undefined ? "none" : `${v.fwhmEta_Mpc.toFixed(3)} Mpc`,
      `full width at half maximum${v.fwhmZOfEta === undefined ? "" : `; ${v.fwhmZOfEta.toFixed(2)} between the same points in z`}`,
    ],
  ];
}

/** The table at round redshifts, by cubic interpolation; all rows as they are if there are few. */
function shortTable(table: Table): string[] {
  const columns = table.columns.map((name) => numericColumn(table, name));
  const z = columns[0];
  let rows = table.rows as readonly (readonly number[])[];
  if (z.length > SHOWN.length) {
    const curves = localPolynomials(z, columns, 4);
    rows = SHOWN.map((wish) => curves.map((curve, i) => (i === 0 ? wish : curve.value(wish))));
  }
  const head = ["z", "x_e", "T_m [K]", "T_r [K]", "tau", "g(z)", "eta [Mpc]"];
  const digits = [7, 5, 5, 5, 5, 4, 6];
  const figure = (value: number, i: number) =>
    i === 0 ? String(value) : value < NEGLIGIBLE ? "0" : formatNumber(value, digits[i]);
  return alignColumns(
    [head, ...rows.map((row) => row.map(figure))],
    head.map((_, i) => i),
  ).map((line) => `  ${line}`);
}

function sensitivities(s: NonNullable<RecombinationResults["sensitivities"]>): string[] {
  const results = Object.keys(s);
  const parameters = Object.keys(s[results[0]]);
  const rows = parameters.map((p) => [p, ...results.map((r) => s[r][p].toFixed(5).replace(/^-(0\.0+)$/, "$1"))]);
  return [
    "",
    "Sensitivities d ln X/d ln p; helium held as mass fraction, H0 held, flat",
    ...alignColumns([["", ...results], ...rows], [1, 2, 3]).map((line) => `  ${line}`),
  ];
}

/** Closed-form fits from the literature, beside the calculation. */
function publishedFits({ omegaB, omegaC, nEff, ...c }: CosmologyParameters): Line[] {
  const { omegaM, omegaNuMassive } = lateBackground({ omegaB, omegaC, nEff, ...c });
  const mpc = (value: number) => `${value.toFixed(2)} Mpc`;
  return [
    ["z_star", huSugiyama1996(omegaB, omegaM).toFixed(1), "Hu & Sugiyama 1996, physics of its time: about 2 too high"],
    [
      "z_drag",
      eisensteinHu1998DragRedshift(omegaB, omegaM).toFixed(1),
      "Eisenstein & Hu 1998, another definition: about 40 too low",
    ],
    [
      "r_drag",
      mpc(aubourg2015DragHorizon(omegaB, omegaB + omegaC, omegaNuMassive)),
      "Aubourg et al. 2015, for N_eff = 3.046",
    ],
    ["r_drag", mpc(desi2025DragHorizon(omegaB, omegaM, nEff)), "DESI Collaboration 2025"],
  ];
}

function calculation(answer: Envelope<RecombinationResults>): string[] {
  const { cosmology: c, solver, provenance } = answer;
  const cost = [
    `${solver.steps} steps`,
    `${solver.rejected} rejected`,
    `${solver.rhs} right-hand sides`,
    `${solver.jacobians} Jacobians`,
    `tolerance ${solver.tolerance.toExponential()}`,
    ...(solver.wall_ms === undefined ? [] : [`${Math.round(solver.wall_ms)} ms`]),
  ];
  const helium = provenance.rates.length > 0 ? `nucleosynthesis run, network ${provenance.network}` : "as given";
  return [
    "",
    "Calculation",
    ...entry(
      "cosmology",
      `omega_b ${c.omegaB}, omega_c ${c.omegaC}, H0 ${c.h0} km/s/Mpc, flat, N_eff ${formatNumber(c.nEff, 4)}, one neutrino of ${c.sumMnu} eV, T_CMB ${c.tCmb} K`,
    ),
    ...entry("model", c.model === "saha" ? "saha (equilibrium)" : `three-level, alpha-factor ${c.alphaFactor}`),
    ...entry("helium", helium),
    ...entry("constants", provenance.constants),
    ...entry("solver", cost.join(", ")),
    ...(answer.warnings.length > 0 ? ["", "Warnings", ...answer.warnings.flatMap((w) => wrap(w, "  ", "    "))] : []),
  ];
}

/** Text of a `recombination` answer, at most 80 columns wide but for long sources. */
export function recombinationText(answer: Envelope<RecombinationResults>): string {
  const r = answer.results;
  const lines = [
    titleLine("Recombination and last scattering", answer.version),
    ...section("Last scattering and baryon drag", scattering(r, answer.cosmology.nEff)),
    ...section("Ionisation", ionisation(r)),
    ...section("Visibility", visibility(r)),
    "",
    "History",
    ...shortTable(r.table),
    ...wrap(`${r.table.rows.length} rows with --format csv, ecsv or json; --z 1100,1089.5 for exact redshifts.`, "  "),
    ...(r.sensitivities === undefined ? [] : sensitivities(r.sensitivities)),
    ...(answer.cosmology.nEff > 0 ? section("Published fits, for comparison", publishedFits(answer.cosmology)) : []),
    ...ingredientLines(answer),
    ...constantLines(answer.provenance.recombination ?? []),
    ...calculation(answer),
  ];
  return `${lines.join("\n")}\n`;
}

/** What each column of the table is. */
export function recombinationDescriptions(): Record<string, string> {
  return {
    z: "redshift; a cubic through neighbouring rows reproduces every column within 1e-5",
    xe: "free electrons per hydrogen nucleus, n_e/n_H, with reionisation if there is one",
    Tm_K: "matter temperature (reionisation does not heat it)",
    Tr_K: "radiation temperature",
    opticalDepth: "Thomson optical depth from today",
    visibility_per_z: "g(z) = exp(-tau) d tau/dz",
    conformalTime_Mpc: "comoving particle horizon c int dt/a",
  };
}

/** One line of parameters and program, for the foot of a figure. */
export function recombinationNote({ cosmology: c, version }: Envelope<RecombinationResults>): string {
  const parts = [
    `ω_b = ${formatNumber(c.omegaB)}`,
    `ω_c = ${c.omegaC}`,
    `H₀ = ${c.h0}`,
    `N_eff = ${formatNumber(c.nEff, 4)}`,
    `Yₚ (mass) = ${formatNumber(c.ypMass ?? 0, 5)}`,
  ];
  return `${parts.join(", ")}; model ${c.model}; emberline ${version}`;
}
