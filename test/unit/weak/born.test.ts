/** Born rates: closed forms, limits, detailed balance, and the textbook three-channel integrals. */
import { expect, test } from "vitest";
import { integrateAdaptive } from "../../../src/numerics/quadrature.ts";
import { bornPhaseSpace } from "../../../src/weak/born.ts";
import { BORN, WEAK_INPUTS } from "../../../src/weak/inputs.ts";
import { decayPhaseSpace, weakKernel, weakRatesAt } from "../../../src/weak/rates.ts";

const { Q, electronMass: m } = WEAK_INPUTS;
const relative = (a: number, b: number) => Math.abs(a / b - 1);
const fermi = (x: number) => 1 / (Math.exp(x) + 1);

/**
 * The six channels as textbooks write them, each with positive energies (Weinberg 1972, sec. 15.7; Kolb & Turner 1990,
 * sec. 4.1), by adaptive quadrature in u = sqrt(E - m).
 */
function textbookRates(T: number, Tnu: number, xi: number) {
  const nu = (k: number) => fermi(k / Tnu - xi);
  const nubar = (k: number) => fermi(k / Tnu + xi);
  const electron = (E: number) => fermi(E / T);
  const over = (f: (E: number) => number, from: number, to: number) => {
    const weight = (u: number) => {
      const E = m + u * u;
      return Math.sqrt(E * E - m * m) * E * f(E) * 2 * u;
    };
    return integrateAdaptive(weight, Math.sqrt(from - m), Math.sqrt(to - m), 1e-12).value;
  };
  const top = Q + m + 60 * Math.max(T, Tnu);
  const nToP =
    over((E) => (Q - E) ** 2 * (1 - electron(E)) * (1 - nubar(Q - E)), m, Q) +
    over((E) => (E - Q) ** 2 * nu(E - Q) * (1 - electron(E)), Q, top) +
    over((E) => (E + Q) ** 2 * electron(E) * (1 - nubar(E + Q)), m, top);
  const pToN =
    over((E) => (Q - E) ** 2 * electron(E) * nubar(Q - E), m, Q) +
    over((E) => (E - Q) ** 2 * electron(E) * (1 - nu(E - Q)), Q, top) +
    over((E) => (E + Q) ** 2 * nubar(E + Q) * (1 - electron(E)), m, top);
  const norm = bornPhaseSpace(Q / m) * m ** 5;
  return { nToP: nToP / norm, pToN: pToN / norm };
}

test("decay phase space equals its closed form", () => {
  expect(relative(decayPhaseSpace(BORN), bornPhaseSpace(Q / m))).toBeLessThan(1e-9);
});

test("the closed form equals the integral of e sqrt(e^2 - 1) (q - e)^2 at other end points", () => {
  for (const q of [1.5, 2, 4, 10]) {
    const { value } = integrateAdaptive(
      (u) => 2 * u * u * Math.sqrt(u * u + 2) * (1 + u * u) * (q - 1 - u * u) ** 2,
      0,
      Math.sqrt(q - 1),
      1e-12,
    );
    expect(relative(bornPhaseSpace(q), value), `q = ${q}`).toBeLessThan(1e-10);
  }
});

test.each([
  [10, 1, 0],
  [2, 1, 0.3],
  [0.7, 0.99, -0.2],
  [0.2, 0.89, 0],
  [0.05, 0.715, 1.5],
  [0.05, 1.2, -1],
])("three textbook channels each way at T = %f MeV, T_nu/T = %f, xi = %f", (T, ratio, xi) => {
  const expected = textbookRates(T, T * ratio, xi);
  const rates = weakRatesAt(T, T * ratio, xi, BORN);
  expect(relative(rates.nToP, expected.nToP)).toBeLessThan(1e-8);
  expect(relative(rates.pToN, expected.pToN)).toBeLessThan(1e-8);
});

test("detailed balance: Gamma_pn/Gamma_np = exp(-Q/T - xi) when T_nu = T, with any factor common to both directions", () => {
  for (const options of [BORN, { ...BORN, coulomb: true }, { ...BORN, coulomb: true, radiative: true }])
    for (const T of [10, 1, 0.3, 0.05, 0.003])
      for (const xi of [-1, 0, 0.05, 2]) {
        const { lnNToP, lnPToN } = weakKernel(options).logRates(T, T, xi);
        expect(Math.abs(lnPToN - lnNToP + Q / T + xi), `T = ${T}, xi = ${xi}`).toBeLessThan(1e-12 * (1 + Q / T));
      }
});

test("detailed balance fails when the neutrinos are colder, in favour of neutrons leaving", () => {
  const { nToP, pToN } = weakRatesAt(1, 1 / 1.005966, 0, BORN);
  expect(pToN / nToP).toBeLessThan(Math.exp(-Q) * (1 - 1e-3));
});

test("free decay as T falls: Gamma_np tau_n - 1 vanishes faster than (T/Q)^3", () => {
  for (const T of [0.02, 0.005, 1e-3, 1e-4]) {
    const { nToP } = weakRatesAt(T, 0.7138 * T, 0, BORN);
    expect(nToP - 1, `T = ${T}`).toBeGreaterThanOrEqual(-1e-9);
    // n nu -> p e- alone: int k^2 f dk = 1.803 T_nu^3 times p E at threshold k = 0; the integral of decay is 0.057 MeV^5
    expect(nToP - 1, `T = ${T}`).toBeLessThan(1e-9 + 100 * T ** 3);
  }
});

test("massless limit: sqrt(Gamma_np Gamma_pn) -> (7 pi^4/15) T^5/(lambda_0 m_e^5), corrections of order (Q/T)^2", () => {
  for (const T of [100, 1e3, 1e4]) {
    const { nToP, pToN } = weakRatesAt(T, T, 0, BORN);
    const limit = ((7 * Math.PI ** 4) / 15) * (T / m) ** 5;
    expect(relative(Math.sqrt(nToP * pToN) * bornPhaseSpace(Q / m), limit), `T = ${T}`).toBeLessThan(
      2e-8 + (Q / T) ** 2,
    );
  }
});

test("a neutrino excess drives n -> p and starves p -> n", () => {
  const none = weakRatesAt(0.8, 0.8, 0, BORN);
  const excess = weakRatesAt(0.8, 0.8, 0.5, BORN);
  expect(excess.nToP).toBeGreaterThan(none.nToP);
  expect(excess.pToN).toBeLessThan(none.pToN);
});

test("bad temperatures, degeneracies and constants are refused by name", () => {
  for (const T of [0, -1, Number.NaN, Number.POSITIVE_INFINITY]) {
    expect(() => weakRatesAt(T, 1, 0, BORN)).toThrow(`TMeV = ${T} MeV: must be positive and finite`);
    expect(() => weakRatesAt(1, T, 0, BORN)).toThrow(`TnuMeV = ${T} MeV: must be positive and finite`);
  }
  expect(() => weakRatesAt(1, 1, Number.NaN, BORN)).toThrow("xiE = NaN");
  expect(() => weakRatesAt(1, 1, 0, BORN, { ...WEAK_INPUTS, Q: 0.4 })).toThrow("Q = 0.4 MeV: must exceed");
  expect(() => weakRatesAt(1, 1, 0, BORN, { ...WEAK_INPUTS, gA: 0 })).toThrow("gA = 0");
  expect(() => weakRatesAt(1, 1, 0, BORN, { ...WEAK_INPUTS, alpha: -1 })).toThrow("alpha = -1");
  expect(() => bornPhaseSpace(1)).toThrow(RangeError);
});
