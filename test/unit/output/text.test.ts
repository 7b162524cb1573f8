// Text output: numbers with errors, alignment, wrapping, 80 columns.
import fc from "fast-check";
import { expect, test } from "vitest";
import { abundancesText } from "../../../src/output/abundances-output.ts";
import { historyText } from "../../../src/output/history-output.ts";
import {
  alignColumns,
  displayWidth,
  formatConcise,
  formatEstimate,
  formatNumber,
  TEXT_WIDTH,
  wrap,
} from "../../../src/output/text.ts";
import { VERSION } from "../../../src/version.ts";
import { sampleAbundances, sampleHistory } from "./sample-answer.ts";

test("a number keeps its significant digits, with a power of ten outside 1e-3 to 1e5", () => {
  expect(formatNumber(0.2471234)).toBe("0.24712");
  expect(formatNumber(0.001)).toBe("0.0010000");
  expect(formatNumber(2.4561234e-5)).toBe("2.4561e-5");
  expect(formatNumber(99999.7)).toBe("1.0000e5");
  expect(formatNumber(-3.5, 2)).toBe("-3.5");
  expect(formatNumber(0)).toBe("0");
});

test("an error has two digits and the value ends at the same place", () => {
  expect(formatEstimate(0.246898, 0.000132)).toBe("0.24690 ± 0.00013");
  expect(formatEstimate(2.4561e-5, 3.04e-7)).toBe("2.456e-5 ± 0.030e-5");
  expect(formatEstimate(878.4, 0.5)).toBe("878.40 ± 0.50");
  expect(formatEstimate(5.4e-10, 9.96e-11)).toBe("5.4e-10 ± 1.0e-10");
  expect(formatEstimate(1e-5, 2e-3)).toBe("0.0000 ± 0.0020");
  expect(formatEstimate(0.25)).toBe("0.25000");
  expect(formatEstimate(0.25, 0)).toBe("0.25000");
});

test("a printed estimate reads back within half a unit of its last digit", () => {
  fc.assert(
    fc.property(
      fc.double({ min: -20, max: 4, noNaN: true }),
      fc.double({ min: -4, max: -0.3, noNaN: true }),
      (power, relative) => {
        const value = 10 ** power;
        const sigma = value * 10 ** relative;
        const [first, second] = formatEstimate(value, sigma).split(" ± ").map(Number);
        expect(Math.abs(first - value)).toBeLessThanOrEqual(0.051 * sigma);
        expect(Math.abs(second - sigma)).toBeLessThanOrEqual(0.051 * sigma);
      },
    ),
    { seed: 20260101 },
  );
});

test("columns align by what is seen, marks take no room", () => {
  expect(
    alignColumns(
      [
        ["a", "1"],
        ["bcd", "22"],
      ],
      [1],
    ),
  ).toEqual(["a     1", "bcd  22"]);
  expect(displayWidth("³He")).toBe(3);
  expect(displayWidth("e\u0301")).toBe(1);
});

test("wrapped lines fit, keep every word, and hold at no-break spaces", () => {
  const word = fc.stringMatching(/^[a-z]{1,12}$/);
  fc.assert(
    fc.property(fc.array(word, { minLength: 1, maxLength: 40 }), fc.integer({ min: 16, max: 60 }), (words, width) => {
      const lines = wrap(words.join(" "), "", "  ", width);
      expect(lines.flatMap((line) => line.trim().split(" "))).toEqual(words);
      for (const line of lines) expect(line.length).toBeLessThanOrEqual(width);
    }),
    { seed: 20260101 },
  );
  expect(wrap("one two\u00a0three", "", "", 8)).toEqual(["one", "two three"]);
});

test("abundances read in 80 columns", () => {
  const text = abundancesText(sampleAbundances());
  for (const line of text.split("\n")) expect(displayWidth(line), line).toBeLessThanOrEqual(TEXT_WIDTH);
  expect(text.replace(VERSION, "x.y.z")).toMatchSnapshot();
});

test("what is an order of magnitude only, or has an assumed error, is marked and the marks are explained", () => {
  const answer = sampleAbundances();
  const abundances = { ...answer.results.abundances, be9ToH: { value: 5e-18, sigma: 2e-18 } };
  const text = abundancesText({ ...answer, results: { ...answer.results, abundances } });
  expect(text).toContain("~5.0e-18 ± 2.0e-18");
  expect(text).toContain("~ order of magnitude only");
  expect(text).toContain("5.00e-10 ± 0.40e-10* ");
  expect(text).toMatch(/\* most of this error is due to rates whose uncertainty is assumed/);
  expect(text).toContain("⁷Li(p,α)⁴He*");
  expect(text).toContain("t(β⁻)³He*");
  expect(text).toContain("D/H     2.500e-5 ± 0.030e-5   D/H by number");
});

test("history reads in 80 columns", () => {
  const text = historyText(sampleHistory());
  for (const line of text.split("\n")) expect(displayWidth(line), line).toBeLessThanOrEqual(TEXT_WIDTH);
  expect(text.replace(VERSION, "x.y.z")).toMatchSnapshot();
});

test("concise notation: the error of the last digits in brackets", () => {
  expect(formatConcise(2.525e-5, 3.7e-7)).toBe("2.525(37)e-5");
  expect(formatConcise(0.24684, 0.00011)).toBe("0.24684(11)");
  expect(formatConcise(5.45e-10, 3.9e-11)).toBe("5.45(39)e-10");
  expect(formatConcise(1.5, 0)).toBe("1.5000");
});
