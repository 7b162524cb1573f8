/** The answer of `history` as text: milestones and a short table; the full table goes to CSV, ECSV and JSON. */
import { formatNuclide } from "../nuclear/nuclide.ts";
import { numericColumn, type Table } from "../numerics/table.ts";
import { provenanceLines, titleLine } from "./provenance-text.ts";
import type { Envelope, HistoryResults, Milestones } from "./result.ts";
import { alignColumns, formatNumber, wrap } from "./text.ts";

/** Rows of the short tables. */
const SHORT_ROWS = 13;

function milestoneLines(m: Milestones): string[] {
  return alignColumns([
    ["  T = 1 MeV", `t = ${formatNumber(m.tAt1MeV_s)} s`],
    [
      "  weak freeze-out",
      `T = ${formatNumber(m.freezeOutTemperature_MeV)} MeV, n/p = ${formatNumber(m.neutronToProtonAtFreezeOut)} (n → p rate = H)`,
    ],
    ["  T = 1e9 K", `t = ${formatNumber(m.tAt1e9K_s)} s`],
    ["  deuterium peak", `t = ${formatNumber(m.tDeuteriumPeak_s)} s, T9 = ${formatNumber(m.T9DeuteriumPeak)}`],
    ["  T_gamma/T_nue", `${formatNumber(m.photonToNeutrinoTemperature)} at the end`],
  ]);
}

/** Numbers of `count` rows evenly spread over the logarithm of a growing column, first and last included. */
function spread(values: readonly number[], count: number): number[] {
  const start = Math.log(values[0]);
  const step = (Math.log(values[values.length - 1]) - start) / (count - 1);
  const chosen = Array.from({ length: count }, (_, k) => {
    const target = start + k * step;
    let best = 0;
    values.forEach((value, i) => {
      if (Math.abs(Math.log(value) - target) < Math.abs(Math.log(values[best]) - target)) best = i;
    });
    return best;
  });
  return [...new Set(chosen)];
}

/** Chosen rows of chosen columns, set flush right. */
function shortTable(
  table: Table,
  columns: readonly (readonly [name: string, head: string])[],
  rows: readonly number[],
  digits: number,
): string[] {
  const head = columns.map(([, text]) => text);
  const data = columns.map(([name]) => numericColumn(table, name));
  const body = rows.map((row) => data.map((values) => formatNumber(values[row], digits)));
  return alignColumns(
    [head, ...body],
    columns.map((_, i) => i),
  ).map((line) => `  ${line}`);
}

/** Text of a `history` answer, at most 80 columns wide. */
export function historyText(answer: Envelope<HistoryResults>): string {
  const { table, milestones } = answer.results;
  const rows = spread(numericColumn(table, "t_s"), SHORT_ROWS);
  const nuclides = ["n", "h1", "d", "t", "he3", "he4", "be7"].filter((id) => table.columns.includes(`Y_${id}`));
  const rates: readonly (readonly [string, string])[] = [
    ["t_s", "t [s]"],
    ["T_MeV", "T [MeV]"],
    ["Tnue_over_T", "T_nue/T"],
    ["Tnumu_over_T", "T_numu/T"],
    ["H_per_s", "H [1/s]"],
    ["n_to_p_per_s", "n→p [1/s]"],
    ["p_to_n_per_s", "p→n [1/s]"],
  ];
  const abundances: readonly (readonly [string, string])[] = [
    ["t_s", "t [s]"],
    ...nuclides.map((id) => [`Y_${id}`, formatNuclide(id)] as const),
  ];
  const lines = [
    titleLine("Thermal history and nucleosynthesis", answer.version),
    "",
    "Milestones",
    ...milestoneLines(milestones),
    "",
    "Temperature T of photons, neutrinos relative to it, expansion and weak rates",
    ...shortTable(table, rates, rows, 4),
    "",
    "Abundances Y = n_i/n_b",
    ...shortTable(table, abundances, rows, 3),
    "",
    ...wrap(`${table.rows.length} rows and ${table.columns.length} columns with --format csv, ecsv or json.`, "  "),
    "",
    "Calculation",
    ...provenanceLines(answer),
  ];
  return `${lines.join("\n")}\n`;
}
