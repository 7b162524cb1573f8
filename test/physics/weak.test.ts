/** Weak rates against published values and independent quadratures, each with its source and tolerance. */
import { expect, test } from "vitest";
import { ELECTRON_MASS } from "../../src/constants/codata.ts";
import { FERMI_CONSTANT } from "../../src/constants/particle.ts";
import { HBAR_MEV_S } from "../../src/constants/units.ts";
import { integrateStiff } from "../../src/numerics/ode-stiff.ts";
import { integratePanels } from "../../src/numerics/quadrature.ts";
import { findRoot } from "../../src/numerics/roots.ts";
import { BORN, WEAK_DEFAULTS, WEAK_INPUTS, type WeakOptions } from "../../src/weak/inputs.ts";
import { decayPhaseSpace, weakRatesAt } from "../../src/weak/rates.ts";
import { hubbleRate, neutrinoRatio, timeStep } from "./ideal-gas.ts";

const relative = (a: number, b: number) => Math.abs(a / b - 1);

/** The constants of the independent quadratures: Q of CODATA 2018, an earlier axial coupling. */
const INPUTS_2018 = { ...WEAK_INPUTS, Q: 1.29333236, gA: 1.2756 };
const LEVELS: Record<string, WeakOptions> = {
  born: BORN,
  coulomb: { ...BORN, coulomb: true },
  coulomb_rad: { ...BORN, coulomb: true, radiative: true },
  fm_only: { ...BORN, finiteMass: true, weakMagnetism: true },
  coulomb_recoil_wm: { ...WEAK_DEFAULTS, radiative: false },
  all: WEAK_DEFAULTS,
};

// Independent quadratures made for this project (numpy/scipy, CODATA 2018 constants, tau_n = 879.4 s, xi = 0).
// T [MeV], T_nu/T, then n -> p and p -> n [1/s]. Tolerance of the source: 5e-5, Born 1e-5.
const RATES: Record<string, readonly (readonly [number, number, number, number])[]> = {
  born: [
    [2, 1, 3.93118105e1, 2.05910973e1],
    [0.7, 0.9908, 3.22137014e-1, 5.03692605e-2],
    [0.3, 0.945, 8.76009647e-3, 1.09341367e-4],
    [0.1, 0.766, 1.16611538e-3, 9.22402441e-10],
  ],
  coulomb: [
    [2, 1, 3.84501971e1, 2.01397936e1],
    [0.7, 0.9908, 3.15100122e-1, 4.92976911e-2],
    [0.3, 0.945, 8.59150115e-3, 1.07630814e-4],
    [0.1, 0.766, 1.16556443e-3, 9.18010953e-10],
  ],
  coulomb_rad: [
    [2, 1, 3.8030842e1, 1.992014e1],
    [0.7, 0.9908, 3.13258723e-1, 4.89977959e-2],
    [0.3, 0.945, 8.56608373e-3, 1.0708404e-4],
    [0.1, 0.766, 1.16532158e-3, 9.14775155e-10],
  ],
  fm_only: [
    [2, 1, 3.85134275e1, 2.02155466e1],
    [0.7, 0.9908, 3.19912636e-1, 5.01747248e-2],
    [0.3, 0.945, 8.73619297e-3, 1.09590085e-4],
    [0.1, 0.766, 1.16595356e-3, 9.25315286e-10],
  ],
  all: [
    [2, 1, 3.72750136e1, 1.95654896e1],
    [0.7, 0.9908, 3.11133544e-1, 4.88143513e-2],
    [0.3, 0.945, 8.54307807e-3, 1.07330504e-4],
    [0.1, 0.766, 1.16515238e-3, 9.17653281e-10],
  ],
};

for (const [level, rows] of Object.entries(RATES))
  test.each(rows)(`${level} rates at T = %f MeV, T_nu/T = %f`, (T, ratio, nToP, pToN) => {
    const rates = weakRatesAt(T, T * ratio, 0, LEVELS[level], INPUTS_2018);
    const tolerance = level === "born" ? 1e-5 : 5e-5;
    expect(relative(rates.nToP / 879.4, nToP)).toBeLessThan(tolerance);
    expect(relative(rates.pToN / 879.4, pToN)).toBeLessThan(tolerance);
  });

// The same source; tolerance 2e-4, Born 1e-6.
test.each([
  ["born", 1.636098, 1e-6],
  ["coulomb", 1.69234, 2e-4],
  ["coulomb_recoil_wm", 1.688842, 2e-4],
  ["coulomb_rad", 1.758384, 2e-4],
  ["all", 1.754753, 2e-4],
])("phase space of neutron decay, %s: %f", (level, value, tolerance) => {
  expect(relative(decayPhaseSpace(LEVELS[level], INPUTS_2018), value)).toBeLessThan(tolerance);
});

// weak-lambda0: closed form at q = Q/m_e = 2.530989 (CODATA 2022); the literature prints 1.6361. Tolerance 1e-6.
test("weak-lambda0: 1.636099", () => {
  expect(relative(decayPhaseSpace(BORN), 1.636099)).toBeLessThan(1e-6);
  expect(Math.abs(WEAK_INPUTS.Q / ELECTRON_MASS.value - 2.530989)).toBeLessThan(5e-7);
});

// weak-lambda-coul: the same with the non-relativistic F = 2 pi eta/(1 - exp(-2 pi eta)), independent quadrature, 1e-4.
// Ours is relativistic: the relation between the two, 1.692340/1.69167, is within the 4e-4 that the source states.
test("weak-lambda-coul: 1.69167 with the non-relativistic Fermi function, and how far the relativistic one is from it", () => {
  const { Q, electronMass: m, alpha } = WEAK_INPUTS;
  const end = Math.sqrt(Q - m);
  const integral = integratePanels(
    (u) => {
      const E = m + u * u;
      const p = u * Math.sqrt(E + m);
      const x = (2 * Math.PI * alpha * E) / p;
      return 2 * u * p * E * (Q - E) ** 2 * (x / (1 - Math.exp(-x)));
    },
    [0, 0.02 * end, 0.15 * end, end],
    40,
  );
  const nonRelativistic = integral / m ** 5;
  expect(relative(nonRelativistic, 1.69167)).toBeLessThan(1e-4);
  const relativistic = decayPhaseSpace(LEVELS.coulomb);
  expect(relativistic / nonRelativistic - 1).toBeGreaterThan(2e-4);
  expect(relativistic / nonRelativistic - 1).toBeLessThan(6e-4);
});

// weak-prefactor: arXiv:2501.17916 (2025), 5263.284(17) s = 2 pi^3 hbar/(G_F^2 m_e^5 lambda_0). Tolerance 1e-5.
test("weak-prefactor: neutron lifetime prefactor 5263.284(17) s", () => {
  const G = FERMI_CONSTANT.value * 1e-6; // 1/MeV^2
  const prefactor = (2 * Math.PI ** 3 * HBAR_MEV_S) / (G ** 2 * ELECTRON_MASS.value ** 5 * decayPhaseSpace(BORN));
  expect(relative(prefactor, 5263.284)).toBeLessThan(1e-5);
});

// th-ratio-*: entropy conservation, independent quadrature, absolute 2e-6; here it guards the history used below.
test.each([
  [10, 1.00006],
  [3, 1.000668],
  [1, 1.005966],
  [0.7, 1.012079],
  [0.5, 1.023321],
  [0.2, 1.125157],
  [0.1, 1.310188],
])("T_gamma/T_nu of the ideal gas at %f MeV: %f", (T, ratio) => {
  expect(Math.abs(1 / neutrinoRatio(T) - ratio)).toBeLessThan(2e-6);
});

// weak-np-*: independent quadrature, Born, T_nu from instantaneous decoupling, normalised with lambda_0. Tolerance 1e-4.
test.each([
  [10, 8.4991e7, 7.46797e7],
  [3, 237908, 154568],
  [1, 1389.88, 379.906],
  [0.7, 281.612, 43.9311],
  [0.5, 64.7228, 4.74964],
  [0.2, 1.99885, 0.00268449],
  [0.1, 1.02523, 7.99865e-7],
])("weak-np at %f MeV: %f, p to n %f", (T, nToP, pToN) => {
  const rates = weakRatesAt(T, T * neutrinoRatio(T), 0, BORN);
  expect(relative(rates.nToP, nToP)).toBeLessThan(1e-4);
  expect(relative(rates.pToN, pToN)).toBeLessThan(1e-4);
});

// weak-db: identity exp(-Q/T), tolerance 1e-6; the row gives 0.274355 at 1 MeV, 0.878681 at 10 MeV, and 0.273337 at
// 1 MeV where the neutrinos are colder.
test("weak-db: Gamma_pn/Gamma_np = exp(-Q/T) at T_nu = T, and not so at T_nu < T", () => {
  for (const [T, printed] of [
    [1, 0.274355],
    [10, 0.878681],
  ]) {
    const { nToP, pToN } = weakRatesAt(T, T, 0, BORN);
    expect(relative(pToN / nToP, Math.exp(-WEAK_INPUTS.Q / T))).toBeLessThan(1e-6);
    expect(Math.abs(pToN / nToP - printed)).toBeLessThan(1e-6);
  }
  const { nToP, pToN } = weakRatesAt(1, neutrinoRatio(1), 0, BORN);
  expect(Math.abs(pToN / nToP - 0.273337)).toBeLessThan(2e-6);
});

// weak-freeze: independent quadrature and root finding, tau_n = 878.4 s, three neutrinos. Tolerance 3e-3.
test("weak-freeze: Gamma_np = H at 0.705 MeV, where equilibrium n/p is 0.160", () => {
  const excess = (T: number) => weakRatesAt(T, T * neutrinoRatio(T), 0, BORN).nToP / 878.4 / hubbleRate(T) - 1;
  const T = findRoot(excess, 0.3, 2, 1e-6);
  expect(relative(T, 0.705)).toBeLessThan(3e-3);
  expect(Math.abs(Math.exp(-WEAK_INPUTS.Q / T) - 0.16)).toBeLessThan(1e-3);
});

// weak-Xn-0.1 and weak-Xn-freeze: independent integration, Born, tau_n = 878.4 s, no nuclei. Tolerance 1e-3.
test("weak-Xn: neutron fraction 0.14037 at 0.1 MeV; 0.1605 at 0.07 MeV with free decay divided out", () => {
  const tauN = 878.4;
  let last = { x: Number.NaN, leave: 0, enter: 0, dt: 0 };
  const rates = (x: number) => {
    if (x === last.x) return last;
    const T = Math.exp(-x);
    const { nToP, pToN } = weakRatesAt(T, T * neutrinoRatio(T), 0, BORN);
    const dt = timeStep(T);
    last = { x, leave: (nToP * dt) / tauN, enter: (pToN * dt) / tauN, dt };
    return last;
  };
  const start = 10;
  const first = rates(-Math.log(start));
  const found: number[][] = [];
  integrateStiff(
    {
      n: 2,
      rhs(x, y, out) {
        const { leave, enter, dt } = rates(x);
        out[0] = -leave * y[0] + enter * (1 - y[0]);
        out[1] = dt;
      },
      jacobian(x, _y, J) {
        const { leave, enter } = rates(x);
        J.set([-(leave + enter), 0, 0, 0]);
      },
    },
    -Math.log(start),
    [first.enter / (first.leave + first.enter), 1 / (2 * hubbleRate(start))],
    -Math.log(0.07),
    { rtol: 1e-6, atol: 1e-9 },
    [-Math.log(0.1), -Math.log(0.07)],
    (_i, _x, y) => found.push([...y]),
  );
  expect(relative(found[0][0], 0.14037)).toBeLessThan(1e-3);
  expect(relative(found[1][0] * Math.exp(found[1][1] / tauN), 0.1605)).toBeLessThan(1e-3);
  expect(relative(found[1][1], 265.433)).toBeLessThan(1e-4); // th-t-0.07MeV: independent quadrature, tolerance 1e-4
});
