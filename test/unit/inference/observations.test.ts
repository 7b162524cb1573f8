// Observed abundances: the sets that ship, values as text, and every refusal.
import { expect, test } from "vitest";
import { observationSetNames, parseObserved, readObservations } from "../../../src/inference/observations.ts";
import { loadRates } from "../../../src/node/load-rates.ts";
import { filesFromTexts } from "../../../src/nuclear/library.ts";

const files = loadRates().files;

// Published: D/H = 2.527(30)e-5, Cooke, Pettini & Steidel 2018, ApJ 855, 102; 3He/H limit 1.1(0.2)e-5, Bania, Rood & Balser 2002.
test("the recommended set holds each abundance once, with source and year", () => {
  const set = readObservations(files, "recommended");
  expect(set.map((row) => row.abundance).sort()).toEqual(["Yp", "dToH", "he3ToH", "li7ToH"]);
  expect(set.find((row) => row.abundance === "dToH")).toMatchObject({ value: 2.527e-5, sigma: 0.03e-5, date: 2018 });
  expect(set.find((row) => row.abundance === "he3ToH")).toMatchObject({ value: 1.1e-5, kind: "upper-limit" });
  for (const row of set) expect(row.source.length, row.abundance).toBeGreaterThan(10);
});

test("every set that ships is read, the catalogue by the names of its rows", () => {
  const names = observationSetNames(files);
  expect(names).toEqual(expect.arrayContaining(["recommended", "recent", "catalogue"]));
  for (const name of names) expect(readObservations(files, name).length).toBeGreaterThan(3);
  expect(readObservations(files, "catalogue").every((row) => row.name !== undefined)).toBe(true);
});

test("values as text enter the likelihood, what is not named is compared with the recommended set", () => {
  for (const sign of ["±", "+-", "+/-"]) {
    const { fitted, compared } = parseObserved(`D/H=2.527e-5${sign}0.030e-5, Yp=0.245${sign}0.003`, files);
    expect(fitted.map(({ abundance, value, sigma }) => [abundance, value, sigma])).toEqual([
      ["dToH", 2.527e-5, 0.03e-5],
      ["Yp", 0.245, 0.003],
    ]);
    expect(compared.map((row) => row.abundance).sort()).toEqual(["he3ToH", "li7ToH"]);
  }
});

test("of a set D/H and Yp are fitted; lithium only where it is asked for by itself", () => {
  const set = parseObserved("recommended", files);
  expect(set.fitted.map((row) => row.abundance).sort()).toEqual(["Yp", "dToH"]);
  const asked = parseObserved("recent,7Li/H=1.6e-10±0.3e-10", files);
  expect(asked.fitted.map((row) => row.abundance).sort()).toEqual(["Yp", "dToH", "li7ToH"]);
  expect(asked.fitted.find((row) => row.abundance === "li7ToH")).toMatchObject({ basis: "given" });
});

test("a value given by itself replaces the set's, and may be a measurement of the catalogue", () => {
  const { fitted } = parseObserved("recommended,D/H=cooke2016,Yp=0.25±0.01", files);
  expect(fitted.find((row) => row.abundance === "dToH")).toMatchObject({ value: 2.547e-5, sigma: 0.033e-5 });
  expect(fitted.find((row) => row.abundance === "Yp")).toMatchObject({ value: 0.25, sigma: 0.01 });
});

test.each([
  ["nosuch=1±1", /nosuch is no abundance/],
  ["dToHH=1±1", /did you mean dToH/],
  ["=1±1", /no abundance named/],
  ["D/H=2.5e-5±0", /error must be positive/],
  ["D/H=2.5e-5±-1e-7", /error must be positive/],
  ["D/H=2.5e-5", /VALUE±SIGMA/],
  ["D/H=", /VALUE±SIGMA/],
  ["D/H=x", /neither VALUE±SIGMA nor a measurement/],
  ["D/H=1±2±3", /VALUE±SIGMA/],
  ["D/H=1e-5x±1e-6", /is no number/],
  ["D/H=NaN±1e-6", /no number|neither/],
  ["D/H=0±1e-6", /between 0 and 1/],
  ["Yp=1.2±0.1", /between 0 and 1/],
  ["D/H=2.5e-5±1e-7,dToH=2.6e-5±1e-7", /given twice/],
  ["recommended,recent", /two sets/],
  ["recomended", /did you mean recommended/],
  ["catalogue", /choose one/],
  ["", /empty entry/],
  ["Yp=0.25±0.01,", /empty entry/],
  ["../secret", /no such set/],
])("observed %s is refused in one line", (text, message) => {
  expect(() => parseObserved(text, files)).toThrow(message);
});

test("a damaged set is refused with file and line", () => {
  const header = "abundance,value,sigma,kind,source,date,basis,note";
  const set = (row: string) =>
    filesFromTexts(
      new Map([["observations/mine.csv", `${header}\nYp,0.25,0.01,measurement,A 2020,2020,given,\n${row}`]]),
    );
  for (const [row, message] of [
    ["D/H,2.5e-5,0,measurement,A 2020,2020,given,", /mine.csv:3: value and sigma must be positive/],
    ["D/H,2.5e-5,1e-7,guess,A 2020,2020,given,", /mine.csv:3: kind guess/],
    ["D/H,2.5e-5,1e-7,measurement,,2020,given,", /mine.csv:3: source is missing/],
    ["Yp,0.25,0.01,measurement,B 2021,2021,given,", /mine.csv:3: Yp is listed twice/],
    ["D,2.5e-5,1e-7,measurement,A,2020,given,", /mine.csv:3: abundance: D is no abundance/],
  ] as const)
    expect(() => readObservations(set(row), "mine")).toThrow(message);
});
