/** Corrections of the weak rates: limits, theorems that hold without our formulas, and convergence of the integrals. */
import { expect, test } from "vitest";
import { HBARC_MEV_FM } from "../../../src/constants/units.ts";
import { integrateAdaptive, integratePanels } from "../../../src/numerics/quadrature.ts";
import { correctedIntegrand, fermiFunction, radiativeFactor, sirlinFunction } from "../../../src/weak/corrections.ts";
import { BORN, nucleonMass, WEAK_DEFAULTS, WEAK_INPUTS, type WeakOptions } from "../../../src/weak/inputs.ts";
import { decayPhaseSpace, weakKernel, weakRatesAt } from "../../../src/weak/rates.ts";

const { Q, electronMass: m, alpha } = WEAK_INPUTS;
const relative = (a: number, b: number) => Math.abs(a / b - 1);
const LADDER: readonly WeakOptions[] = [
  BORN,
  { ...BORN, coulomb: true },
  { ...BORN, coulomb: true, radiative: true },
  { ...WEAK_DEFAULTS, weakMagnetism: false },
  WEAK_DEFAULTS,
];

test("Fermi function: non-relativistic form 2 pi y/(1 - exp(-2 pi y)) as p -> 0, up to order alpha^2 terms", () => {
  for (const p of [1e-4, 1e-3, 0.01, 0.05]) {
    const y = (alpha * Math.hypot(p, m)) / p;
    const gamow = (2 * Math.PI * y) / (1 - Math.exp(-2 * Math.PI * y));
    // what differs is |Gamma(g + iy)| and (2pR)^(2(g - 1)) with g - 1 = -alpha^2/2: alpha^2 ln(1/2pR) at most
    const radius = WEAK_INPUTS.protonRadius;
    expect(relative(fermiFunction(p, WEAK_INPUTS), gamow), `p = ${p}`).toBeLessThan(
      alpha ** 2 * (3 + Math.abs(Math.log(2 * p * radius)) + Math.log(1 + y)),
    );
  }
});

test("Fermi function: 1 + pi alpha E/p + order alpha^2 for fast electrons, and exactly 1 without charge", () => {
  for (const p of [1, 5, 50]) {
    const first = 1 + (Math.PI * alpha * Math.hypot(p, m)) / p;
    expect(Math.abs(fermiFunction(p, WEAK_INPUTS) - first), `p = ${p}`).toBeLessThan(20 * alpha ** 2);
    expect(Math.abs(fermiFunction(p, { ...WEAK_INPUTS, alpha: 1e-12 }) - 1)).toBeLessThan(1e-10);
  }
});

test("a proton radius of 1.2 fm instead of 0.841 fm moves the rates by about 1e-5 only", () => {
  const options = { ...BORN, coulomb: true };
  const other = { ...WEAK_INPUTS, protonRadius: 1.2 / HBARC_MEV_FM };
  const shift = weakRatesAt(0.7, 0.7, 0, options, other).nToP / weakRatesAt(0.7, 0.7, 0, options).nToP - 1;
  expect(Math.abs(shift)).toBeGreaterThan(1e-7);
  expect(Math.abs(shift)).toBeLessThan(2e-5);
});

// Kinoshita & Sirlin 1959, Phys. Rev. 113, 1652: the total decay rate has no logarithm of the electron mass at order
// alpha. Every coefficient of Sirlin's function enters that cancellation.
test("no mass singularity in the radiative correction to the total decay rate", () => {
  const average = (electronMass: number) => {
    const inputs = { ...WEAK_INPUTS, electronMass };
    const edges = [0, 1e-5, 1e-4, 1e-3, 0.01, 0.05, 0.2, 0.5, 0.8, 0.95, 0.99, 0.999, 1].map(
      (x) => x * (Q - electronMass),
    );
    const spectrum = (kinetic: number) => {
      const E = electronMass + kinetic;
      return Math.sqrt(kinetic * (kinetic + 2 * electronMass)) * E * (Q - E) ** 2;
    };
    const corrected = integratePanels(
      (x) => spectrum(x) * sirlinFunction(electronMass + x, Q - electronMass - x, inputs),
      edges,
      20,
    );
    return corrected / integratePanels(spectrum, edges, 20);
  };
  const [a, b] = [average(1e-3 * m), average(1e-5 * m)];
  // 3 ln(m_p/m_e) alone changes by 13.8 between the two masses; the sum may change by terms of order m_e/Q ln^2 only
  expect(Math.abs(a - b)).toBeLessThan(1e-3);
});

test("Sirlin's function is finite and smooth for slow electrons: (4/b) Li2 -> 8 and the brackets vanish", () => {
  const k = Q - m;
  // b -> 0: a/b = 1, (1/b) Li2(2b/(1+b)) -> 2
  const limit = 3 * Math.log(WEAK_INPUTS.protonMass / m) - 0.75 - 8 + 2 + (k * k) / (6 * m * m);
  expect(Math.abs(sirlinFunction(m * (1 + 1e-12), k, WEAK_INPUTS) - limit)).toBeLessThan(1e-5);
});

// Czarnecki, Marciano & Sirlin 2004: radiative corrections raise the neutron decay rate by 3.9 % (RC = 0.0390(8)).
test("the radiative factor raises the decay rate by 3.9 per cent", () => {
  const rise =
    decayPhaseSpace({ ...BORN, coulomb: true, radiative: true }) / decayPhaseSpace({ ...BORN, coulomb: true });
  expect(Math.abs(rise - 1 - 0.039)).toBeLessThan(8e-4);
});

test("detailed balance of the finite-mass rates: Gamma_pn e^(Q/T)/Gamma_np = 1 + 3Q/(2M) to first order", () => {
  // equilibrium of free nucleons is n_n/n_p = (m_n/m_p)^(3/2) exp(-Q/T); 3Q/(2M) is its first order, the rest is M^-2
  for (const weakMagnetism of [false, true])
    for (const [T, tolerance] of [
      [2, 5e-5],
      [0.7, 5e-5],
      [0.2, 5e-5],
    ]) {
      const options = { ...BORN, finiteMass: true, weakMagnetism };
      const { lnNToP, lnPToN } = weakKernel(options).logRates(T, T, 0);
      const excess = Math.expm1(lnPToN - lnNToP + Q / T);
      expect(Math.abs(excess - (1.5 * Q) / nucleonMass(WEAK_INPUTS)), `T = ${T}`).toBeLessThan(tolerance);
    }
});

test("time dilation: neutrons moving at T live longer by 3T/(2M) when no lepton interferes", () => {
  // <1/gamma> = 1 - <v^2>/2 = 1 - 3T/(2M); electrons are gone below m_e/80 and cold neutrinos cannot block or convert
  // The normalisation differs by another 1/M (0.2 %), and the electromagnetic factors, which stand outside the thermal
  // terms, leave a product of their size (7 %) with 3T/(2M).
  for (const [options, tolerance] of [
    [{ ...BORN, finiteMass: true }, 3e-3],
    [{ ...BORN, finiteMass: true, weakMagnetism: true }, 3e-3],
    [WEAK_DEFAULTS, 0.07],
  ] as const)
    for (const T of [0.006, 0.002]) {
      const shift = weakKernel(options).logRates(T, 1e-5, 0).lnNToP;
      const expected = (-1.5 * T) / nucleonMass(WEAK_INPUTS);
      expect(relative(shift, expected), `T = ${T}`).toBeLessThan(tolerance);
    }
});

test("finite-mass terms fade as 1/M", () => {
  const heavy = (factor: number) => {
    const inputs = { ...WEAK_INPUTS, protonMass: factor * WEAK_INPUTS.protonMass };
    const options = { ...BORN, finiteMass: true, weakMagnetism: true };
    return weakKernel(options, inputs).logRates(1, 1, 0).lnNToP - weakKernel(BORN).logRates(1, 1, 0).lnNToP;
  };
  expect(relative(heavy(1e3) / heavy(1e4), 10)).toBeLessThan(1e-3);
  expect(Math.abs(heavy(1e6))).toBeLessThan(1e-7);
});

test("weak magnetism is ignored without finite mass", () => {
  const without = weakRatesAt(1, 0.99, 0, { ...BORN, coulomb: true });
  expect(weakRatesAt(1, 0.99, 0, { ...BORN, coulomb: true, weakMagnetism: true })).toEqual(without);
});

test("every switch changes both rates", () => {
  for (let i = 1; i < LADDER.length; i++) {
    const [a, b] = [weakRatesAt(1, 0.994, 0, LADDER[i - 1]), weakRatesAt(1, 0.994, 0, LADDER[i])];
    for (const key of ["nToP", "pToN"] as const) {
      expect(relative(a[key], b[key]), `step ${i}`).toBeGreaterThan(1e-5);
      expect(relative(a[key], b[key]), `step ${i}`).toBeLessThan(0.03);
    }
  }
});

test("doubling the nodes of every panel moves no rate by 1e-7", () => {
  for (const options of LADDER)
    for (const T of [10, 3, 1, 0.5, 0.2, 0.1, 0.05, 0.02, 0.01, 1e-3, 4.3e-4])
      for (const ratio of [1, 0.7138]) {
        const coarse = weakKernel(options).logRates(T, T * ratio, 0.02);
        const fine = weakKernel(options, WEAK_INPUTS, 16).logRates(T, T * ratio, 0.02);
        expect(Math.abs(coarse.lnNToP - fine.lnNToP), `n -> p at ${T}`).toBeLessThan(1e-7);
        expect(Math.abs(coarse.lnPToN - fine.lnPToN), `p -> n at ${T}`).toBeLessThan(1e-7);
      }
});

test("panels agree with one adaptive integral of the corrected integrand, without any grid of ours", () => {
  const T = 0.3;
  const Tnu = 0.28;
  const xi = 0.1;
  const f = (k: number) => 1 / (Math.exp(k / Tnu - xi) + 1);
  const electron = (E: number) => 1 / (Math.exp(E / T) + 1);
  const density = (E: number) => {
    const { factor, integrand } = correctedIntegrand(E, WEAK_DEFAULTS, WEAK_INPUTS);
    const k = E - Q;
    const [f0, f1] = [f(k), (-f(k) * (1 - f(k))) / Tnu];
    const f2 = (f(k) * (1 - f(k)) * (1 - 2 * f(k))) / Tnu ** 2;
    const { n0, n1, n2 } = integrand;
    const bracket = (n0[0] + T * n0[1]) * f0 + (n1[0] + T * n1[1]) * f1 + T * n2 * f2;
    return Math.sqrt(E * E - m * m) * Math.abs(E) * factor * bracket * electron(-E);
  };
  const span = (from: number, to: number, sign: 1 | -1) =>
    integrateAdaptive((u) => 2 * u * density(sign * (m + u * u)), Math.sqrt(from - m), Math.sqrt(to - m), 1e-9).value;
  const total = span(m, Q, 1) + span(Q, 20, 1) + span(m, 20, -1);
  const rate = weakRatesAt(T, Tnu, xi, WEAK_DEFAULTS).nToP;
  expect(relative(rate, total / m ** 5 / decayPhaseSpace(WEAK_DEFAULTS))).toBeLessThan(1e-8);
});

test("the 1/M expansion says so where it breaks down", () => {
  expect(() => weakRatesAt(2e-5, 1e-3, 0, WEAK_DEFAULTS)).toThrow("first-order 1/M terms do not hold");
});

test("bad energies are refused by name", () => {
  expect(() => fermiFunction(0, WEAK_INPUTS)).toThrow("p = 0 MeV");
  expect(() => sirlinFunction(0.4, 1, WEAK_INPUTS)).toThrow("E - m_e");
  expect(() => radiativeFactor(1, 0, WEAK_INPUTS)).toThrow("k = 0 MeV");
});
