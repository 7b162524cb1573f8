/** What the commands `rates list`, `show`, `compare`, `check` and `make` put into `results`. */
import type { Finding } from "../nuclear/check-library.ts";
import type { RateTable } from "../nuclear/parse-rate-file.ts";
import type { Table } from "../numerics/table.ts";

/** One line of a list. */
export interface ListedRate {
  readonly reaction: string;
  readonly evaluation: string;
  readonly networks: readonly string[];
  readonly usedBy: readonly string[];
  /** Typical f_u: exp of the mean of ln f_u over ln T9 from 0.1 to 1. */
  readonly factorUncertainty: number;
  readonly uncertaintyBasis: RateTable["uncertaintyBasis"];
  readonly basis?: RateTable["basis"];
  readonly kind: RateTable["kind"];
  readonly validT9: readonly [number, number];
  readonly qValue_keV: number;
  readonly citation: string;
}

/** `results` of `rates list`. */
export interface RatesListResults {
  readonly action: "list";
  readonly reactions: number;
  readonly evaluations: number;
  readonly rates: readonly ListedRate[];
  readonly table: Table;
}

/** ln(reverse/forward) = lnConstant + power ln T9 - qOverK_GK/T9. */
export interface DetailedBalance {
  readonly lnConstant: number;
  readonly power: number;
  readonly qOverK_GK: number;
}

/** `results` of `rates show`. */
export interface RatesShowResults {
  readonly action: "show";
  readonly reaction: string;
  readonly equation: string;
  readonly evaluation: string;
  /** All evaluations of the reaction, this one included. */
  readonly evaluations: readonly string[];
  readonly networks: readonly string[];
  readonly usedBy: readonly string[];
  readonly file: string;
  readonly kind: RateTable["kind"];
  readonly citation: string;
  readonly doi?: string;
  readonly origin: string;
  readonly basis?: RateTable["basis"];
  readonly uncertaintyBasis: RateTable["uncertaintyBasis"];
  readonly factorUncertainty: number;
  /** As the file states it. */
  readonly qValue_keV: number;
  /** From the mass table, with its standard deviation. */
  readonly qValueFromMasses_keV: number;
  readonly qValueSigma_keV: number;
  /** Where a table has rows [GK]. */
  readonly tableT9?: readonly [number, number];
  readonly tableRows?: number;
  /** What the source claims [GK]. */
  readonly validT9: readonly [number, number];
  readonly note?: string;
  readonly entered?: string;
  /** Coefficients of a fit, one row a term. */
  readonly terms?: readonly (readonly number[])[];
  readonly halfLife_s?: number;
  /** Left out for decays and for more than three products. */
  readonly detailedBalance?: DetailedBalance;
  readonly table: Table;
}

/** `results` of `rates check`. */
export interface RatesCheckResults {
  readonly action: "check";
  readonly folder: string;
  readonly files: number;
  readonly networks: number;
  readonly errors: number;
  readonly warnings: number;
  readonly notes: number;
  readonly findings: readonly Finding[];
  readonly table: Table;
}

/** `results` of `rates make`. */
export interface RatesMakeResults {
  readonly action: "make";
  readonly reaction: string;
  readonly evaluation: string;
  /** Where a library keeps it: REACTION/EVALUATION.ecsv. */
  readonly path: string;
  /** The rate file. */
  readonly text: string;
  readonly table: Table;
}

/** One of the evaluations compared. */
export interface ComparedEvaluation {
  readonly evaluation: string;
  readonly citation: string;
  readonly uncertaintyBasis: RateTable["uncertaintyBasis"];
  readonly factorUncertainty: number;
  readonly validT9: readonly [number, number];
}

/** How one abundance depends on the rate compared. */
export interface ComparedAbundance {
  /** With the reference. */
  readonly value: number;
  /** d ln X/d ln rate at all temperatures. */
  readonly sensitivity: number;
  /** T9 that holds the middle 90 per cent of the sensitivity [GK]; left out where there is none. */
  readonly range?: readonly [number, number];
  /** d ln X for one standard deviation of the reference's own uncertainty. */
  readonly standardDeviation: number;
  /** d ln X/(d ln rate d ln T9) at `sensitivityT9`. */
  readonly density: readonly number[];
}

/** An abundance with another evaluation. */
export interface SwappedAbundance {
  readonly value: number;
  /** value/reference - 1 by a run with the other evaluation. */
  readonly change: number;
  /** The same to first order: exp of the integral of the sensitivity times ln(rate ratio), less 1. */
  readonly firstOrder: number;
}

/** `results` of `rates compare`. */
export interface RatesCompareResults {
  readonly action: "compare";
  readonly reaction: string;
  /** Evaluation that the others are compared with. */
  readonly reference: string;
  readonly evaluations: readonly ComparedEvaluation[];
  /** T9, then `ratio_NAME` and `f_u_NAME` of each other evaluation, the reference's f_u among them. */
  readonly table: Table;
  /** Left out where no network holds the reaction. */
  readonly abundances?: Readonly<Record<string, ComparedAbundance>>;
  readonly sensitivityT9?: readonly number[];
  /** swaps[evaluation][abundance] */
  readonly swaps?: Readonly<Record<string, Readonly<Record<string, SwappedAbundance>>>>;
}
