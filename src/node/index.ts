/** The library on Node: the public names of the browser library, with rates/ read from disk and charts as files. */
import type { AnyChart, Figure } from "../charts/figure.ts";
import type { Model } from "../model/prepare.ts";
import type { RecombinationResults } from "../model/recombination.ts";
import type { BudgetResults } from "../output/budget-result.ts";
import type { InferResults } from "../output/infer-result.ts";
import type { GridResults, ScanResults } from "../output/sweep-result.ts";
import type { Keys } from "../parameters/cosmology.ts";
import { computeAbundances } from "../requests/abundances.ts";
import { computeBudget } from "../requests/budget.ts";
import type { AbundanceResults, Envelope, HistoryResults } from "../requests/envelope.ts";
import { computeGrid, type GridKeys } from "../requests/grid.ts";
import { computeHistory } from "../requests/history.ts";
import { computeInfer, type InferKeys } from "../requests/infer.ts";
import { modelFor } from "../requests/model-for.ts";
import { computeRates, type RatesKeys, type RatesResults } from "../requests/rates.ts";
import { computeRecombination, type RecombinationKeys } from "../requests/recombination.ts";
import { computeReport } from "../requests/report.ts";
import { computeScan } from "../requests/scan.ts";
import type { SweepKeys } from "../requests/sweep.ts";
import { loadRates } from "./load-rates.ts";

export * from "../index.ts";
export { loadRates } from "./load-rates.ts";
export { writeWhole } from "./write-file.ts";

/** Where the rates come from: the folder rates/ of this package unless another is laid over it. */
export interface RatesOption {
  /** A folder laid out as rates/, whole or holding only the files that differ. */
  readonly rates?: string;
}

/** How a report names its origin. */
export interface ReportOption extends RatesOption {
  readonly command?: string;
}

/**
 * A model that keeps what does not depend on the keys that change: `model.abundances({ omegaB: 0.0223 })`.
 * @param keys defaults of every later call
 * @throws {InputError} for keys out of range, an unknown network, reaction or evaluation, or a damaged rate file
 */
export async function prepare(keys: Keys = {}, { rates }: RatesOption = {}): Promise<Model> {
  return modelFor(keys, loadRates(rates));
}

/** The answer of the command `abundances`. @throws {InputError | CalculationError} */
export async function abundances(keys: Keys = {}, { rates }: RatesOption = {}): Promise<Envelope<AbundanceResults>> {
  return computeAbundances(keys, loadRates(rates));
}

/** The answer of the command `history`. @throws {InputError | CalculationError} */
export async function history(keys: Keys = {}, { rates }: RatesOption = {}): Promise<Envelope<HistoryResults>> {
  return computeHistory(keys, loadRates(rates));
}

/** The answer of the command `budget`. @throws {InputError | CalculationError} */
export async function budget(keys: Keys = {}, { rates }: RatesOption = {}): Promise<Envelope<BudgetResults>> {
  return computeBudget(keys, loadRates(rates));
}

/** The answer of the command `infer`. @throws {InputError | CalculationError} */
export async function infer(keys: InferKeys = {}, { rates }: RatesOption = {}): Promise<Envelope<InferResults>> {
  return computeInfer(keys, loadRates(rates));
}

/** The answer of the command `recombination`. @throws {InputError | CalculationError} */
export async function recombination(
  keys: RecombinationKeys = {},
  { rates }: RatesOption = {},
): Promise<Envelope<RecombinationResults>> {
  return computeRecombination(keys, loadRates(rates));
}

/** The answer of the command `rates` by its action: list, show, compare, check. @throws {InputError | CalculationError} */
export async function rates(
  keys: RatesKeys = {},
  { rates: folder }: RatesOption = {},
): Promise<Envelope<RatesResults>> {
  return computeRates(keys, loadRates(folder));
}

/** The answer of the command `scan`, in this thread. @throws {InputError | CalculationError} */
export async function scan(keys: SweepKeys, { rates }: RatesOption = {}): Promise<Envelope<ScanResults>> {
  return computeScan(keys, loadRates(rates));
}

/** The answer of the command `grid`, in this thread. @throws {InputError | CalculationError} */
export async function grid(keys: GridKeys, { rates }: RatesOption = {}): Promise<Envelope<GridResults>> {
  return computeGrid(keys, loadRates(rates));
}

/**
 * The page of the command `report`, as HTML.
 * @param command what the page says that it was made with
 * @throws {InputError | CalculationError}
 */
export async function report(keys: Keys = {}, { rates, command = "emberline report" }: ReportOption = {}) {
  const library = loadRates(rates);
  const data = await computeReport(keys, library);
  return (await import("./render-report.ts")).renderReport({ ...data, command }, library);
}

/**
 * A figure as the content of a file, png, svg or pdf by the ending of its name; the canvas is loaded at the first call.
 * @throws {InputError} for another ending
 */
export async function renderFigure(figure: Figure<AnyChart>, file: string): Promise<Uint8Array> {
  return (await import("./render-chart.ts")).renderFigure(figure, file);
}
