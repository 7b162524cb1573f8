/** The constants of recombination: consistency with each other and with published energies, fits against published tables. */
import { describe, expect, test } from "vitest";
import { FINE_STRUCTURE, HBAR, LIGHT_SPEED, PLANCK } from "../../../src/constants/codata.ts";
import { JOULE_PER_MEV } from "../../../src/constants/units.ts";
import {
  hydrogenPhotoionisation,
  RECOMBINATION_CONSTANTS,
  RECOMBINATION_VALUES as V,
} from "../../../src/recombination/atomic.ts";
import { heliumCoefficients, vernerFerland } from "../../../src/recombination/helium.ts";
import { caseB, hydrogenCoefficients } from "../../../src/recombination/three-level.ts";

const electronvolt = (wavenumber: number) => (PLANCK.value * LIGHT_SPEED.value * wavenumber) / (JOULE_PER_MEV / 1e6);

// NIST Atomic Spectra Database: 13.598434599702(12), 24.587389011(25), 54.4177655282(10) eV. The wavenumbers used
// have 12 (H, 1e-10) to 11 digits.
test.each([
  ["hIonisation", 13.598434599702, 1e-9],
  ["he1Ionisation", 24.587389011, 2e-9],
  ["he2Ionisation", 54.4177655282, 2e-9],
] as const)("%s agrees with the ionisation energy in eV", (name, published, relative) => {
  expect(Math.abs(electronvolt(V[name]) / published - 1)).toBeLessThan(relative);
});

test("every constant has a source and a unit", () => {
  for (const [name, c] of Object.entries(RECOMBINATION_CONSTANTS)) {
    expect(c.source.length, name).toBeGreaterThan(10);
    expect(c.unit.length, name).toBeGreaterThan(0);
    expect(Number.isFinite(c.value), name).toBe(true);
  }
});

// Hummer 1994, MNRAS 268, 109 (T^(1/2) alpha_B tabulated; low density), tolerance 0.3 %.
describe("case-B coefficient of hydrogen against Hummer 1994", () => {
  const c = hydrogenCoefficients(V, 1, 1, []);
  test.each([
    [2.0, 6.973e-12],
    [3.0, 1.4863e-12],
    [3.2, 1.0696e-12],
    [3.4, 7.6279e-13],
    [3.6, 5.3839e-13],
    [3.8, 3.7554e-13],
    [4.0, 2.584e-13],
  ])("log10 T = %f", (logT, published) => {
    expect(Math.abs(caseB(c, 10 ** logT) / published - 1)).toBeLessThan(0.003);
  });

  // Ferland et al. 1992, ApJ 387, 95.
  test.each([
    [1e3, 1.489e-12],
    [1e4, 2.588e-13],
  ])("Ferland et al. 1992 at %f K", (T, published) => {
    // 2.5798e-13 against 2.588e-13 is 0.32 %: tables differ among themselves by 0.2 %.
    expect(Math.abs(caseB(c, T) / published - 1)).toBeLessThan(0.003 + 0.002);
  });

  // Row alphaB-H-ppb: the fit itself at 1e4 K, 4.309e-13/1.6703.
  test("the fit at 1e4 K is 2.5798e-13 cm3/s", () => {
    expect(Math.abs(caseB(c, 1e4) - 4.309e-13 / 1.6703)).toBeLessThan(1e-6 * 2.5798e-13);
    expect(caseB(c, 1e4)).toBeCloseTo(2.5798e-13, 17);
  });

  test("the factor multiplies the coefficient", () => {
    expect(caseB(hydrogenCoefficients(V, 1.14, 1, []), 3000) / caseB(c, 3000)).toBeCloseTo(1.14, 14);
  });
});

// Hummer & Storey 1998, MNRAS 297, 1073: singlets plus triplets, tolerance 1 %.
test.each([
  [3.4, 7.8613e-13],
  [3.6, 5.5915e-13],
  [4.0, 2.755e-13],
])("case-B coefficient of He I at log10 T = %f against Hummer & Storey 1998", (logT, published) => {
  const k = heliumCoefficients(V, 0.08, []);
  const T = 10 ** logT;
  expect(Math.abs((vernerFerland(k.singlet.fit, T) + vernerFerland(k.triplet.fit, T)) / published - 1)).toBeLessThan(
    0.01,
  );
});

describe("photo-ionisation of hydrogen 1s", () => {
  test("threshold value is 512 pi^2/(3 e^4) alpha a0^2", () => {
    const electronMass = (V.electronMass * JOULE_PER_MEV) / LIGHT_SPEED.value ** 2;
    const bohr = HBAR.value / (electronMass * LIGHT_SPEED.value * FINE_STRUCTURE.value);
    const exact = ((512 * Math.PI ** 2) / (3 * Math.E ** 4)) * FINE_STRUCTURE.value * bohr ** 2;
    expect(Math.abs(V.hPhotoionisation / exact - 1)).toBeLessThan(2e-6);
  });

  test("the formula tends to the threshold value, from below unity of nu/nu0", () => {
    expect(Math.abs(hydrogenPhotoionisation(1 + 1e-8) / V.hPhotoionisation - 1)).toBeLessThan(1e-7);
  });

  // Exact evaluation of the Stobbe formula at the helium lines, made for this project.
  test.each([
    ["he1SingletP", 1.874207e-22],
    ["he1TripletP", 1.938099e-22],
  ] as const)("at the line %s", (line, value) => {
    expect(Math.abs(hydrogenPhotoionisation(V[line] / V.hIonisation) / value - 1)).toBeLessThan(5e-7);
  });
});
