/** Nuclides: names, masses, the table's refusals. */
import { describe, expect, test } from "vitest";
import { ALPHA_PARTICLE_MASS, DEUTERON_MASS, NEUTRON_MASS, PROTON_MASS } from "../../../src/constants/codata.ts";
import { loadRates } from "../../../src/node/load-rates.ts";
import {
  bindingEnergyMeV,
  formatNuclide,
  nuclideFromText,
  nuclideId,
  nuclideNumbers,
  parseNuclides,
} from "../../../src/nuclear/nuclide.ts";

const nuclides = loadRates().nuclides;

// AME2020, Wang et al. 2021, Chin. Phys. C 45, 030003: Z M(1H) + N m_n - M, electron binding neglected; rows nuc-B-*.
test.each([
  ["d", 2.224566, 1e-6],
  ["t", 8.481796, 2e-6],
  ["he3", 7.718041, 2e-6],
  ["he4", 28.295662, 2e-6],
  ["li6", 31.993987, 2e-6],
  ["li7", 39.245081, 2e-6],
  ["be7", 37.600839, 2e-6],
])("binding energy of %s is that of AME2020", (id, published, tolerance) => {
  expect(Math.abs(bindingEnergyMeV(id, nuclides) - published)).toBeLessThanOrEqual(tolerance);
});

// CODATA 2022 gives bare masses independently of atomic masses; electron binding (14 eV in H, 79 eV in He) is neglected here.
test.each([
  ["n", NEUTRON_MASS.value, 2e-6],
  ["p", PROTON_MASS.value, 16e-6],
  ["d", DEUTERON_MASS.value, 16e-6],
  ["he4", ALPHA_PARTICLE_MASS.value, 81e-6],
])("nuclear mass of %s is CODATA's within the electron binding neglected", (id, published, tolerance) => {
  expect(Math.abs(nuclides.get(id)!.nuclearMassMeV - published)).toBeLessThanOrEqual(tolerance);
});

test("every name of the table reads back from its symbol, its numbers and its display", () => {
  expect(nuclides.size).toBe(56);
  for (const { id, Z, A } of nuclides.values()) {
    expect(nuclideNumbers(id)).toEqual({ Z, A });
    expect(nuclideId(Z, A)).toBe(id);
    expect(nuclideFromText(formatNuclide(id))).toBe(id);
    expect(nuclideFromText(id.toUpperCase())).toBe(id);
  }
});

test.each([
  ["3He", "he3"],
  ["³He", "he3"],
  ["He3", "he3"],
  ["1H", "p"],
  ["2H", "d"],
  ["H3", "t"],
  ["alpha", "he4"],
  ["α", "he4"],
  ["a", "he4"],
  ["14N", "n14"],
  ["xx3", undefined],
  ["he1", undefined],
  ["h7", undefined],
])("%s names %s", (text, id) => {
  expect(nuclideFromText(text)).toBe(id);
});

describe("the nuclide table refuses, with file and line,", () => {
  const header = "id,Z,A,mass_excess_keV,mass_excess_uncertainty_keV,spin,half_life_s,source";
  const good = "p,1,1,7288.971064,0.000013,0.5,stable,AME2020";
  test.each([
    ["a missing column", "id,Z,A", good, /:1: column mass_excess_keV.* missing/],
    ["a ragged row", header, "p,1,1", /:2: 3 cells where the header names 8 columns/],
    ["a name that is none", header, good.replace("p,", "q7,"), /:2: id = q7: not a nuclide's name/],
    [
      "a wrong mass number",
      header,
      good.replace("p,1,1", "p,1,2"),
      /:2: p has Z = 1, A = 1, but the row says Z = 1, A = 2/,
    ],
    ["a mass that is no number", header, good.replace("7288.971064", "heavy"), /:2: mass_excess_keV = heavy/],
    ["an empty mass", header, good.replace("7288.971064", ""), /:2: mass_excess_keV = : must be a number/],
    ["NaN", header, good.replace("0.5", "NaN"), /:2: spin = NaN: must be a number of at least 0/],
    ["a spin of 1/3", header, good.replace("0.5", "0.333"), /:2: spin = 0.333: must be a multiple of 1\/2/],
    ["a negative half-life", header, good.replace("stable", "-1"), /:2: half_life_s = -1/],
    ["a missing source", header, good.replace("AME2020", ""), /:2: p: source missing/],
    ["a nuclide listed twice", header, `${good}\n${good}`, /:3: p is listed twice/],
    ["an empty table", header, "", /no rows/],
  ])("%s", (_, head, rows, message) => {
    expect(() => parseNuclides(`# comment\n${head}\n${rows}\n`.slice(10), "user/nuclides.csv")).toThrow(message);
    expect(() => parseNuclides(`${head}\n${rows}\n`, "user/nuclides.csv")).toThrow(/^user\/nuclides\.csv:/);
  });
});
