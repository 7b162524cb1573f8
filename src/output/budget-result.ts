/** What the command `budget` puts into `results`. */
import type { ErrorBudget } from "../model/error-budget.ts";

/** `results` of the command `budget`. */
export type BudgetResults = Omit<ErrorBudget, "counts">;
