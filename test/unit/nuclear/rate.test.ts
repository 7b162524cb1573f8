/** Forward rates: accuracy of the interpolation, ends of the tables, derivatives, variations. */
import { describe, expect, test } from "vitest";
import { loadRates } from "../../../src/node/load-rates.ts";
import type { RateTable } from "../../../src/nuclear/parse-rate-file.ts";
import { evaluateRate, rateAt } from "../../../src/nuclear/rate.ts";

const library = loadRates();
const everyTable = library.reactions.flatMap((id) => library.evaluations(id).map((name) => library.table(id, name)));

test("every file of the library parses: 214 evaluations of 180 reactions", () => {
  expect(everyTable.length).toBe(214);
});

test("tables are reproduced at their rows to all digits", () => {
  for (const table of everyTable.filter((each) => each.kind === "table")) {
    const rate = evaluateRate(table);
    for (let i = 0; i < table.T9.length; i++) {
      // exp(ln x) of a double is exact to |ln x| rounding errors
      const rounding = 2.3e-16 * (2 + Math.abs(Math.log(table.rate[i])));
      expect(Math.abs(rateAt(rate, table.T9[i]) / table.rate[i] - 1), `${table.file} row ${i}`).toBeLessThan(rounding);
      expect(rate.lnFactorUncertainty(table.T9[i])).toBeCloseTo(Math.log(table.factorUncertainty[i]), 14);
    }
  }
});

// Tables that are a seven-parameter fit evaluated on the 60-point grid: the fit itself is in the library.
describe("half-way between its rows a table follows the fit it was made from", () => {
  test.each([
    ["he3-n_p-t", "descouvemont2004", 3e-4],
    ["t-he4_gamma-li7", "descouvemont2004", 3e-4],
    ["li7-p_he4-he4", "descouvemont2004", 3e-4],
    ["d-n_gamma-t", "nagai2006", 3e-4],
    ["d-he4_gamma-li6", "tursunov2020", 3e-4],
    ["li6-p_he3-he4", "pizzone2005", 3e-4],
    ["be7-n_he4-he4", "wagoner1969", 3e-4],
    ["be7-d_p-he4-he4", "caughlan1988", 3e-4],
    ["li7-d_n-he4-he4", "caughlan1988", 3e-4],
    ["li7-n_gamma-li8", "kadonis2009", 3e-4],
    ["be7-p_gamma-b8", "angulo1999", 3e-4],
    ["li8-he4_n-b11", "lacognata2011", 3e-3],
  ])("%s to %s", (id, name, tolerance) => {
    const table = library.table(id, name);
    const spline = evaluateRate(table);
    const fit = evaluateRate(library.table(id, "reaclib"));
    let worst = 0;
    for (let i = 1; i < table.T9.length; i++) {
      if (table.T9[i - 1] < 0.01) continue;
      const middle = Math.sqrt(table.T9[i - 1] * table.T9[i]);
      worst = Math.max(worst, Math.abs(Math.expm1(spline.lnRate(middle) - fit.lnRate(middle))));
    }
    expect(worst).toBeLessThan(tolerance);
  });
});

test("below its first row a table is zero, above its last constant", () => {
  const rate = evaluateRate(library.table("li8-he4_n-b11", "lacognata2011"));
  expect(rate.lnRate(0.0139)).toBe(Number.NEGATIVE_INFINITY);
  expect(rateAt(rate, 0.0139)).toBe(0);
  expect(rate.dLnRatedLnT9(0.0139)).toBe(0);
  expect(rateAt(rate, 20)).toBe(rateAt(rate, 10));
  expect(rate.dLnRatedLnT9(20)).toBe(0);
});

test("fits are held above T9 = 10, however they would run on", () => {
  for (const table of everyTable.filter((each) => each.kind === "reaclib")) {
    const rate = evaluateRate(table);
    expect(rate.lnRate(30)).toBe(rate.lnRate(10));
    expect(rate.dLnRatedLnT9(30)).toBe(0);
  }
});

test("the derivative is that of the rate, over all files and 30 temperatures", () => {
  for (const table of everyTable) {
    const rate = evaluateRate(table);
    const [low, high] = [Math.log(table.kind === "table" ? table.T9[0] * 1.01 : 0.01), Math.log(9.9)];
    for (let k = 0; k < 30; k++) {
      const T9 = Math.exp(low + ((high - low) * k) / 29);
      const h = 1e-4;
      const richardson =
        (8 * (rate.lnRate(T9 * Math.exp(h)) - rate.lnRate(T9 * Math.exp(-h))) -
          (rate.lnRate(T9 * Math.exp(2 * h)) - rate.lnRate(T9 * Math.exp(-2 * h)))) /
        (12 * h);
      // a spline's third derivative jumps at the rows: h^2 times it is below 1e-5 of the slope's size here
      const scale = 1 + Math.abs(richardson);
      expect(Math.abs(rate.dLnRatedLnT9(T9) - richardson) / scale, `${table.file} T9 = ${T9}`).toBeLessThan(1e-5);
    }
  }
});

test("a decay is constant; a sum of terms far apart neither overflows nor underflows", () => {
  const decay = evaluateRate(library.table("t_he3", "reaclib"));
  expect(rateAt(decay, 0.01)).toBeCloseTo(Math.exp(-20.1456), 17);
  expect(decay.lnRate(7)).toBe(decay.lnRate(0.01));
  const base = library.table("d-n_gamma-t", "reaclib");
  const steep: RateTable = {
    ...base,
    terms: [
      [-2000, 0, 0, 0, 0, 0, 0],
      [-2001, 0, 0, 0, 0, 0, 0],
    ],
  };
  expect(evaluateRate(steep).lnRate(1)).toBeCloseTo(-2000 + Math.log1p(Math.exp(-1)), 12);
});

test("a variation p multiplies the rate by f_u^p at each temperature", () => {
  const table = library.table("be7-n_p-li7", "desouza2020");
  const rate = evaluateRate(table);
  for (const T9 of [0.001, 0.3, 10]) {
    const fU = Math.exp(rate.lnFactorUncertainty(T9));
    expect(rateAt(rate, T9, 2) / rateAt(rate, T9)).toBeCloseTo(fU ** 2, 12);
    expect(rateAt(rate, T9, -1) * fU).toBeCloseTo(rateAt(rate, T9), 0);
  }
  // between two rows ln f_u is linear in ln T9, outside constant
  const [a, b] = [table.T9[3], table.T9[4]];
  const half = (Math.log(table.factorUncertainty[3]) + Math.log(table.factorUncertainty[4])) / 2;
  expect(rate.lnFactorUncertainty(Math.sqrt(a * b))).toBeCloseTo(half, 14);
  expect(rate.lnFactorUncertainty(1e-4)).toBe(rate.lnFactorUncertainty(table.T9[0]));
});
