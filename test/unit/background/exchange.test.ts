/** Collision integrals of neutrinos with e+-: independent values, limits, convergence, and the generated table. */
import { expect, test } from "vitest";
import { EXCHANGE_TABLE } from "../../../src/background/exchange.generated.ts";
import {
  EXCHANGE_NODES,
  type ExchangeIntegrals,
  exchangeIntegrals,
  exchangeRows,
  interpolatedExchange,
} from "../../../src/background/exchange.ts";
import { InputError } from "../../../src/numerics/check.ts";
import { gaussLegendre, integrateGauss } from "../../../src/numerics/quadrature.ts";

const KEYS = ["A1", "A2", "S1", "S2"] as const;
const relative = (value: number, reference: number) => Math.abs(value / reference - 1);

// Independent quadratures made for this project; printed to 7 digits, made with 22 Gauss points each (1e-6).
test.each<[number, ExchangeIntegrals]>([
  [0, { A1: 2.036985e3, A2: 0, S1: 3.71277e2, S2: 0 }],
  [1, { A1: 1.912388e3, A2: 2.404164e2, S1: 3.235679e2, S2: 8.486471 }],
  [4, { A1: 5.090579e2, A2: 5.009609e2, S1: 6.790119e1, S2: 1.27716e1 }],
])("m_e/T = %d: A1, A2, S1, S2 agree with an independent quadrature", (x, expected) => {
  const found = exchangeIntegrals(x);
  for (const key of KEYS)
    if (expected[key] === 0) expect(found[key]).toBe(0);
    else expect(relative(found[key], expected[key])).toBeLessThan(3e-6);
});

test("massless limits: Maxwell-Boltzmann 2304 and 448 times the Fermi-Dirac factors 0.8841 and 0.8287", () => {
  // Escudero 2020, JCAP 05, 048 (arXiv:2001.04466): f_a = 0.884, f_s = 0.829 for Fermi-Dirac statistics
  const { A1, S1 } = exchangeIntegrals(0);
  expect(A1 / 2304).toBeCloseTo(0.8841, 4);
  expect(S1 / 448).toBeCloseTo(0.8287, 4);
});

test("cold e+-: annihilation tends to the Maxwell-Boltzmann integral over invariant cross-sections", () => {
  // f1 f2 (1 - f3)(1 - f4) -> e^-(E1+E2); (p1.p4)^2 averaged over angles = (s^2/16)(1 + beta^2/3), two-body phase space
  // beta/(8 pi) and 1/(8 pi): A1 = 256 pi^5 4 pi/((2 pi)^4 64 pi^2) int dq0 dq q^2 q0^2 e^-q0 beta <...>
  const x = 20;
  const prefactor = (256 * Math.PI ** 5 * 4 * Math.PI) / ((2 * Math.PI) ** 4 * 64 * Math.PI ** 2);
  const integral = (mean: (s: number, beta2: number) => number) =>
    prefactor *
    integrateGauss(
      (r) => {
        const q0 = 2 * x + r;
        const Q = Math.sqrt(r * (r + 4 * x));
        const overMomentum = integrateGauss(
          (a) => {
            const s = 4 * x * x + (Q * Math.cos(a)) ** 2;
            const beta2 = 1 - (4 * x * x) / s;
            return (Q * Math.sin(a)) ** 2 * Q * Math.cos(a) * Math.sqrt(beta2) * mean(s, beta2);
          },
          0,
          Math.PI / 2,
          60,
        );
        return q0 * q0 * Math.exp(-q0) * overMomentum;
      },
      0,
      60,
      80,
    );
  const { A1, A2 } = exchangeIntegrals(x);
  expect(
    relative(
      A1,
      integral((s, beta2) => ((s * s) / 16) * (1 + beta2 / 3)),
    ),
  ).toBeLessThan(1e-6);
  expect(
    relative(
      A2,
      integral((s) => (x * x * s) / 2),
    ),
  ).toBeLessThan(1e-6);
});

test("scattering in the variables of the total momentum p1 + p2 gives the same S1 and S2", () => {
  // P = p1 + p2 = (q0, q) instead of p1 - p3: E1 and E3 run over (q0 +- q) e/sqrt(s), e = (s - m^2)/(2 sqrt(s))
  const n = 36;
  const { nodes, weights } = gaussLegendre(n);
  for (const x of [0.3, 2, 6]) {
    let S1 = 0;
    let S2 = 0;
    for (let i = 0; i < n; i++) {
      const z = (Math.sqrt(60) / 2) * (1 + nodes[i]);
      const q0 = x + z * z;
      const Q = Math.sqrt(q0 * q0 - x * x);
      for (let j = 0; j < n; j++) {
        const alpha = (Math.PI / 4) * (1 + nodes[j]);
        const q = Q * Math.sin(alpha);
        const s = x * x + (Q * Math.cos(alpha)) ** 2;
        const invariant = (s - x * x) / 2; // p1.p2
        const e = invariant / Math.sqrt(s) / Math.sqrt(s);
        const particles = Array.from(nodes, (y) => ({ E: e * (q0 + q * y), pz: e * (q + q0 * y) }));
        let sum1 = 0;
        let sum2 = 0;
        for (let k = 0; k < n; k++) {
          const one = particles[k];
          const f12 = weights[k] / ((1 + Math.exp(-one.E)) * (1 + Math.exp(one.E - q0)));
          for (let l = 0; l < n; l++) {
            const three = particles[l];
            const f34 = weights[l] / ((1 + Math.exp(-three.E)) * (1 + Math.exp(three.E - q0)));
            const a = one.E * three.E - one.pz * three.pz; // p1.p3 = a - b cos(phi)
            const b2 = (one.E ** 2 - one.pz ** 2) * (three.E ** 2 - three.pz ** 2);
            const change = (three.E - one.E) ** 2 * f12 * f34;
            sum1 += change * (invariant ** 2 + (invariant - a) ** 2 + b2 / 2);
            sum2 += change * a;
          }
        }
        const measure = (Math.sqrt(60) / 2) * weights[i] * 2 * z * (Math.PI / 4) * weights[j] * Q * Math.cos(alpha);
        const weight = measure * (q * e) ** 2 * Math.exp(-q0);
        S1 += weight * sum1;
        S2 += weight * x * x * sum2;
      }
    }
    const found = exchangeIntegrals(x);
    expect(relative(found.S1, S1)).toBeLessThan(1e-6);
    expect(relative(found.S2, S2)).toBeLessThan(1e-6);
  }
});

test("doubling the points moves no integral by more than 1e-10", () => {
  for (const x of [0.001, 0.02, 0.5, 2, 8, 25, 60]) {
    const found = exchangeIntegrals(x);
    const finer = exchangeIntegrals(x, { outer: 80, angle: 80, inner: 64 });
    for (const key of KEYS) expect(relative(found[key], finer[key])).toBeLessThan(1e-10);
  }
});

test("the generated table is what the integrals give at its nodes", () => {
  expect(EXCHANGE_TABLE.map((row) => row[0])).toEqual(EXCHANGE_NODES.map((x) => Number(x.toPrecision(12))));
  for (const i of [0, 1, 9, 20, 33, 44]) {
    const [row] = exchangeRows([EXCHANGE_NODES[i]]);
    for (let c = 0; c < 5; c++) expect(Math.abs(EXCHANGE_TABLE[i][c] - row[c])).toBeLessThan(1e-9);
  }
});

test("between the nodes the table follows the integrals to 5e-6", () => {
  for (let i = 0; i + 1 < EXCHANGE_NODES.length; i += 3) {
    const x = (EXCHANGE_NODES[i] + EXCHANGE_NODES[i + 1]) / 2;
    const direct = exchangeIntegrals(x);
    const table = interpolatedExchange(x);
    for (const key of KEYS) expect(relative(table[key], direct[key])).toBeLessThan(5e-6);
  }
});

test("beyond the table the integrals go on falling", () => {
  const { A1, S1 } = interpolatedExchange(25);
  expect(relative(interpolatedExchange(30).A1, A1 * Math.exp(-10))).toBeLessThan(1e-12);
  expect(relative(interpolatedExchange(30).S1, S1 * Math.exp(-5))).toBeLessThan(1e-12);
});

test("m_e/T out of range is refused", () => {
  for (const x of [-1, Number.NaN, 61]) expect(() => exchangeIntegrals(x)).toThrow(InputError);
  for (const x of [-1, Number.NaN]) expect(() => interpolatedExchange(x)).toThrow(/m_e\/T = .*: accepted are 0 to/);
});
