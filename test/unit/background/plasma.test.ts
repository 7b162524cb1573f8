/** Plasma: Fermi-Dirac integrals, QED terms, their thermodynamic identities, and the table against direct quadrature. */
import { describe, expect, test } from "vitest";
import {
  electronPositron,
  energyDegreesOfFreedom,
  entropyDegreesOfFreedom,
  entropyDensity,
  photons,
  plasma,
  plasmaTable,
  type Thermodynamics,
} from "../../../src/background/plasma.ts";
import { qedTerms } from "../../../src/background/qed.ts";
import { ELECTRON_MASS, FINE_STRUCTURE } from "../../../src/constants/codata.ts";
import { integrateAdaptive } from "../../../src/numerics/quadrature.ts";

const m = ELECTRON_MASS.value;
const ALL = { qedE2: true, qedE3: true };
const relative = (value: number, reference: number) => Math.abs(value / reference - 1);

// Independent quadratures made for this project (CODATA constants), natural units [MeV4] and [MeV3];
// tolerance 1e-6 for e+- and the entropy, 1e-4 for the QED terms.
const ROWS = [
  { T: 10, rho: 1.15123596e4, P: 3.8360072e3, P2: -1.58560663e1, P3: 1.41674368, s: 2.40634796e3 },
  { T: 1, rho: 1.12881622, P: 3.63783418e-1, P2: -1.31471667e-3, P3: 1.33628872e-4, s: 2.36480035 },
  { T: 0.3, rho: 7.32606716e-3, P: 1.90916118e-3, P2: -4.4182545e-6, P3: 6.23187146e-7, s: 5.44023988e-2 },
  { T: 0.05, rho: 2.67514862e-8, P: 2.25057756e-9, P2: -1.46300414e-12, P3: 3.14572738e-14, s: 1.10241921e-4 },
];

describe.each(ROWS)("at T = $T MeV", ({ T, rho, P, P2, P3, s }) => {
  test("e+- energy density and pressure agree with an independent quadrature", () => {
    expect(relative(electronPositron(T).rho, rho)).toBeLessThan(1e-6);
    expect(relative(electronPositron(T).P, P)).toBeLessThan(1e-6);
  });
  test("QED pressures of order e^2 and e^3 agree with an independent quadrature", () => {
    expect(relative(qedTerms(T, m).second.P, P2)).toBeLessThan(1e-4);
    expect(relative(qedTerms(T, m).third.P, P3)).toBeLessThan(1e-4);
  });
  test("entropy density with all terms agrees with an independent quadrature", () => {
    expect(relative(entropyDensity(T, plasma(T, ALL)), s)).toBeLessThan(1e-6);
  });
});

test("e+- integrals agree with adaptive quadrature over the momentum", () => {
  for (const T of [0.02, 0.15, 0.7, 5]) {
    const f = (E: number) => 1 / (Math.exp(E / T) + 1);
    const energy = (p: number) => Math.hypot(p, m);
    const pMax = 60 * T + Math.sqrt((60 * T + m) ** 2 - m * m);
    const rho = integrateAdaptive((p) => p * p * energy(p) * f(energy(p)), 0, pMax, 1e-11).value;
    const P = integrateAdaptive((p) => (p ** 4 / energy(p)) * f(energy(p)), 0, pMax, 1e-11).value;
    expect(relative(electronPositron(T).rho, (2 / Math.PI ** 2) * rho)).toBeLessThan(1e-9);
    expect(relative(electronPositron(T).P, (2 / (3 * Math.PI ** 2)) * P)).toBeLessThan(1e-9);
  }
});

test("thermodynamic identity rho = -P + T dP/dT and d rho/d ln T hold for every part", () => {
  const parts: ((T: number) => Thermodynamics)[] = [
    photons,
    electronPositron,
    (T) => qedTerms(T, m).second,
    (T) => qedTerms(T, m).third,
    (T) => plasma(T, ALL),
  ];
  const h = 2e-3;
  for (const part of parts)
    for (const T of [0.03, 0.1, 0.5, 2, 20]) {
      // fourth-order central difference in ln T: error h^4 f5/30, f5 up to 30^4 at m_e/T = 17
      const slope = (key: "P" | "rho") => {
        const at = (k: number) => part(T * Math.exp(k * h))[key];
        return (8 * (at(1) - at(-1)) - (at(2) - at(-2))) / (12 * h);
      };
      const { P, rho, dRhoDLnT } = part(T);
      expect(relative(slope("P") - P, rho)).toBeLessThan(2e-6);
      expect(relative(slope("rho"), dRhoDLnT)).toBeLessThan(2e-6);
    }
});

test("massless limits: 7/8 of 2 photons, -5 e^2 T^4/288 and e^3 T^4/(12 pi 3^1.5)", () => {
  const T = 1000;
  const e2 = 4 * Math.PI * FINE_STRUCTURE.value;
  expect(relative(electronPositron(T).rho, ((7 / 4) * Math.PI ** 2 * T ** 4) / 15)).toBeLessThan(1e-6);
  expect(relative(qedTerms(T, m).second.P, (-5 * e2 * T ** 4) / 288)).toBeLessThan(1e-5);
  expect(relative(qedTerms(T, m).third.P, (e2 ** 1.5 * T ** 4) / (12 * Math.PI * 3 ** 1.5))).toBeLessThan(1e-5);
});

test("the logarithmic term is 1.3 percent of P2 at 1 MeV and 5 percent at 0.3 MeV", () => {
  // Without it P2 = -e^2 T^2 I1/(12 pi^2) - e^2 I1^2/(8 pi^4): Bennett et al. 2020, JCAP 03, 003
  const e2 = 4 * Math.PI * FINE_STRUCTURE.value;
  const share = (T: number) => {
    const N = (p: number) => 2 / (Math.exp(Math.hypot(p, m) / T) + 1);
    const I1 = integrateAdaptive((p) => (p * p * N(p)) / Math.hypot(p, m), 0, 80 * T, 1e-11).value;
    const plain = -(e2 * T * T * I1) / (12 * Math.PI ** 2) - (e2 * I1 * I1) / (8 * Math.PI ** 4);
    return 1 - qedTerms(T, m).second.P / plain;
  };
  expect(share(1)).toBeCloseTo(0.013, 3);
  expect(share(0.3)).toBeCloseTo(0.05, 2);
});

test("the logarithmic term agrees with a double integral over the momenta", () => {
  // e^2 m^2/(16 pi^4) int int (p p'/(E E')) ln|(p + p')/(p - p')| N N' dp dp', by adaptive panels split at p' = p
  const T = 0.3;
  const e2 = 4 * Math.PI * FINE_STRUCTURE.value;
  const N = (p: number) => 2 / (Math.exp(Math.hypot(p, m) / T) + 1);
  const w = (p: number) => (p / Math.hypot(p, m)) * N(p);
  const top = 40 * T;
  const inner = (p: number) => {
    const f = (q: number) => (q === p ? 0 : w(q) * Math.log(Math.abs((p + q) / (p - q))));
    // q = p (1 - u^3), p (1 + u^3): the logarithm becomes harmless
    const below = integrateAdaptive((u) => f(p * (1 - u ** 3)) * 3 * u * u * p, 0, 1, 1e-8).value;
    const c = Math.cbrt((top - p) / p);
    const above = integrateAdaptive((u) => f(p * (1 + u ** 3)) * 3 * u * u * p, 0, c, 1e-8).value;
    return below + above;
  };
  const L = integrateAdaptive((p) => w(p) * inner(p), 0, 0.99 * top, 1e-7).value;
  const I1 = integrateAdaptive((p) => p * w(p), 0, top, 1e-11).value;
  const expected =
    -(e2 * T * T * I1) / (12 * Math.PI ** 2) -
    (e2 * I1 * I1) / (8 * Math.PI ** 4) +
    ((e2 * m * m) / (16 * Math.PI ** 4)) * L;
  expect(relative(qedTerms(T, m).second.P, expected)).toBeLessThan(1e-7);
});

test("the table follows direct quadrature to 1e-8 from 3 keV to 1 GeV, for every choice of QED terms", () => {
  const out = new Float64Array(3);
  for (const terms of [ALL, { qedE2: true, qedE3: false }, { qedE2: false, qedE3: false }])
    for (let i = 0; i <= 300; i++) {
      const T = 0.003 * (1000 / 0.003) ** (i / 300);
      const { P, rho, dRhoDLnT } = plasma(T, terms);
      plasmaTable(terms).evaluate(Math.log(T), out);
      expect(relative(out[0] * T ** 4, rho)).toBeLessThan(1e-8);
      expect(relative(out[1] * T ** 4, rho + P)).toBeLessThan(1e-8);
      expect(relative(out[2] * T ** 4, dRhoDLnT)).toBeLessThan(1e-8);
    }
});

test("degrees of freedom count two for the photons", () => {
  expect(energyDegreesOfFreedom(photons(0.2).rho, 0.2)).toBeCloseTo(2, 12);
  expect(entropyDegreesOfFreedom(entropyDensity(0.2, photons(0.2)), 0.2)).toBeCloseTo(2, 12);
});

test("a temperature that is not positive is refused", () => {
  for (const T of [0, -1, Number.NaN, Number.POSITIVE_INFINITY])
    expect(() => electronPositron(T)).toThrow(/TMeV = .* MeV: must be positive and finite/);
});
