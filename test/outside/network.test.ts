/** SciPy integrates the exported network from masses, spins, forward rates and the thermal history alone. */
import { describe, expect, test } from "vitest";
import { runNetwork } from "../../src/nucleosynthesis/run.ts";
import { exportNetwork } from "./export-network.ts";
import { runPython } from "./python.ts";

describe("an independent integration agrees to 1e-5 in every abundance above 1e-20", () => {
  for (const [network, method, eta10] of [
    ["twelve", "Radau", 6.1],
    ["twelve", "BDF", 2],
    ["standard", "BDF", 6.1],
    ["standard", "Radau", 12],
  ] as const)
    test(`${network}, eta10 = ${eta10}: ${method}`, () => {
      const { context, inputs, input } = exportNetwork(network, eta10, 878.4);
      const ours = runNetwork(context, inputs).Y;
      const theirs = runPython<{ Y: Record<string, number> }>("integrate_network.py", ["scipy"], {
        ...input,
        method,
        rtol: 1e-8,
        atol: 1e-26,
      }).Y;
      context.data.nuclides.forEach(({ id }, i) => {
        if (ours[i] < 1e-20) return;
        expect(Math.abs(theirs[id] / ours[i] - 1), `${id}: ours ${ours[i]}, SciPy ${theirs[id]}`).toBeLessThan(1e-5);
      });
    });
});
