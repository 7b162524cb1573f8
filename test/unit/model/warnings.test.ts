/** What a model refuses from a program, and what it answers with a warning. */
import { expect, test } from "vitest";
import { prepareModel } from "../../../src/model/prepare.ts";
import { loadRates } from "../../../src/node/load-rates.ts";
import type { Keys } from "../../../src/parameters/cosmology.ts";

const model = prepareModel(loadRates(), { network: "twelve", errors: "none" });

test("unknown keys and values of the wrong kind are refused by name", () => {
  const refused = (keys: unknown) => () => model.abundances(keys as Keys);
  expect(refused({ foo: 1 })).toThrow("foo: unknown key");
  expect(refused({ nEff: "3" })).toThrow('nEff = "3": must be a number');
  expect(refused({ omegaB: { value: 0.022 } })).toThrow("{value, sigma}");
  expect(refused({ network: 12 })).toThrow("network = 12: must be a string");
});

test("an expansion far from the usual one, a huge error and an unresolved abundance are warned of", () => {
  const slow = prepareModel(loadRates(), { network: "twelve", errors: "none", expansion: "0.001" }).abundances();
  expect(slow.warnings.join(" ")).toMatch(/factor on H runs from 0.0010/);
  expect(slow.warnings.join(" ")).toMatch(/dToH = -.*below what the integration resolves/);
  expect(model.abundances({ omegaB: { value: 0.02237, sigma: 10 } }).warnings.join(" ")).toMatch(/beyond linear/);
  expect(model.abundances({ tauN: { value: 878.4, sigma: 400 } }).warnings.join(" ")).toMatch(/beyond linear/);
  expect(model.abundances({}).warnings).toEqual([]);
});
