/** S-factors to rates: closed forms, an independent quadrature, a published pair of S-factor and rate. */
import { describe, expect, test } from "vitest";
import { AVOGADRO_NUMBER, LIGHT_SPEED_KM_S, t9ToMeV } from "../../../src/constants/units.ts";
import { loadRates } from "../../../src/node/load-rates.ts";
import { evaluateRate } from "../../../src/nuclear/rate.ts";
import { parseReactionId } from "../../../src/nuclear/reaction.ts";
import {
  channelOf,
  gamowRange,
  lnGamowRate,
  lnResonanceRate,
  type SFactor,
  tabulatedSFactor,
} from "../../../src/nuclear/s-factor.ts";

const library = loadRates();
const channel = (id: string) => channelOf(parseReactionId(id), library.nuclides);
const smooth = (value: (E: number) => number): SFactor => ({ value, nodes: [] });
const relative = (lnA: number, lnB: number) => Math.abs(Math.expm1(lnA - lnB));
const c = LIGHT_SPEED_KM_S * 1e5; // cm/s

describe("without a Coulomb barrier the integral is elementary", () => {
  const neutron = channel("p-n_gamma-d");
  const thermal = (T9: number) =>
    AVOGADRO_NUMBER * c * Math.sqrt((8 * t9ToMeV(T9)) / (Math.PI * neutron.reducedMassMeV));
  test.each([0.01, 0.5, 10])("T9 = %d", (T9) => {
    const kT = t9ToMeV(T9);
    // constant cross section of 2 b: N_A sigma <v>, <v> = sqrt(8 kT/(pi mu))
    expect(
      relative(
        lnGamowRate(
          smooth((E) => 2 * E),
          neutron,
          T9,
        ),
        Math.log(2e-24 * thermal(T9)),
      ),
    ).toBeLessThan(1e-9);
    // S = 3 MeV b: int S exp(-E/kT) dE = S kT
    expect(
      relative(
        lnGamowRate(
          smooth(() => 3),
          neutron,
          T9,
        ),
        Math.log((3e-24 / kT) * thermal(T9)),
      ),
    ).toBeLessThan(1e-9);
    // sigma v constant, S = sqrt(E): Gamma(3/2) kT^(3/2); the root at E = 0 is the hard case
    const halfGamma = Math.sqrt(Math.PI) / 2;
    const oneOverV = Math.log(1e-24 * halfGamma * kT ** -0.5 * thermal(T9));
    expect(relative(lnGamowRate(smooth(Math.sqrt), neutron, T9), oneOverV)).toBeLessThan(1e-6);
  });
});

// ln of int exp(-E/kT - sqrt(E_G/E)) S(E) dE by the trapezoid rule in ln E, which converges exponentially here.
function trapezoid(S: (E: number) => number, gamowEnergy: number, kT: number): number {
  const peak = (Math.sqrt(gamowEnergy) * kT * 0.5) ** (2 / 3);
  const top = -(3 * peak) / kT;
  let sum = 0;
  const h = 1 / 2000;
  for (let u = Math.log(peak) - 8; u < Math.log(peak) + 8; u += h) {
    const E = Math.exp(u);
    sum += S(E) * E * Math.exp(-E / kT - Math.sqrt(gamowEnergy / E) - top);
  }
  return Math.log(sum * h) + top;
}

describe("with a barrier", () => {
  const cases = ["d-p_gamma-he3", "t-d_n-he4", "he3-he4_gamma-be7", "b11-p_gamma-c12"].flatMap((id) =>
    [0.001, 0.01, 0.3, 2, 10].map((T9) => [id, T9] as const),
  );
  test.each(cases)("%s at T9 = %d agrees with an independent quadrature", (id, T9) => {
    const { reducedMassMeV, gamowEnergyMeV } = channel(id);
    const kT = t9ToMeV(T9);
    const prefactor =
      Math.log(1e-24 * AVOGADRO_NUMBER * c * Math.sqrt(8 / (Math.PI * reducedMassMeV))) - 1.5 * Math.log(kT);
    for (const S of [() => 1, (E: number) => 1 + 2 * E + E * E]) {
      const expected = prefactor + trapezoid(S, gamowEnergyMeV, kT);
      expect(relative(lnGamowRate(smooth(S), channel(id), T9), expected)).toBeLessThan(1e-7);
    }
  });

  // Saddle point with constant S, tau = 3 E0/kT: integral = (2/3) E0 sqrt(3 pi/tau)... F(tau) exp(-tau), F = 1 + 5/(12 tau) - 35/(288 tau^2) + ...
  test("constant S tends to the saddle-point formula with its corrections (Clayton 1983, sec. 4-3)", () => {
    const id = "he3-he4_gamma-be7";
    const { reducedMassMeV, gamowEnergyMeV } = channel(id);
    const kT = t9ToMeV(0.01);
    const E0 = (0.5 * Math.sqrt(gamowEnergyMeV) * kT) ** (2 / 3);
    const tau = (3 * E0) / kT; // 59.6
    const width = 4 * Math.sqrt((E0 * kT) / 3);
    const correction = 1 + 5 / (12 * tau) - 35 / (288 * tau ** 2);
    const lnIntegral = Math.log((Math.sqrt(Math.PI) / 2) * width * correction) - tau;
    const prefactor =
      Math.log(1e-24 * AVOGADRO_NUMBER * c * Math.sqrt(8 / (Math.PI * reducedMassMeV))) - 1.5 * Math.log(kT);
    expect(
      relative(
        lnGamowRate(
          smooth(() => 1),
          channel(id),
          0.01,
        ),
        prefactor + lnIntegral,
      ),
    ).toBeLessThan(2 / tau ** 3);
  });

  test("the Gamow energy of d + p and the window at T9 = 1", () => {
    // E_G = 0.979 MeV Z1^2 Z2^2 mu/u (Clayton 1983, 31.29 Z1 Z2 sqrt(A) keV^(1/2) squared); mu = 0.6717 u
    const { gamowEnergyMeV, reducedMassMeV } = channel("d-p_gamma-he3");
    expect(gamowEnergyMeV / (31.29 ** 2 * 1e-3 * (reducedMassMeV / 931.494))).toBeCloseTo(1, 3);
    // E0 = 0.122 (Z1^2 Z2^2 A T9^2)^(1/3) MeV = 0.107, 1/e half-width sqrt(4 E0 kT/3) = 0.111 MeV; five sigma = 0.391
    const [low, high] = gamowRange(channel("d-p_gamma-he3"), 1);
    expect(low).toBe(0);
    expect(high).toBeCloseTo(0.107 + 0.391, 2);
    expect(gamowRange(channel("p-n_gamma-d"), 1)[0]).toBe(0);
  });
});

describe("resonances", () => {
  const he3he4 = channel("he3-he4_gamma-be7");
  // In cgs: u = 1.66053907e-24 g, k = 1.380649e-16 erg/K, hbar = 1.054571817e-27 erg s, 1 MeV = 1.602176634e-6 erg.
  test("the closed form agrees with a calculation by hand in cgs: 1.5395e11 (A T9)^(-3/2) omega gamma exp(-11.6045 E/T9)", () => {
    const [u, k, hbar, MeV] = [1.66053907e-24, 1.380649e-16, 1.054571817e-27, 1.602176634e-6];
    const mu = (he3he4.reducedMassMeV / 931.49410372) * u;
    for (const T9 of [0.05, 1, 5]) {
      const kT = k * T9 * 1e9;
      const byHand =
        6.02214076e23 * ((2 * Math.PI) / (mu * kT)) ** 1.5 * hbar ** 2 * 1e-9 * MeV * Math.exp((-0.4 * MeV) / kT);
      const ours = lnResonanceRate([{ energyMeV: 0.4, strengthMeV: 1e-9 }], he3he4, T9);
      expect(relative(ours, Math.log(byHand))).toBeLessThan(1e-8);
    }
    const atOne = 6.02214076e23 * ((2 * Math.PI) / (u * k * 1e9)) ** 1.5 * hbar ** 2 * MeV;
    expect(atOne / 1.5395e11).toBeCloseTo(1, 4);
  });
  test("two resonances add", () => {
    const [a, b] = [
      { energyMeV: 0.2, strengthMeV: 1e-12 },
      { energyMeV: 1, strengthMeV: 1e-6 },
    ];
    const sum = Math.exp(lnResonanceRate([a], he3he4, 1)) + Math.exp(lnResonanceRate([b], he3he4, 1));
    expect(lnResonanceRate([a, b], he3he4, 1)).toBeCloseTo(Math.log(sum), 12);
    expect(lnResonanceRate([], he3he4, 1)).toBe(Number.NEGATIVE_INFINITY);
  });
  // Breit-Wigner: sigma = pi hbar^2/(2 mu E) omega Ga Gb/((E - E_r)^2 + G^2/4); as G -> 0 the integral is the closed form,
  // with omega gamma = omega Ga Gb/G. S = E sigma exp(2 pi eta), widths constant.
  test("a Breit-Wigner curve of width kT/1e6 integrates to the closed form, 1e-5", () => {
    const width = 1e-7;
    const Er = 0.35;
    const strength = 1e-10;
    const { reducedMassMeV, gamowEnergyMeV } = he3he4;
    const hbarc2 = 197.3269804 ** 2 * 0.01; // MeV2 b (1 fm2 = 0.01 b)
    const S = (E: number) =>
      ((Math.PI * hbarc2) / (2 * reducedMassMeV)) *
      ((strength * width) / ((E - Er) ** 2 + width ** 2 / 4)) *
      Math.exp(Math.sqrt(gamowEnergyMeV / E));
    const steps = Array.from({ length: 40 }, (_, k) => width * 2 ** (k / 2 - 2));
    const nodes = [...steps.map((s) => Er - s).filter((E) => E > 0.01), Er, ...steps.map((s) => Er + s)].sort(
      (a, b) => a - b,
    );
    const integral = lnGamowRate({ value: S, nodes }, he3he4, 1);
    expect(relative(integral, lnResonanceRate([{ energyMeV: Er, strengthMeV: strength }], he3he4, 1))).toBeLessThan(
      1e-5,
    );
  });
  test("a resonance without energy or strength is refused", () => {
    expect(() => lnResonanceRate([{ energyMeV: -1, strengthMeV: 1 }], he3he4, 1)).toThrow(/resonance energy = -1 MeV/);
    expect(() => lnResonanceRate([{ energyMeV: 1, strengthMeV: 0 }], he3he4, 1)).toThrow(/omega gamma = 0 MeV/);
  });
});

// S(E) of d(p,g)3He by Mossa et al. 2020 (coefficients from memory, as in the file's origin line) and the table in the
// library, which was integrated from it by an independent program: six printed digits.
test("the S-factor polynomial of mossa2020 gives the rates of its file", () => {
  const id = "d-p_gamma-he3";
  const table = library.table(id, "mossa2020");
  const S = (E: number) => {
    const keV = 1000 * Math.min(E, 2);
    return 1e-6 * (0.2121 + 5.975e-3 * keV + 5.463e-6 * keV ** 2 - 1.665e-9 * keV ** 3);
  };
  for (const [i, T9] of table.T9.entries())
    expect(
      relative(lnGamowRate({ value: S, nodes: [2] }, channel(id), T9), Math.log(table.rate[i])),
      `T9 = ${T9}`,
    ).toBeLessThan(1e-5);
});

test("a table of a smooth S gives the rate of that S to 1e-5", () => {
  const S = (E: number) => 1e-4 * (1 + 3 * E) * Math.exp(-0.5 * E);
  const E = Float64Array.from({ length: 41 }, (_, k) => 0.1 * k);
  const id = "d-p_gamma-he3";
  const tabulated = tabulatedSFactor(E, E.map(S));
  for (const T9 of [0.01, 0.1, 1, 4])
    expect(relative(lnGamowRate(tabulated, channel(id), T9), lnGamowRate(smooth(S), channel(id), T9))).toBeLessThan(
      1e-5,
    );
});

// At low T the rate of constant S_eff is that of S(E_0): published S_34(0) lie between 0.53 and 0.60 keV b (Adelberger et al.
// 1998, 2011; Brown et al. 2007; Cyburt & Davids 2008; Kontos et al. 2013); S_12(0) = 2.14e-4 keV b +- 10 per cent.
test.each([
  ["he3-he4_gamma-be7", "iliadis2016", 0.53e-3, 0.6e-3],
  ["he3-he4_gamma-be7", "reaclib", 0.53e-3, 0.6e-3],
  ["d-p_gamma-he3", "iliadis2016", 1.93e-7, 2.35e-7],
  ["d-p_gamma-he3", "mossa2020", 1.93e-7, 2.35e-7],
])("%s of %s at low temperature implies S(0) within the published range", (id, evaluation, low, high) => {
  const T9 = id === "d-p_gamma-he3" ? 0.001 : 0.01; // Gamow peaks at 1 and 25 keV
  const unit = lnGamowRate(
    smooth(() => 1),
    channel(id),
    T9,
  );
  const S0 = Math.exp(evaluateRate(library.table(id, evaluation)).lnRate(T9) - unit);
  expect(S0).toBeGreaterThan(low);
  expect(S0).toBeLessThan(high);
});

test("refused: T9 not positive, three reactants, a table too short, out of order, or not positive", () => {
  expect(() =>
    lnGamowRate(
      smooth(() => 1),
      channel("d-p_gamma-he3"),
      0,
    ),
  ).toThrow(/T9 = 0 GK: must be positive/);
  expect(() => channel("he4-he4-he4_gamma-c12")).toThrow(/belongs to two reactants, here are 3/);
  expect(() => tabulatedSFactor([0, 1, 2], [1, 1, 1])).toThrow(/at least four points, got 3/);
  expect(() => tabulatedSFactor([0, 2, 1, 3], [1, 1, 1, 1])).toThrow(/must increase, but 1 follows 2/);
  expect(() => tabulatedSFactor([0, 1, 2, 3], [1, 0, 1, 1])).toThrow(/S = 0 MeV b: must be positive/);
});

test("cubic S is exact between the points; where a spline of S would turn negative, ln S is interpolated", () => {
  const S = (E: number) => 1 + E - 0.2 * E ** 2 + 0.05 * E ** 3;
  const E = [0, 0.5, 1.1, 2, 3];
  const cubic = tabulatedSFactor(E, E.map(S));
  expect(cubic.interpolation).toBe("S");
  for (const each of [0.2, 0.9, 2.7]) expect(cubic.value(each)).toBeCloseTo(S(each), 13);
  expect([cubic.value(-1), cubic.value(9)]).toEqual([S(0), S(3)]);
  const steep = tabulatedSFactor([0, 1, 2, 3, 4, 5], [1e-3, 1e-3, 1e-3, 10, 1e-3, 1e-3]);
  expect(steep.interpolation).toBe("ln S");
  for (let each = 0; each <= 5; each += 0.01) expect(steep.value(each)).toBeGreaterThan(0);
});
