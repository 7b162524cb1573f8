/** Identities of compiled networks: conservation, Jacobian against differences, sparse against dense elimination. */
import { describe, expect, test } from "vitest";
import { compileNetwork } from "../../../src/network/compile.ts";
import { factorInPlace, solveInPlace } from "../../../src/network/elimination.ts";
import { luFactor, luSolve } from "../../../src/numerics/linear.ts";
import { seededUniform } from "../../../src/numerics/random.ts";

const NUCLIDES = ["n", "p", "d", "t", "he3", "he4", "li7", "be7"];
const A = [1, 1, 2, 3, 3, 4, 7, 7];
const Z = [0, 1, 1, 1, 2, 2, 3, 4];
const REACTIONS = [
  { id: "p-n_gamma-d", reactants: ["p", "n"], products: ["d"] },
  { id: "d-d_n-he3", reactants: ["d", "d"], products: ["n", "he3"] },
  { id: "t-d_n-he4", reactants: ["t", "d"], products: ["n", "he4"] },
  { id: "li7-p_he4-he4", reactants: ["li7", "p"], products: ["he4", "he4"] },
  { id: "he3-he4_gamma-be7", reactants: ["he3", "he4"], products: ["be7"] },
  { id: "be7-n_p-li7", reactants: ["be7", "n"], products: ["p", "li7"] },
  { id: "he3-he3_p-p-he4", reactants: ["he3", "he3"], products: ["p", "p", "he4"] },
  { id: "li7-t_n-n-he4-he4", reactants: ["li7", "t"], products: ["n", "n", "he4", "he4"] },
];
const network = compileNetwork(NUCLIDES, REACTIONS);
const SEED = 20260101;

function randomState(random: () => number) {
  return {
    c: Float64Array.from({ length: network.fluxes }, () => 10 ** (10 * random() - 5)),
    Y: Float64Array.from(NUCLIDES, () => 10 ** (-30 * random())),
  };
}

describe("compiled network", () => {
  test("conserves baryon number and charge, whatever the abundances", () => {
    const random = seededUniform(SEED);
    const d = new Float64Array(NUCLIDES.length);
    for (let trial = 0; trial < 500; trial++) {
      const { c, Y } = randomState(random);
      network.derivatives(c, Y, d);
      const scale = Math.max(...d.map(Math.abs)) * 10;
      for (const [name, q] of [
        ["A", A],
        ["Z", Z],
      ] as const) {
        const drift = q.reduce((sum, x, i) => sum + x * d[i], 0);
        expect(Math.abs(drift), `${name}, seed ${SEED}, trial ${trial}`).toBeLessThanOrEqual(1e-14 * scale);
      }
    }
  });

  test("a reaction to more than three products has no reverse flux, whatever its coefficient", () => {
    const c = new Float64Array(network.fluxes);
    c[2 * 7 + 1] = 1e30;
    const d = new Float64Array(NUCLIDES.length);
    network.derivatives(c, new Float64Array(NUCLIDES.length).fill(0.1), d);
    expect([...d]).toEqual(NUCLIDES.map(() => 0));
    expect(network.reactions.filter((r) => !r.reversible).map((r) => r.id)).toEqual(["li7-t_n-n-he4-he4"]);
  });

  test("analytic Jacobian equals differences of the polynomial right-hand side", () => {
    const random = seededUniform(SEED + 1);
    const n = NUCLIDES.length;
    const J = new Float64Array(n * n);
    const up = new Float64Array(n);
    const down = new Float64Array(n);
    for (let trial = 0; trial < 50; trial++) {
      const c = Float64Array.from({ length: network.fluxes }, () => random());
      const Y = Float64Array.from(NUCLIDES, () => 0.1 + random());
      network.jacobian(c, Y, J);
      for (let j = 0; j < n; j++) {
        const h = 1e-4;
        const plus = Y.slice();
        const minus = Y.slice();
        plus[j] += h;
        minus[j] -= h;
        network.derivatives(c, plus, up);
        network.derivatives(c, minus, down);
        // Fluxes are at most cubic in one abundance only through three identical particles: absent here, so exact.
        for (let i = 0; i < n; i++) expect((up[i] - down[i]) / (2 * h)).toBeCloseTo(J[i * n + j], 9);
      }
    }
  });

  test("sparse elimination without pivoting solves what dense elimination with pivoting solves", () => {
    const random = seededUniform(SEED + 2);
    const n = NUCLIDES.length;
    const { elimination } = network;
    const values = new Float64Array(elimination.slots);
    const dense = new Float64Array(n * n);
    const pivots = new Int32Array(n);
    for (let trial = 0; trial < 100; trial++) {
      const { c, Y } = randomState(random);
      const shift = 10 ** (8 * random() - 2);
      network.assemble(c, Y, shift, values);
      network.jacobian(c, Y, dense);
      for (let i = 0; i < n * n; i++) dense[i] = -dense[i];
      for (let i = 0; i < n; i++) dense[i * n + i] += shift;
      const b = Float64Array.from(NUCLIDES, () => random() - 0.5);
      const x = b.slice();
      expect(factorInPlace(elimination, values)).toBe(true);
      solveInPlace(elimination, values, x);
      expect(luFactor(dense, n, pivots)).toBe(true);
      luSolve(dense, n, pivots, b);
      const size = Math.max(...b.map(Math.abs));
      for (let i = 0; i < n; i++)
        expect(Math.abs(x[i] - b[i]), `seed ${SEED + 2}, trial ${trial}`).toBeLessThan(1e-9 * size);
    }
  });

  test("a vanishing pivot is reported, not divided by", () => {
    const values = new Float64Array(network.elimination.slots);
    expect(factorInPlace(network.elimination, values)).toBe(false);
    values.fill(Number.NaN);
    expect(factorInPlace(network.elimination, values)).toBe(false);
  });

  test("unknown nuclides and four reactants are refused", () => {
    expect(() => compileNetwork(["n"], [{ id: "n_p", reactants: ["n"], products: ["p"] }])).toThrow(/nuclide p/);
    expect(() => compileNetwork(["n"], [{ id: "x", reactants: ["n", "n", "n", "n"], products: [] }])).toThrow(
      /three reactants/,
    );
  });
});
