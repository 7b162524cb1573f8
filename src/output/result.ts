/** The shape of every answer: the JSON object, and what `abundances` and `history` put into it. */
import type { AbundanceRun, Estimate } from "../model/prepare.ts";
import type { RateTable } from "../nuclear/parse-rate-file.ts";
import type { SolverCounts } from "../numerics/ode-stiff.ts";
import type { Table } from "../numerics/table.ts";
import type { CosmologyParameters } from "../parameters/cosmology.ts";

export type { Estimate };

/** One rate that entered the result. */
export interface RateUsed {
  /** Reaction id, e.g. `d-p_gamma-he3`. */
  readonly reaction: string;
  /** Evaluation used: firstauthorYEAR, or `reaclib`. */
  readonly evaluation: string;
  readonly citation: string;
  /** Where the size of its uncertainty comes from; anything but `published` is marked in every output. */
  readonly uncertaintyBasis: RateTable["uncertaintyBasis"];
  /** Factor by which the user scaled the rate; left out when 1. */
  readonly scale?: number;
}

/** One constant or fit coefficient of recombination. */
export interface RecombinationConstantUsed {
  readonly name: string;
  readonly meaning: string;
  readonly value: number;
  /** One standard deviation, where one is stated. */
  readonly uncertainty?: number;
  readonly unit: string;
  readonly source: string;
  /** Change of z_star and z_drag, and relative change of x_e by redshift, per +1 % (default cosmology). */
  readonly effectPerPercent: {
    readonly zStar: number;
    readonly zDrag: number;
    readonly xe: Readonly<Record<string, number>>;
  };
}

/** Where the numbers come from. */
export interface Provenance {
  readonly network: string;
  readonly rates: readonly RateUsed[];
  /** Names of the corrections that were switched on. */
  readonly corrections: readonly string[];
  /** Edition of the constants, e.g. "CODATA 2022, PDG 2024". */
  readonly constants: string;
  /** Seed of the Monte Carlo, when samples were drawn. */
  readonly seed?: number;
  /** Constants and fits of recombination, in a recombination answer. */
  readonly recombination?: readonly RecombinationConstantUsed[];
}

/** Cost of the integration. `wall_ms` is the one value that differs from run to run. */
export interface SolverReport extends Readonly<SolverCounts> {
  readonly tolerance: number;
  /** Steps of the central run: a stored sequence checked for this range, or chosen by their error. */
  readonly stepping?: "stored" | "adaptive";
  readonly wall_ms?: number;
}

/** The answer to one request, the same in every command. */
export interface Envelope<Results = unknown> {
  readonly command: string;
  readonly version: string;
  readonly cosmology: CosmologyParameters;
  readonly results: Results;
  readonly provenance: Provenance;
  readonly solver: SolverReport;
  readonly warnings: readonly string[];
}

/** `results` of the command `abundances`. */
export type AbundanceResults = Omit<AbundanceRun, "solver" | "warnings">;

/** Landmarks of the first hours. */
export interface Milestones {
  readonly tAt1MeV_s: number;
  /** k_B T where the n -> p rate equals the expansion rate [MeV]. */
  readonly freezeOutTemperature_MeV: number;
  readonly neutronToProtonAtFreezeOut: number;
  readonly tDeuteriumPeak_s: number;
  readonly T9DeuteriumPeak: number;
  readonly tAt1e9K_s: number;
  /** T_gamma/T_nue at the end. */
  readonly photonToNeutrinoTemperature: number;
}

/** `results` of the command `history`. */
export interface HistoryResults {
  readonly table: Table;
  readonly milestones: Milestones;
  readonly nEffComputed?: number;
}
