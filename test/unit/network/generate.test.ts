/** Generated straight-line kernels give what the loops over index arrays give, bit for bit. */
import { expect, test } from "vitest";
import { compileNetwork } from "../../../src/network/compile.ts";
import { generateKernels, loopKernels } from "../../../src/network/generate.ts";
import { seededUniform } from "../../../src/numerics/random.ts";

const NUCLIDES = ["n", "p", "d", "t", "he3", "he4", "li7"];
const SEED = 7;

test("straight-line kernels equal loop kernels to the last bit", () => {
  const network = compileNetwork(NUCLIDES, [
    { id: "n_p", reactants: ["n"], products: ["p"] },
    { id: "p-n_gamma-d", reactants: ["p", "n"], products: ["d"] },
    { id: "d-d_n-he3", reactants: ["d", "d"], products: ["n", "he3"] },
    { id: "he4-he4-he4_x", reactants: ["he4", "he4", "he4"], products: ["li7", "he4", "p"] },
    { id: "he3-he3_p-p-he4", reactants: ["he3", "he3"], products: ["p", "p", "he4"] },
    { id: "li7-t_n-n-he4-he4", reactants: ["li7", "t"], products: ["n", "n", "he4", "he4"] },
  ]);
  const loops = loopKernels(network);
  const code = generateKernels(network);
  expect(code).not.toBeNull();
  if (!code) return;
  const random = seededUniform(SEED);
  const n = network.n;
  for (let trial = 0; trial < 200; trial++) {
    const c = Float64Array.from({ length: network.fluxes }, () => 10 ** (6 * random() - 3));
    const Y = Float64Array.from(NUCLIDES, () => 10 ** (-8 * random()));
    const results = [loops, code].map((kernels) => {
      const d = new Float64Array(n);
      kernels.derivatives(c, Y, d);
      const values = new Float64Array(network.elimination.slots);
      kernels.assemble(c, Y, 50, values);
      const assembled = values.slice();
      const ok = kernels.factor(values);
      const b = d.slice();
      kernels.solve(values, b);
      return { d, assembled, ok, b };
    });
    for (const key of ["d", "assembled", "b"] as const)
      expect([...results[1][key]], `${key}, seed ${SEED}, trial ${trial}`).toEqual([...results[0][key]]);
    expect(results.map((r) => r.ok)).toEqual([true, true]);
  }
});

test("generated elimination reports a vanishing pivot", () => {
  const network = compileNetwork(["n", "p"], [{ id: "n_p", reactants: ["n"], products: ["p"] }]);
  const code = generateKernels(network);
  expect(code?.factor(new Float64Array(network.elimination.slots))).toBe(false);
});
