/** Puts an answer together: command, version, cosmology, results, provenance, solver, warnings. */
import type { Envelope, Provenance, SolverReport } from "../output/result.ts";
import type { CosmologyParameters } from "../parameters/cosmology.ts";
import { VERSION } from "../version.ts";

export type {
  AbundanceResults,
  Envelope,
  Estimate,
  HistoryResults,
  Milestones,
  Provenance,
  RateUsed,
  RecombinationConstantUsed,
  SolverReport,
} from "../output/result.ts";

/**
 * Told while a long request runs: the share done, 0 to 1, what is being done, and how many of it there are in all, so
 * that a rate can be shown.
 */
export type Progress = (share: number, what: string, total?: number) => void;

/**
 * The one object every command answers with; warnings appear once each.
 * `wall_ms` is added by the caller that owns a clock, see withWallTime.
 */
export function makeEnvelope<Results>(
  command: string,
  cosmology: CosmologyParameters,
  results: Results,
  provenance: Provenance,
  solver: SolverReport,
  warnings: readonly string[],
): Envelope<Results> {
  return { command, version: VERSION, cosmology, results, provenance, solver, warnings: [...new Set(warnings)] };
}

/** The same answer with the time it took [ms]. */
export function withWallTime<Results>(envelope: Envelope<Results>, wallMs: number): Envelope<Results> {
  return { ...envelope, solver: { ...envelope.solver, wall_ms: Math.round(wallMs * 1000) / 1000 } };
}
