/** The public names, in the order in which the calculation runs; everything here works in a browser too. */

// constants, numerics

export type { Constant } from "./constants/constant.ts";
export { CalculationError, EmberlineError, InputError } from "./numerics/check.ts";
export type { SolverCounts } from "./numerics/ode-stiff.ts";
export { numericColumn, type Table } from "./numerics/table.ts";

// nuclear, parameters

export { buildLibrary, type LibraryFiles, overlay, type RateLibrary } from "./nuclear/library.ts";
export { formatReaction, parseReactionName } from "./nuclear/reaction-name.ts";
export {
  type CosmologyParameters,
  DEFAULTS,
  eta10PerOmegaB,
  type Keys,
  type Measured,
  NUCLEOSYNTHESIS_CORRECTIONS,
  RANGES,
  resolveParameters,
} from "./parameters/cosmology.ts";

// background, weak, nucleosynthesis

export { type BackgroundOptions, computeThermalHistory, type ThermalHistory } from "./background/history.ts";
export {
  ABUNDANCE_NAMES,
  type AbundanceName,
  DEFINITIONS,
  HEAVY_ABUNDANCE_NAMES,
} from "./nucleosynthesis/abundances.ts";
export { tabulateWeakRates, type WeakTable } from "./weak/table.ts";

// recombination, line of sight

export { ageAt, type LateBackground, type LateCosmology, lateBackground } from "./background/expansion.ts";
export { comovingDistance, conformalTime } from "./lineofsight/distances.ts";
export { soundHorizon } from "./lineofsight/sound-horizon.ts";
export { computeLineOfSight, type LineOfSightSummary } from "./lineofsight/summary.ts";
export { adaptiveTable, tableAt } from "./lineofsight/table.ts";
export { heliumMassFraction, heliumToHydrogen } from "./parameters/helium.ts";
export { computeIonisationHistory, type IonisationHistory } from "./recombination/history.ts";
export type { RecombinationInputs } from "./recombination/inputs.ts";
export { RECOMBINATION_SWITCHES } from "./recombination/switches.ts";

// model: prepared once, asked often

export type { ErrorBudget } from "./model/error-budget.ts";
export type { AbundanceRun, Estimate, Model } from "./model/prepare.ts";
export type { RecombinationResults } from "./model/recombination.ts";

// uncertainty, inference

export type { Inference } from "./inference/infer.ts";
export { type Observation, parseObserved, readObservations } from "./inference/observations.ts";
export { type CentralStep, centralSensitivities, relativeStep } from "./uncertainty/sensitivity.ts";

// output, charts

export { budgetFigure } from "./charts/budget.ts";
export type { Figure, LineChart, Panel } from "./charts/figure.ts";
export { historyFigure } from "./charts/history.ts";
export { inferFigure } from "./charts/infer.ts";
export { compareFigure } from "./charts/rates-compare.ts";
export { rateFigure } from "./charts/rates-show.ts";
export { recombinationFigure } from "./charts/recombination.ts";
export { scanFigure } from "./charts/scan.ts";
export { abundancesTable, abundancesText } from "./output/abundances-output.ts";
export { budgetTable, budgetText } from "./output/budget-output.ts";
export type { BudgetResults } from "./output/budget-result.ts";
export { toCsv } from "./output/csv.ts";
export { toEcsv } from "./output/ecsv.ts";
export { historyText } from "./output/history-output.ts";
export { inferTable, inferText } from "./output/infer-output.ts";
export type { InferResults } from "./output/infer-result.ts";
export { toJson } from "./output/json.ts";
export { ratesCompareText } from "./output/rates-compare-output.ts";
export { ratesListText } from "./output/rates-list-output.ts";
export { ratesShowText } from "./output/rates-show-output.ts";
export { recombinationText } from "./output/recombination-output.ts";
export { scanText } from "./output/scan-output.ts";
export type { GridResults, ScanResults } from "./output/sweep-result.ts";
export { type ReportCharts, type ReportData, reportPage } from "./report/report.ts";

// requests: one function a command

export { computeAbundances } from "./requests/abundances.ts";
export { computeBudget } from "./requests/budget.ts";
export type {
  AbundanceResults,
  Envelope,
  HistoryResults,
  Milestones,
  Progress,
  Provenance,
} from "./requests/envelope.ts";
export { computeGrid, type GridKeys } from "./requests/grid.ts";
export { computeHistory } from "./requests/history.ts";
export { computeInfer, type InferKeys } from "./requests/infer.ts";
export { modelFor as prepare } from "./requests/model-for.ts";
export { computeRates, type RatesKeys, type RatesResults } from "./requests/rates.ts";
export { type MakeRequest, makeRate } from "./requests/rates-make.ts";
export { computeRecombination, type RecombinationKeys } from "./requests/recombination.ts";
export { computeReport } from "./requests/report.ts";
export { computeScan } from "./requests/scan.ts";
export type { SweepKeys, SweepOptions } from "./requests/sweep.ts";

export { VERSION } from "./version.ts";
