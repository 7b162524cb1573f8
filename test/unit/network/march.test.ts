/** The written-out step equals the general stepper, and its coefficients come at the right points. */
import { expect, test } from "vitest";
import { compileNetwork } from "../../../src/network/compile.ts";
import { generateKernels, loopKernels } from "../../../src/network/generate.ts";
import { createMarch, STAGE_POINTS } from "../../../src/network/march.ts";
import { StiffStepper, type StiffSystem } from "../../../src/numerics/ode-stiff.ts";

test("one written-out step equals one step of the general stepper on a non-autonomous network", () => {
  const network = compileNetwork(
    ["n", "p", "d"],
    [
      { id: "n_p", reactants: ["n"], products: ["p"] },
      { id: "p-n_gamma-d", reactants: ["p", "n"], products: ["d"] },
    ],
  );
  const coefficients = (s: number, out: Float64Array) => {
    out.set([2 + Math.sin(s), 1 + s * s, 50 * Math.exp(s), 3 * Math.exp(-s), 0]);
    return out;
  };
  const slopes = (s: number, out: Float64Array) => {
    out.set([Math.cos(s), 2 * s, 50 * Math.exp(s), -3 * Math.exp(-s), 0]);
    return out;
  };
  const row = () => new Float64Array(5);
  const system: StiffSystem = {
    n: 3,
    rhs: (s, y, out) => network.derivatives(coefficients(s, row()), y, out),
    timeDerivative: (s, y, out) => network.derivatives(slopes(s, row()), y, out),
    jacobian: (s, y, out) => network.jacobian(coefficients(s, row()), y, out),
  };
  const y = Float64Array.of(0.3, 0.5, 0.1);
  const [s, h] = [0.2, 0.05];
  const stepper = new StiffStepper(system, s, y, 10, { rtol: 1e9, atol: 1, firstStep: h });
  stepper.step();
  expect(stepper.t).toBeCloseTo(s + h, 14);
  const kernels = [loopKernels(network), generateKernels(network)!];
  for (const kernel of kernels) {
    const march = createMarch(kernel, 3, network.elimination.slots);
    const at = (i: number) => coefficients(s + STAGE_POINTS[i] * h, row());
    march.step(
      y,
      h,
      { start: at(0), slope: slopes(s, row()), second: at(1), third: at(2), fourth: at(3), end: at(4) },
      1e-4,
      new Float64Array(3).fill(1e-10),
    );
    for (let i = 0; i < 3; i++) expect(Math.abs(march.next[i] - stepper.y[i])).toBeLessThan(1e-15);
  }
});

test("a value that is not finite counts as an infinite error", () => {
  const network = compileNetwork(["n", "p"], [{ id: "n_p", reactants: ["n"], products: ["p"] }]);
  const march = createMarch(loopKernels(network), 2, network.elimination.slots);
  const rows = () => Float64Array.of(1, 0, 0);
  const bad = Float64Array.of(Number.NaN, 0, 0);
  const error = march.step(
    Float64Array.of(1, 0),
    0.1,
    { start: rows(), slope: rows(), second: bad, third: rows(), fourth: rows(), end: rows() },
    1e-4,
    Float64Array.of(1e-9, 1e-9),
  );
  expect(error).toBe(Number.POSITIVE_INFINITY);
});
