/** Benchmarks of recombination: history, line of sight, table, sensitivities; counts are printed, answers checked. */
import { bench, describe } from "vitest";
import { computeLineOfSight } from "../../src/lineofsight/summary.ts";
import { adaptiveTable } from "../../src/lineofsight/table.ts";
import { recombinationSensitivities } from "../../src/model/recombination-budget.ts";
import { computeIonisationHistory } from "../../src/recombination/history.ts";
import { STANDARD } from "../unit/recombination/cosmologies.ts";

function check(zStar: number): void {
  if (!(zStar > 1080 && zStar < 1100)) throw new Error(`benchmark computed nonsense: z_star = ${zStar}`);
}

let k = 0;
/** A new omega_b each time: nothing can be remembered. */
const next = (tolerance?: number) => ({ ...STANDARD, omegaB: 0.0222 + 1e-7 * (k++ % 4000), tolerance });

for (const tolerance of [1e-4, 1e-5, 1e-6, 1e-7, 1e-8]) {
  const { counts } = computeIonisationHistory({ ...STANDARD, tolerance });
  describe(`tolerance ${tolerance}: ${counts.steps} steps, ${counts.rejected} rejected, ${counts.rhs} rhs`, () => {
    bench("history and line of sight", () => {
      const inputs = next(tolerance);
      check(computeLineOfSight(inputs, computeIonisationHistory(inputs)).summary.zStar);
    });
    bench("history alone", () => {
      if (!(computeIonisationHistory(next(tolerance)).xeAt(7) > 0)) throw new Error("benchmark: no electrons");
    });
  });
}

describe("what is built on it", () => {
  bench("adaptive table", () => {
    const inputs = next();
    const { sight, summary } = computeLineOfSight(inputs, computeIonisationHistory(inputs));
    check(summary.zStar);
    if (adaptiveTable(sight).rows.length < 100) throw new Error("benchmark: short table");
  });
  bench("all sensitivities of z_star, z_drag, r_drag", () => {
    if (!(recombinationSensitivities(next()).zStar.tCmb < 0)) throw new Error("benchmark: wrong sign");
  });
});
