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
