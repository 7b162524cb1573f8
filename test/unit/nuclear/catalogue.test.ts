/** The catalogue of a library: filters, order, usage by networks, typical uncertainty. */
import { describe, expect, test } from "vitest";
import { loadRates, readRateTexts } from "../../../src/node/load-rates.ts";
import { catalogue, networksOf, typicalFactor } from "../../../src/nuclear/catalogue.ts";
import { buildLibrary } from "../../../src/nuclear/library.ts";

const library = loadRates();
const ids = (...args: Parameters<typeof catalogue>) => [
  ...new Set(catalogue(...args).map(({ table }) => table.reaction.id)),
];

test("everything: 214 evaluations of 180 reactions, decays first, then light targets before heavy ones", () => {
  const all = catalogue(library);
  expect(all).toHaveLength(214);
  const order = ids(library);
  expect(order).toHaveLength(180);
  const decays = order.map((id) => library.table(id, library.evaluations(id)[0]).reaction.isDecay);
  expect(decays.lastIndexOf(true)).toBeLessThan(decays.indexOf(false));
  const place = (id: string) => order.indexOf(id);
  expect(place("p-n_gamma-d")).toBeLessThan(place("d-p_gamma-he3"));
  expect(place("d-p_gamma-he3")).toBeLessThan(place("t-d_n-he4"));
  expect(place("t-d_n-he4")).toBeLessThan(place("b11-p_gamma-c12"));
});

describe("filters", () => {
  test("a network's reactions are those of its file", () => {
    expect(new Set(ids(library, { network: "standard" }))).toEqual(
      new Set(library.network("standard").map(({ reaction }) => reaction)),
    );
  });
  test("a nuclide on either side, not as part of another name", () => {
    const withBoron = ids(library, { nuclide: "b8" });
    expect(withBoron).toContain("be7-p_gamma-b8");
    expect(withBoron).toContain("b8_he4-he4");
    for (const id of withBoron) expect(id.split(/[_-]/)).toContain("b8");
    expect(ids(library, { nuclide: "d", network: "twelve" })).toHaveLength(6);
  });
  test("both together, and nothing left", () => {
    expect(ids(library, { network: "twelve", nuclide: "c12" })).toEqual([]);
  });
});

test("usage: which networks hold a reaction, and which use this evaluation", () => {
  const texts = readRateTexts();
  texts.set("networks/mine.csv", "reaction,evaluation\nd-p_gamma-he3,mossa2020\n");
  const changed = buildLibrary(texts);
  const entries = catalogue(changed, { reaction: "d(p,g)he3" });
  const used = Object.fromEntries(entries.map(({ table, usedBy }) => [table.evaluation, usedBy]));
  expect(used.mossa2020).toEqual(["mine"]);
  expect(used.iliadis2016).toEqual(["twelve", "standard", "extended", "wide"]);
  expect(used.reaclib).toEqual([]);
  expect([...networksOf(changed, "d-p_gamma-he3").keys()]).toEqual(["mine", "twelve", "standard", "extended", "wide"]);
});

test("a typical factor is the mean of ln f_u from T9 = 0.1 to 1", () => {
  expect(typicalFactor(library.table("p-n_gamma-d", "reaclib"))).toBe(1.3);
  const table = library.table("t-d_n-he4", "desouza2019");
  const constant = { ...table, factorUncertainty: table.T9.map(() => 1.1) };
  expect(typicalFactor(constant)).toBeCloseTo(1.1, 12);
  // ln f_u = ln T9 rising over the range has its mean at the geometric middle, T9 = sqrt(0.1)
  const rising = { ...table, factorUncertainty: table.T9.map((T9) => 100 * T9) };
  expect(typicalFactor(rising) / (100 * Math.sqrt(0.1))).toBeCloseTo(1, 10);
});
