// Free parameters and priors as text, the CMB's measurement by name, and every refusal.
import { expect, test } from "vitest";
import { FREE_PARAMETERS, lnPrior, parseFree, parsePriors } from "../../../src/inference/priors.ts";
import { loadRates } from "../../../src/node/load-rates.ts";
import { eta10PerOmegaB } from "../../../src/parameters/cosmology.ts";

const files = loadRates().files;
const T0 = 2.7255;

test("free parameters come in the order of the results, whatever order they are named in", () => {
  expect(parseFree("nEff, omegaB")).toEqual(["omegaB", "nEff"]);
  expect(parseFree("xiE,tauN,nEff,omegaB")).toEqual(["omegaB", "nEff", "tauN", "xiE"]);
});

test("without a prior a parameter is flat over its range", () => {
  const [omegaB, nEff] = parsePriors(undefined, ["omegaB", "nEff"], files, T0);
  expect(omegaB).toEqual({ key: "omegaB", min: FREE_PARAMETERS.omegaB.min, max: FREE_PARAMETERS.omegaB.max });
  expect(nEff).toMatchObject({ min: 1, max: 6 });
});

test("Gaussian and flat priors, also together; eta10 stands for omega_b", () => {
  const text = "omegaB=0.02237±0.00015,nEff=2:4,nEff=3±0.5";
  const [omegaB, nEff] = parsePriors(text, ["omegaB", "nEff"], files, T0);
  expect(omegaB.gaussian).toEqual({ value: 0.02237, sigma: 0.00015 });
  expect(nEff).toMatchObject({ min: 2, max: 4, gaussian: { value: 3, sigma: 0.5 } });
  const [byEta] = parsePriors("eta10=6.1+-0.04", ["omegaB"], files, T0);
  expect(byEta.gaussian?.value).toBeCloseTo(6.1 / eta10PerOmegaB(T0), 12);
  expect(byEta.gaussian?.sigma).toBeCloseTo(0.04 / eta10PerOmegaB(T0), 12);
});

// Published: omega_b = 0.02237(15), Planck Collaboration 2020, A&A 641, A6, table 2.
test("the CMB's baryon density by name", () => {
  const [omegaB] = parsePriors("planck2018", ["omegaB"], files, T0);
  expect(omegaB.gaussian).toEqual({ value: 0.02237, sigma: 0.00015 });
  expect(omegaB.source).toContain("Planck");
});

test("a Gaussian outside the default range carries the range with it", () => {
  const [omegaB] = parsePriors("omegaB=0.1±0.005", ["omegaB"], files, T0);
  expect(omegaB.min).toBeCloseTo(0.07, 12);
  expect(omegaB.max).toBeCloseTo(0.13, 12);
});

test("the Gaussian factor", () => {
  const priors = parsePriors("omegaB=0.022±0.001", ["omegaB", "nEff"], files, T0);
  expect(lnPrior(priors, [0.024, 3])).toBeCloseTo(-2, 12);
});

test.each([
  ["", /an empty name/],
  ["omegaB,", /an empty name/],
  ["omegab", /accepted are omegaB, nEff, tauN, xiE/],
  ["eta10", /cannot be free/],
  ["omegaB,omegaB", /given twice/],
])("free %s is refused", (text, message) => {
  expect(() => parseFree(text)).toThrow(message);
});

test.each([
  ["omegaB=1", /VALUE±SIGMA/],
  ["omegaB=0.022±0", /error must be positive/],
  ["omegaB=0.022±-0.001", /error must be positive/],
  ["omegaB=1±0.1", /1 is outside what omegaB may be/],
  ["omegaB=x±1", /x is no number/],
  ["omegaB=0.03:0.02", /lower end must be below/],
  ["omegaB=0.01:0.02:0.03", /MIN:MAX/],
  ["omegaB=0.01:0.02,omegaB=0.05±0.001", /30 sigma outside/],
  ["omegaB=0.02±0.001,omegaB=0.03±0.001", /given twice/],
  ["omegaB=0.02±0.001,eta10=6±0.1", /given twice/],
  ["nEff=3±0.2", /nEff is not free; add it to --free omegaB,nEff/],
  ["nosuch=3±0.2", /accepted are omegaB, nEff, tauN, xiE and eta10/],
  ["planck", /or the name of a measurement: planck2018/],
  ["", /KEY=VALUE±SIGMA/],
])("prior %s is refused", (text, message) => {
  expect(() => parsePriors(text, ["omegaB"], files, T0)).toThrow(message);
});

test("a range of N_eff below 0 is refused", () => {
  expect(() => parsePriors("nEff=-1:4", ["nEff"], files, T0)).toThrow(/-1 is outside what nEff may be, 0 to 30/);
});
