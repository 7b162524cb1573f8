/** Thermal history against closed forms and the textbook ideal gas: t(T), T_gamma/T_nu, degrees of freedom. */
import { describe, expect, test } from "vitest";
import { computeThermalHistory } from "../../src/background/history.ts";
import { neutrinoDensityFactor } from "../../src/background/neutrinos.ts";
import {
  energyDegreesOfFreedom,
  entropyDegreesOfFreedom,
  entropyDensity,
  plasma,
} from "../../src/background/plasma.ts";
import { G_CM3_PER_MEV4, kelvinToMeV, mevToKelvin, PER_CM3_PER_MEV3 } from "../../src/constants/units.ts";

const relative = (value: number, reference: number) => Math.abs(value / reference - 1);

// Ideal gas of photons, e+- and three neutrinos decoupled at T >> m_e; no QED, no heating, no baryons; t = 1/(2H) at the start.
const IDEAL = { qedE2: false, qedE3: false };
const ideal = computeThermalHistory({ ...IDEAL, incompleteDecoupling: false, startMeV: 1000 });

// Independent quadrature of the Friedmann equation and entropy conservation, CODATA 2022, G = 6.67430e-11:
// [T/MeV, t/s (rel 1e-4), T_gamma/T_nu (abs 2e-6), g_* (rel 1e-5), g_*s]
const TABLE: [number, number, number, number, number][] = [
  [10, 0.00738253, 1.00006, 10.748075, 10.748061],
  [3, 0.0821151, 1.000668, 10.728588, 10.728501],
  [1, 0.745913, 1.005966, 10.557744, 10.55986],
  [0.7, 1.53861, 1.012079, 10.361331, 10.369692],
  [0.5, 3.07523, 1.023321, 10.006134, 10.031648],
  [0.3, 9.11662, 1.061433, 8.885294, 8.989412],
  [0.2, 22.7612, 1.125157, 7.309775, 7.546907],
  [0.1, 119.237, 1.310188, 4.300514, 4.779772],
  [0.07, 265.433, 1.378787, 3.570695, 4.101258],
  [0.03, 1471.24, 1.401011, 3.362721, 3.909161],
  [0.01, 13203.2, 1.40102, 3.362644, 3.909091],
];

describe.each(TABLE)("ideal gas at T = %d MeV", (TMeV, t, ratio, gStar, gStarS) => {
  const state = ideal.at(mevToKelvin(TMeV));
  test("age", () => expect(relative(state.t, t)).toBeLessThan(1e-4));
  test("photon to neutrino temperature", () => expect(Math.abs(1 / state.TnueOverT - ratio)).toBeLessThan(2e-6));
  test("energy degrees of freedom", () => {
    expect(relative(energyDegreesOfFreedom(state.rho / G_CM3_PER_MEV4, TMeV), gStar)).toBeLessThan(1e-5);
  });
  test("entropy degrees of freedom", () => {
    const neutrinos = 4 * neutrinoDensityFactor(0) * (state.TnueOverT * TMeV) ** 3; // s = (4/3) rho/T, three flavours
    const s = entropyDensity(TMeV, plasma(TMeV, IDEAL)) + neutrinos;
    expect(relative(entropyDegreesOfFreedom(s, TMeV), gStarS)).toBeLessThan(1e-5);
  });
});

test("age at 1e10 K is 1.0081 s (independent quadrature, CODATA 2022)", () => {
  expect(relative(ideal.at(1e10).t, 1.0081)).toBeLessThan(1e-4);
});

test("T_nu/T tends to (4/11)^(1/3) after e+- annihilation", () => {
  // any cosmology textbook (Kolb & Turner 1990; Weinberg 1972): 0.7137658555, rel 1e-6 below 10 keV
  for (const TMeV of [0.009, 0.002, 0.0005])
    expect(relative(ideal.at(mevToKelvin(TMeV)).TnueOverT, 0.7137658555)).toBeLessThan(1e-6);
  const T0 = 2.7255;
  const Tnu0 = T0 / ideal.photonToNeutrinoTemperature;
  expect(relative(Tnu0, 1.94537)).toBeLessThan(3e-6); // K, printed to 6 digits
  // number density per flavour, nu + nubar: (3 zeta(3)/(2 pi^2)) T_nu^3 = (3/11) n_gamma = 112.0164 cm^-3
  const n = ((1.5 * 1.2020569031595942) / Math.PI ** 2) * kelvinToMeV(Tnu0) ** 3 * PER_CM3_PER_MEV3;
  expect(relative(n, 112.0164)).toBeLessThan(1e-5);
});

test("degrees of freedom: 43/4 before annihilation, 2 + (21/4)(4/11)^(4/3) and 43/11 after", () => {
  // Kolb & Turner 1990, The Early Universe: g_* = 43/4 for T >> m_e, 3.3626 and g_*s = 3.9091 today
  const gStar = (TMeV: number) => energyDegreesOfFreedom(ideal.at(mevToKelvin(TMeV)).rho / G_CM3_PER_MEV4, TMeV);
  expect(relative(gStar(100), 10.75)).toBeLessThan(1e-5);
  expect(relative(gStar(10), 10.75)).toBeLessThan(2e-4); // finite electron mass: 10.748075
  expect(relative(gStar(0.002), 3.362644)).toBeLessThan(1e-6);
  const late = ideal.at(mevToKelvin(0.002));
  const s = entropyDensity(0.002, plasma(0.002, IDEAL)) + 4 * neutrinoDensityFactor(0) * (late.TnueOverT * 0.002) ** 3;
  expect(relative(entropyDegreesOfFreedom(s, 0.002), 3.909091)).toBeLessThan(1e-6);
});

test("t T^2 is 0.73818 s MeV^2 at g_* = 10.75 and 1.3199 s MeV^2 at 2 keV", () => {
  // Independent quadrature, CODATA 2022: rel 1e-4 and 1e-3
  expect(relative(ideal.at(mevToKelvin(100)).t * 100 ** 2, 0.73818)).toBeLessThan(1e-4);
  expect(relative(ideal.at(mevToKelvin(0.002)).t * 0.002 ** 2, 1.3199)).toBeLessThan(1e-3);
});

// Weinberg 1972, Gravitation and Cosmology, table 15.4 (two neutrino species, zero of time at 1e12 K), from memory and each
// confirmed by an independent quadrature with N_nu = 2 to 1 percent.
test.each([
  [1e11, 0.01078],
  [1e10, 1.103],
  [6e9, 3.14],
  [3e9, 13.83],
  [2e9, 35.2],
  [1e9, 182],
  [1e8, 1.92e4],
])("two neutrino species at %d K: %d s after 1e12 K", (T, t) => {
  const two = computeThermalHistory({ ...IDEAL, incompleteDecoupling: false, startMeV: 1000, deltaNEff: -1 });
  expect(relative(two.at(T).t - two.at(1e12).t, t)).toBeLessThan(1e-2);
});
