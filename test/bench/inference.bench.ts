/** Benchmarks of error budget and inference, theory included; answers checked. */
import { bench, describe } from "vitest";
import { loadRates } from "../../src/node/load-rates.ts";
import { computeBudget } from "../../src/requests/budget.ts";
import { computeInfer } from "../../src/requests/infer.ts";

const library = loadRates();
const once = { iterations: 2, warmupIterations: 1, time: 0, warmupTime: 0 } as const;

describe("error budget, one thread", () => {
  for (const network of ["twelve", "standard"])
    bench(
      network,
      async () => {
        const { results } = await computeBudget({ network }, library);
        if (!(Math.abs(results.sensitivities.dToH.omegaB + 1.65) < 0.1)) throw new Error("benchmark computed nonsense");
      },
      once,
    );
});

describe("inference, one thread", () => {
  for (const free of ["omegaB", "omegaB,nEff"])
    bench(
      `posterior of ${free}, standard network`,
      async () => {
        const { results } = await computeInfer({ network: "standard", free }, library);
        if (!(Math.abs(results.parameters.omegaB.mean - 0.022) < 0.001)) throw new Error("benchmark computed nonsense");
      },
      once,
    );
});
