// Scans and grids: the values of single runs to the last bit, bands within a per cent, axes of any key, checks before work.
import { describe, expect, test } from "vitest";
import { loadRates } from "../../../src/node/load-rates.ts";
import { InputError } from "../../../src/numerics/check.ts";
import { numericColumn } from "../../../src/numerics/table.ts";
import type { Estimate } from "../../../src/output/result.ts";
import { computeAbundances } from "../../../src/requests/abundances.ts";
import { checkedText, computeGrid } from "../../../src/requests/grid.ts";
import { sha256 } from "../../../src/requests/rates-digest.ts";
import { computeScan } from "../../../src/requests/scan.ts";

const library = loadRates();
const twelve = { network: "twelve" } as const;

test("every value of a scan is that of a single run, and its error within one per cent of it", async () => {
  const { results } = await computeScan({ ...twelve, over: ["eta10=1:30:40log"] }, library);
  const { table } = results;
  expect(table.columns.slice(0, 4)).toEqual(["eta10", "Yp", "Yp_sigma", "YpMass"]);
  expect(table.rows.length).toBe(40);
  for (const i of [0, 7, 13, 20, 28, 39]) {
    const row = table.rows[i] as number[];
    const single = await computeAbundances({ ...twelve, eta10: row[0] }, library);
    for (const [name, { value, sigma = 0 }] of Object.entries(single.results.abundances) as [string, Estimate][]) {
      expect(row[table.columns.indexOf(name)], `${name} at eta10 = ${row[0]}`).toBe(value);
      const found = row[table.columns.indexOf(`${name}_sigma`)];
      expect(Math.abs(found - sigma), `error of ${name} at eta10 = ${row[0]}`).toBeLessThanOrEqual(0.01 * sigma);
    }
  }
});

test("a scan in decreasing order, a list out of order and two axes give the rows asked for", async () => {
  const none = { ...twelve, errors: "none" } as const;
  const down = await computeScan({ ...none, over: ["tauN=885:875:3"] }, library);
  expect(numericColumn(down.results.table, "tauN")).toEqual([885, 880, 875]);
  const two = await computeScan({ ...none, over: ["scale:d(p,g)he3=0.9,1.1", "nEff=4,3"] }, library);
  expect(two.results.table.columns.slice(0, 3)).toEqual(["scale:d-p_gamma-he3", "nEff", "Yp"]);
  const single = await computeAbundances({ ...none, nEff: 3, scales: { "d(p,g)he3": 0.9 } }, library);
  expect(two.results.table.rows[1].slice(0, 3)).toEqual([0.9, 3, single.results.abundances.Yp?.value]);
});

test("sampled errors of a scan are those of single runs", async () => {
  const keys = { ...twelve, samples: 4, seed: 5 };
  const { results } = await computeScan({ ...keys, over: ["eta10=4,6"] }, library);
  const single = await computeAbundances({ ...keys, eta10: 6 }, library);
  expect(results.table.rows[1][2]).toBe(single.results.abundances.Yp?.sigma);
});

test("a failing point is named", async () => {
  const scan = computeScan({ ...twelve, errors: "none", over: ["omegaB=0.02,0.03"], expansion: "T - 1e9" }, library);
  await expect(scan).rejects.toThrow(InputError);
  await expect(scan).rejects.toThrow(/at omegaB = 0.02|expansion/);
});

describe("refused before anything is computed", () => {
  test.each([
    ["no axis", {}, /scan: 0 axes given/],
    ["three axes", { over: ["omegaB=0.02,0.03", "nEff=2,3", "tauN=870,880"] }, /scan: 3 axes given, 1 to 2 accepted/],
    ["too many points", { over: ["omegaB=0.02:0.03:10000", "nEff=2:3:10000"] }, /100000000 points need about .* GB/],
    ["unknown network", { over: ["nEff=2,3"], network: "nosuch" }, /nosuch/],
    ["unknown reaction", { over: ["scale:d(x,g)he3=1,2"] }, /x/],
  ])("%s", async (_, keys, message) => {
    await expect(computeScan(keys, library)).rejects.toThrow(message);
  });

  test("a grid of one axis", async () => {
    await expect(computeGrid({ over: ["nEff=2,3"] }, library)).rejects.toThrow(/grid: 1 axes given, 2 to 6 accepted/);
  });

  test("a part that is to be checked", async () => {
    const keys = { over: ["nEff=2,3", "omegaB=0.02,0.03"], part: "1/2", check: true };
    await expect(computeGrid(keys, library)).rejects.toThrow(/needs the whole grid/);
  });
});

test("the parts of a grid are the rows of the whole, with their own checksum", async () => {
  const keys = { ...twelve, over: ["omegaB=0.02:0.024:4", "deltaNEff=-1:1:3"] };
  const whole = await computeGrid(keys, library);
  const parts = await Promise.all(["1/3", "2/3", "3/3"].map((part) => computeGrid({ ...keys, part }, library)));
  expect(parts.flatMap((part) => part.results.table.rows)).toEqual(whole.results.table.rows);
  expect(parts.map((part) => part.results.part)).toEqual([
    { k: 1, n: 3, from: 1, to: 4, points: 12 },
    { k: 2, n: 3, from: 5, to: 8, points: 12 },
    { k: 3, n: 3, from: 9, to: 12, points: 12 },
  ]);
  for (const { results } of [whole, ...parts]) expect(results.checksum).toBe(await sha256(checkedText(results.table)));
});

// Requirement of the grid: below 1e-5 in Yp and 1e-4 relative in D/H with the spacing that the help recommends.
test("a grid of the recommended spacing is interpolated within its promise", async () => {
  const keys = { ...twelve, errors: "none", over: ["omegaB=0.018:0.027:12", "deltaNEff=-2:2:8"], check: true };
  const { check } = (await computeGrid(keys, library)).results;
  expect(check?.points).toBeGreaterThanOrEqual(50);
  expect(check?.largest.Yp.absolute).toBeLessThan(1e-5);
  expect(check?.largest.dToH.relative).toBeLessThan(1e-4);
  expect(check?.largest.Yp.absolute).toBeGreaterThan(0);
});
