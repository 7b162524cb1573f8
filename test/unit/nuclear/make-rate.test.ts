/** From an S-factor file to a rate file: units, errors, coverage, refusals. */
import { describe, expect, test } from "vitest";
import { loadRates } from "../../../src/node/load-rates.ts";
import { makeRateFile, ratesFromSFactor, STANDARD_T9 } from "../../../src/nuclear/make-rate.ts";
import { parseRateFile } from "../../../src/nuclear/parse-rate-file.ts";
import { parseReactionId } from "../../../src/nuclear/reaction.ts";
import { channelOf, lnGamowRate } from "../../../src/nuclear/s-factor.ts";
import { parseSFactorFile } from "../../../src/nuclear/s-factor-file.ts";

const library = loadRates();
const reaction = parseReactionId("d-p_gamma-he3");
const channel = channelOf(reaction, library.nuclides);
const S = (E: number) => 2.1e-7 * (1 + 28 * E);
const rows = (scaleE: number, scaleS: number, from = 0, to = 3, n = 31) =>
  Array.from({ length: n }, (_, k) => from + ((to - from) * k) / (n - 1)).map(
    (E) => `${E * scaleE},${S(E) * scaleS},${0.03 * S(E) * scaleS}`,
  );
const file = "mine.csv";
const read = (text: string) => parseSFactorFile({ file, text });
const inMeV = ["E_MeV,S_MeV_b,sigma_MeV_b", ...rows(1, 1)].join("\n");

describe("units", () => {
  test.each([
    ["in the header, keV", ["E_keV,S_keV_b,sigma_keV_b", ...rows(1e3, 1e3)]],
    ["mixed", ["E_keV,S_eV_b,sigma_eV_b", ...rows(1e3, 1e6)]],
    ["in a unit row", ["E,S,sigma", "keV,eV b,eV b", ...rows(1e3, 1e6)]],
    ["in both, agreeing", ["E_MeV,S_MeV_b,sigma_MeV_b", "MeV,MeV b,MeV barn", ...rows(1, 1)]],
  ])("%s", (_, lines) => {
    const [a, b] = [read(lines.join("\n")), read(inMeV)];
    for (let i = 0; i < b.E.length; i++) {
      expect(a.E[i]).toBeCloseTo(b.E[i], 12);
      expect(a.S[i] / b.S[i]).toBeCloseTo(1, 12);
      expect(a.sigma![i] / b.sigma![i]).toBeCloseTo(1, 12);
    }
  });
});

test("a table without errors and with resonances", () => {
  const data = read(`# resonance: E = 150 keV, omega_gamma = 2.5e-3 eV\n${inMeV.replaceAll(/,[^,\n]*$/gm, "")}`);
  expect(data.sigma).toBeUndefined();
  expect(data.resonances).toEqual([{ energyMeV: 0.15, strengthMeV: 2.5e-9 }]);
});

test("rates follow S, and the factor uncertainty is that of S: 3 per cent at all temperatures", () => {
  const points = ratesFromSFactor(read(inMeV), channel);
  expect(points.map((each) => each.T9)).toEqual([...STANDARD_T9]);
  expect(STANDARD_T9.length).toBe(60);
  for (const { T9, rate, factorUncertainty, outside } of points) {
    expect(Math.abs(rate / Math.exp(lnGamowRate({ value: S, nodes: [] }, channel, T9)) - 1)).toBeLessThan(
      1e-5 + outside,
    ); // outside, S is held
    expect(factorUncertainty).toBeCloseTo(1.03, 6);
    expect(outside).toBeLessThan(T9 <= 3 ? 0.01 : 1);
  }
});

test("the file that is written is one the loader takes, with range and provenance", () => {
  const { text } = makeRateFile(
    read(inMeV),
    { reaction, citation: "Smith 2027, private", from: file, entered: "2027-01-31; test" },
    library.nuclides,
  );
  const table = parseRateFile({ file: "my/d-p_gamma-he3/smith2027.ecsv", text }, library.nuclides);
  expect(table).toMatchObject({ evaluation: "smith2027", uncertaintyBasis: "published", tableT9: [0.001, 10] });
  expect(table.validT9[0]).toBe(0.001);
  expect(table.validT9[1]).toBeGreaterThan(2);
  expect(table.validT9[1]).toBeLessThan(10);
  expect(table.origin).toMatch(/S-factor table mine\.csv, 31 points from 0 to 3 MeV/);
});

test("without errors the uncertainty is marked as assumed; a stated range is kept", () => {
  const { text } = makeRateFile(
    read(inMeV.replaceAll(/,[^,\n]*$/gm, "")),
    { reaction, citation: "Smith 2027", from: file, entered: "2027-01-31; test", validT9: [0.01, 1], note: "own" },
    library.nuclides,
  );
  const table = parseRateFile({ file: "my/d-p_gamma-he3/smith2027.ecsv", text }, library.nuclides);
  expect(table.uncertaintyBasis).toBe("assumed");
  expect(table.note).toMatch(/^ASSUMED .*; own$/);
  expect(table.validT9).toEqual([0.01, 1]);
});

test("a table from 300 keV on covers high temperatures only", () => {
  const data = read(["E_MeV,S_MeV_b,sigma_MeV_b", ...rows(1, 1, 0.3, 8)].join("\n"));
  const points = ratesFromSFactor(data, channel);
  expect(points[0].outside).toBeGreaterThan(0.999);
  expect(() =>
    makeRateFile(
      read(["E_MeV,S_MeV_b,sigma_MeV_b", ...rows(1, 1, 0.9, 1)].join("\n")),
      { reaction, citation: "Smith 2027", from: file, entered: "2027-01-31; test" },
      library.nuclides,
    ),
  ).toThrow(/mine\.csv: energies 0\.9 to 1 MeV cover the Gamow window at no temperature/);
});

describe("an S-factor file is refused for", () => {
  const lines = (change: (all: string[]) => void) => {
    const all = inMeV.split("\n");
    change(all);
    return all.join("\n");
  };
  test.each<[string, string, RegExp]>([
    [
      "energies out of order",
      lines((all) => all.splice(3, 0, all[5])),
      /^mine\.csv:5: energies must increase down the table, but 0\.2 MeV follows 0\.4 MeV/,
    ],
    ["a negative S", inMeV.replace(/\n0,[^,]*/, "\n0,-1e-7"), /mine\.csv:2: S_MeV_b = -1e-7: must be positive/],
    ["S = 0", inMeV.replace(/\n0,[^,]*/, "\n0,0"), /mine\.csv:2: S_MeV_b = 0: must be positive/],
    ["a negative energy", inMeV.replace("\n0,", "\n-0.1,"), /mine\.csv:2: E_MeV = -0\.1: must not be negative/],
    [
      "a negative error",
      lines((all) => {
        all[1] = `${all[1].slice(0, all[1].lastIndexOf(","))},-1`;
      }),
      /mine\.csv:2: sigma_MeV_b = -1: must not be negative/,
    ],
    [
      "three points",
      inMeV.split("\n").slice(0, 4).join("\n"),
      /mine\.csv:4: 3 points: an S-factor table needs at least 4/,
    ],
    ["a unit unknown", inMeV.replace("E_MeV", "E_GeV"), /mine\.csv:1: column E_GeV: unknown unit/],
    ["a unit of S that is an energy", inMeV.replace("S_MeV_b", "S_MeV"), /column S_MeV: unknown unit/],
    ["no unit", inMeV.replace("E_MeV", "E"), /column E has no unit: name it E_MeV, or add a row of units/],
    [
      "a unit row that contradicts",
      inMeV.replace("\n", "\nkeV,MeV b,MeV b\n"),
      /mine\.csv:2: unit of E_MeV is keV, which contradicts the header/,
    ],
    [
      "a unit row with a cross section",
      inMeV.replace(/^.*\n/, "E,S,sigma\nMeV,keV,keV b\n"),
      /mine\.csv:2: unit of S: keV is not known; accepted are eV b, keV b or MeV b/,
    ],
    ["no S", "E_MeV,sigma_MeV_b\n1,2\n", /no column for the S-factor \(S_MeV_b\)/],
    ["a column unknown", "E_MeV,S_MeV_b,x\n1,2,3\n", /column x: expected E_MeV/],
    ["a word", inMeV.replace("\n0,", "\nzero,"), /mine\.csv:2: E_MeV = zero: must be a number/],
    ["a ragged row", inMeV.replace("\n0,", "\n0,1,"), /mine\.csv:2: 4 cells/],
    ["nothing", "", /mine\.csv:1: the file is empty/],
    ["a header alone", "E_MeV,S_MeV_b\n", /mine\.csv:1: no rows below the header/],
    [
      "an unknown unit of energy",
      "E,S\nfoo,MeV b\n1,2\n",
      /mine\.csv:2: unit of E: foo is not known; accepted are eV, keV/,
    ],
    ["a resonance without strength", `# resonance: E = 0.1 MeV\n${inMeV}`, /mine\.csv:1: write `# resonance: E = /],
    ["a resonance in other units", `# resonance: E = 0.1 GeV, omega_gamma = 1 eV\n${inMeV}`, /mine\.csv:1: write/],
  ])("%s", (_, text, message) => {
    expect(() => read(text)).toThrow(message);
  });
});
