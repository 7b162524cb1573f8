/** What the command `budget` puts into `results`. */
import type { Observation } from "../inference/observations.ts";
import type { ErrorBudget } from "../model/error-budget.ts";

/** `results` of the command `budget`. */
export interface BudgetResults extends Omit<ErrorBudget, "counts" | "warnings"> {
  /** The recommended measurements, to set the errors beside. */
  readonly observed: readonly Observation[];
}
