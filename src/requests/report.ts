/** The request `report`: everything that the page about one cosmology shows, as answers of the other requests. */
import type { RecombinationResults } from "../model/recombination.ts";
import type { RateLibrary } from "../nuclear/library.ts";
import type { BudgetResults } from "../output/budget-result.ts";
import type { ScanResults } from "../output/sweep-result.ts";
import { type Keys, RANGES } from "../parameters/cosmology.ts";
import type { ReportData } from "../report/report.ts";
import { computeAbundances } from "./abundances.ts";
import { computeBudget } from "./budget.ts";
import type { Envelope, Progress } from "./envelope.ts";
import { computeHistory } from "./history.ts";
import { cmbDensity, recommendedObservations } from "./observed.ts";
import { computeRecombination } from "./recombination.ts";
import { computeScan } from "./scan.ts";
import type { SweepOptions } from "./sweep.ts";

/** Points of the diagram in a report. */
const DIAGRAM_POINTS = 60;

/**
 * Answers of which a report is made. Sampled errors apply to the abundances; diagram and budget are linear, and follow
 * `errors = none`, in which case there is no budget.
 * @throws {InputError | CalculationError}
 */
export async function computeReport(
  keys: Keys,
  library: RateLibrary,
  { progress, engine }: SweepOptions = {},
): Promise<Omit<ReportData, "command">> {
  const step = stages(progress, 5);
  const abundances = await computeAbundances(keys, library, step());
  const { errors, samples: _samples, seed: _seed, omegaB: _omegaB, eta10: _eta10, ...rest } = keys;
  const withErrors = errors !== "none";
  const linear: Keys = withErrors ? { ...keys, errors: "linear", samples: undefined } : keys;
  const history = await computeHistory(linear, library);
  step()?.(1, "history");
  const budget: Envelope<BudgetResults> | undefined = withErrors
    ? await computeBudget(linear, library, step())
    : undefined;
  const diagram: Envelope<ScanResults> = await computeScan(
    { ...rest, ...(withErrors ? {} : { errors }), over: [diagramAxis(abundances.cosmology.eta10)] },
    library,
    { progress: step(), engine },
  );
  const recombination: Envelope<RecombinationResults> = await computeRecombination(
    recombinationKeys(keys, abundances.results.abundances.YpMass?.value),
    library,
    step(),
  );
  return {
    abundances,
    history,
    ...(budget === undefined ? {} : { budget }),
    diagram,
    recombination,
    observed: recommendedObservations(library),
    density: cmbDensity(library),
  };
}

/** The axis of the diagram: eta10 from 1 to 10, wider where the cosmology lies outside. */
function diagramAxis(eta10: number): string {
  const low = Math.max(RANGES.eta10.min, Math.min(1, eta10 / 2));
  const high = Math.min(RANGES.eta10.max, Math.max(10, eta10 * 2));
  return `eta10=${low}:${high}:${DIAGRAM_POINTS}log`;
}

/** Recombination of the same cosmology, with the helium of this report's run; what it does not take is left out. */
function recombinationKeys(keys: Keys, ypMass: number | undefined): Keys {
  const {
    expansion: _expansion,
    without: _without,
    errors: _errors,
    samples: _samples,
    tolerance: _own,
    ...rest
  } = keys;
  return { ...rest, ypMass: keys.ypMass ?? ypMass };
}

/** Progress of several stages as one. */
function stages(progress: Progress | undefined, count: number): () => Progress | undefined {
  let stage = -1;
  return () => {
    stage++;
    const done = stage;
    return progress === undefined ? undefined : (share, what) => progress((done + share) / count, what);
  };
}
