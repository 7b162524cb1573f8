/** Table of the weak rates: interpolation between its points, its ends, and bad grids. */
import { expect, test } from "vitest";
import { t9ToMeV } from "../../../src/constants/units.ts";
import { BORN, WEAK_DEFAULTS } from "../../../src/weak/inputs.ts";
import { weakKernel, weakRatesAt } from "../../../src/weak/rates.ts";
import { interpolateWeakRates, tabulateWeakRates, WEAK_TABLE_SPACING } from "../../../src/weak/table.ts";

/** A smooth T_nu/T that falls from 1 to (4/11)^(1/3) about where e+- annihilate. */
const ratio = (s: number) => 1 - (1 - (4 / 11) ** (1 / 3)) / (1 + Math.exp(-2.5 * (s - 0.5)));
const START = -Math.log(116.1);
const END = -Math.log(0.005);
const COUNT = Math.ceil((END - START) / WEAK_TABLE_SPACING) + 1;

test("interpolation half-way between points is good to 1e-6 in both rates above 1e-25/tau_n", () => {
  const table = tabulateWeakRates({ start: START, end: END, count: COUNT }, ratio, 0.01, WEAK_DEFAULTS);
  expect(table.s.length).toBe(COUNT);
  let compared = 0;
  for (let i = 1; i < COUNT; i++) {
    const s = (table.s[i - 1] + table.s[i]) / 2;
    const TMeV = t9ToMeV(Math.exp(-s));
    const exact = weakRatesAt(TMeV, TMeV * ratio(s), 0.01, WEAK_DEFAULTS);
    const found = interpolateWeakRates(table, s);
    expect(Math.abs(found.nToP / exact.nToP - 1), `n -> p at ${TMeV} MeV`).toBeLessThan(1e-6);
    if (exact.pToN > 1e-25) {
      compared++;
      expect(Math.abs(found.pToN / exact.pToN - 1), `p -> n at ${TMeV} MeV`).toBeLessThan(1e-6);
    }
  }
  expect(compared).toBeGreaterThan(100);
});

test("interpolation error falls with the fourth power of the spacing", () => {
  const error = (count: number) => {
    const table = tabulateWeakRates({ start: -1, end: 2, count }, ratio, 0, WEAK_DEFAULTS);
    let sum = 0;
    for (let i = 1; i < 200; i++) {
      const s = -0.5 + (2 * i) / 200;
      const TMeV = t9ToMeV(Math.exp(-s));
      const { lnNToP } = weakKernel(WEAK_DEFAULTS).logRates(TMeV, TMeV * ratio(s), 0);
      sum += Math.abs(Math.log(interpolateWeakRates(table, s).nToP) - lnNToP);
    }
    return sum;
  };
  const order = Math.log2(error(25) / error(49));
  expect(Math.abs(order - 4)).toBeLessThan(0.3);
});

test("points are the rates themselves, slopes their derivatives", () => {
  const s = Float64Array.from({ length: 60 }, (_, i) => -1 + 0.05 * i);
  const table = tabulateWeakRates(s, ratio, 0, BORN);
  for (const i of [5, 20, 40]) {
    const at = (x: number) => {
      const TMeV = t9ToMeV(Math.exp(-x));
      return weakKernel(BORN).logRates(TMeV, TMeV * ratio(x), 0);
    };
    expect(table.lnNToP[i]).toBe(at(s[i]).lnNToP);
    expect(table.lnPToN[i]).toBe(at(s[i]).lnPToN);
    const h = 1e-4;
    const slope = (at(s[i] + h).lnPToN - at(s[i] - h).lnPToN) / (2 * h);
    expect(Math.abs(table.lnPToNSlope[i] / slope - 1)).toBeLessThan(1e-5);
  }
});

test("the p -> n logarithm stays finite where the rate underflows", () => {
  const table = tabulateWeakRates({ start: 3, end: END, count: 60 }, ratio, 0, WEAK_DEFAULTS);
  expect(table.lnPToN.every(Number.isFinite)).toBe(true);
  expect(interpolateWeakRates(table, END).pToN).toBe(0);
  expect(Math.abs(interpolateWeakRates(table, END).nToP - 1)).toBeLessThan(1e-5);
});

test("bad grids and bad neutrino histories are refused", () => {
  const one = () => 1;
  expect(() => tabulateWeakRates({ start: 1, end: 0, count: 10 }, one, 0, BORN)).toThrow("must ascend");
  expect(() => tabulateWeakRates({ start: 0, end: 1, count: 1 }, one, 0, BORN)).toThrow("at least two points");
  expect(() => tabulateWeakRates({ start: 0, end: 1, count: 2.5 }, one, 0, BORN)).toThrow(RangeError);
  expect(() => tabulateWeakRates(Float64Array.of(0, 1, 1), one, 0, BORN)).toThrow("must increase");
  expect(() => tabulateWeakRates({ start: 0, end: 1, count: 4 }, () => 0, 0, BORN)).toThrow("TnuMeV = 0 MeV");
  expect(() => tabulateWeakRates({ start: 0, end: 1, count: 4 }, one, Number.NaN, BORN)).toThrow("xiE");
});
