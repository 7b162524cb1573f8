/** The request `scan`: abundances along one or two parameters. */
import type { RateLibrary } from "../nuclear/library.ts";
import { fixedCosmology } from "../output/scan-output.ts";
import type { ScanResults } from "../output/sweep-result.ts";
import type { Envelope } from "./envelope.ts";
import { makeEnvelope } from "./envelope.ts";
import { prepareSweep, runSweep, type SweepKeys, type SweepOptions } from "./sweep.ts";

/** Axes of a scan. */
const AXES = { fewest: 1, most: 2 } as const;

/**
 * Answers `scan`: a table of the axes, the abundances, and their errors as NAME_sigma. Every abundance is that of a
 * single run, to the last bit; linear errors are within 1 % of the full ones, see relativeErrors.
 * @throws {InputError | CalculationError}
 */
export async function computeScan(
  keys: SweepKeys,
  library: RateLibrary,
  options: SweepOptions = {},
): Promise<Envelope<ScanResults>> {
  const sweep = await prepareSweep("scan", keys, AXES, library, options);
  const { table, counts, warnings } = await runSweep(sweep, options.progress);
  const axes = sweep.plan.axes.map(({ key, unit, values, log }) => ({ key, unit, count: values.length, log }));
  return makeEnvelope(
    "scan",
    fixedCosmology(sweep.parameters, axes),
    { axes, table },
    sweep.provenance,
    { ...counts, tolerance: sweep.parameters.tolerance },
    warnings,
  );
}
