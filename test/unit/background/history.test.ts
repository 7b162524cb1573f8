/** Thermal history: conservation laws, scalings, convergence, interpolation, independence of earlier calls, bad input. */
import { describe, expect, test } from "vitest";
import {
  type BackgroundOptions,
  computeThermalHistory,
  END_T9,
  type ThermalHistory,
} from "../../../src/background/history.ts";
import { neutrinoDensityFactor } from "../../../src/background/neutrinos.ts";
import { entropyDensity, plasma } from "../../../src/background/plasma.ts";
import { G_CM3_PER_MEV4, mevToKelvin, NEWTON_G_CGS, t9ToKelvin, t9ToMeV } from "../../../src/constants/units.ts";
import { InputError } from "../../../src/numerics/check.ts";
import { notAKnotSpline } from "../../../src/numerics/interpolate.ts";

const relative = (value: number, reference: number) => Math.abs(value / reference - 1);
const temperatureMeV = (h: ThermalHistory, i: number) => t9ToMeV(Math.exp(-h.s[i]));
const CASES: [string, Partial<BackgroundOptions>][] = [
  ["default", {}],
  ["instantaneous, no QED", { incompleteDecoupling: false, qedE2: false, qedE3: false }],
  ["dark radiation", { deltaNEff: 2 }],
  ["deficit of radiation", { deltaNEff: -3.044 }],
  ["degenerate neutrinos", { xiE: 0.5, xiMu: -1, xiTau: 3 }],
  ["slow expansion", { expansion: (T) => 0.5 + 0.5 / (1 + T / 1e10) }],
];

describe.each(CASES)("%s", (_name, options) => {
  const h = computeThermalHistory(options);
  const terms = { qedE2: options.qedE2 ?? true, qedE3: options.qedE3 ?? true };

  test("uniform ascending grid down to T9 = 0.005, positive finite columns, rising age", () => {
    const last = h.s.length - 1;
    expect(last).toBeGreaterThan(1000);
    expect(h.s[last]).toBeCloseTo(-Math.log(END_T9), 12);
    const step = (h.s[last] - h.s[0]) / last;
    for (let i = 0; i <= last; i++) {
      expect(Math.abs(h.s[i] - h.s[0] - i * step)).toBeLessThan(1e-12);
      for (const column of [h.t, h.TnueOverT, h.TnumuOverT, h.H, h.rho, h.heating])
        expect(column[i] > 0 && column[i] < Number.POSITIVE_INFINITY).toBe(true);
      if (i > 0) expect(h.t[i]).toBeGreaterThan(h.t[i - 1]);
    }
  });

  test("energy_conserved: d(rho a^3) = -P d(a^3)", () => {
    const lnRho = notAKnotSpline(h.s, h.rho.map(Math.log));
    // the first points hold the relaxation from one common temperature (4e-7 in T_nu), narrower than the grid
    for (let i = 5; i < h.s.length - 5; i += 7) {
      const T = temperatureMeV(h, i);
      const em = plasma(T, terms);
      const rho = h.rho[i] / G_CM3_PER_MEV4;
      const P = em.P + (rho - em.rho) / 3;
      const dLnAds = h.H[i] * Math.exp(h.lnDtds[i]);
      expect(relative(lnRho.slope[i], -3 * (1 + P / rho) * dLnAds)).toBeLessThan(1e-7);
    }
  });

  test("scale factor, age and heating are consistent with H and dt/ds", () => {
    const lnA = notAKnotSpline(h.s, h.lnA);
    const lnT = notAKnotSpline(h.s, h.t.map(Math.log));
    const last = h.s.length - 1;
    expect(h.lnA[last]).toBeCloseTo(-Math.log(t9ToKelvin(END_T9)), 12);
    expect(h.t[0] * h.H[0]).toBeCloseTo(0.5, 12);
    for (let i = 5; i < last - 5; i += 7) {
      const dtds = Math.exp(h.lnDtds[i]);
      expect(relative(lnA.slope[i], h.H[i] * dtds)).toBeLessThan(1e-7);
      expect(relative(lnT.slope[i], dtds / h.t[i])).toBeLessThan(1e-7);
      const aT = Math.exp(h.lnA[i]) * mevToKelvin(temperatureMeV(h, i));
      expect(relative(h.heating[i], aT ** -3)).toBeLessThan(1e-12);
    }
  });

  test("the dark radiation is deltaNEff of the final photons", () => {
    const last = h.s.length - 1;
    const ratio = (11 / 4) ** (4 / 3);
    const flavour = (xi: number | undefined) => neutrinoDensityFactor(xi ?? 0) / neutrinoDensityFactor(0);
    const neutrinos =
      ratio *
      (flavour(options.xiE) * h.TnueOverT[last] ** 4 +
        (flavour(options.xiMu) + flavour(options.xiTau)) * h.TnumuOverT[last] ** 4);
    expect(Math.abs(h.nEffComputed - neutrinos - (options.deltaNEff ?? 0))).toBeLessThan(3e-9);
  });

  // instantaneous decoupling depends on where it starts: its splines are tested with the entropy below
  const shifts = options.incompleteDecoupling === false ? [] : [0.5];
  test.each(shifts)("cubic splines agree to 1e-7 with a grid shifted by %d of a step", (shift) => {
    const step = h.s[1] - h.s[0];
    const shifted = computeThermalHistory({ ...options, startMeV: 10 * Math.exp(shift * step), rtol: 1e-12 });
    for (let i = 100; i < shifted.s.length; i += 13) {
      const T = t9ToKelvin(Math.exp(-shifted.s[i]));
      if (T < t9ToKelvin(END_T9) * 1.0001) continue;
      const state = h.at(T);
      expect(relative(state.H, shifted.H[i])).toBeLessThan(1e-7);
      expect(relative(state.TnueOverT, shifted.TnueOverT[i])).toBeLessThan(1e-7);
      expect(relative(state.TnumuOverT, shifted.TnumuOverT[i])).toBeLessThan(1e-7);
      expect(relative(state.rho, shifted.rho[i])).toBeLessThan(1e-7);
      expect(Math.abs(state.lnA - shifted.lnA[i])).toBeLessThan(1e-7);
    }
  });

  test("temperature at an age inverts the age at a temperature", () => {
    for (const T of [3e10, 1e10, 1.234e9, 9e8, 1e8, 6e6])
      expect(relative(h.temperatureAt(h.at(T).t), T)).toBeLessThan(1e-10);
  });
});

test("entropy_conserved: with decoupled neutrinos s_em a^3 and T_nu a stay constant", () => {
  for (const qed of [false, true]) {
    const terms = { qedE2: qed, qedE3: qed };
    const h = computeThermalHistory({ ...terms, incompleteDecoupling: false });
    const invariant = (s: number) => {
      const T = Math.exp(-s);
      const TMeV = t9ToMeV(T);
      return Math.log(entropyDensity(TMeV, plasma(TMeV, terms))) + 3 * h.at(t9ToKelvin(T)).lnA;
    };
    for (let i = 0; i + 1 < h.s.length; i += 11) {
      const between = (h.s[i] + h.s[i + 1]) / 2;
      expect(Math.abs(invariant(h.s[i]) - invariant(h.s[0]))).toBeLessThan(1e-8);
      expect(Math.abs(invariant(between) - invariant(h.s[0]))).toBeLessThan(2e-8);
      const aTnu = (k: number) => h.TnueOverT[k] * temperatureMeV(h, k) * Math.exp(h.lnA[k]);
      expect(relative(aTnu(i), aTnu(0))).toBeLessThan(1e-12);
    }
  }
});

test("Friedmann equation: H^2 = (8 pi/3) G rho, gravity and factor included", () => {
  const h = computeThermalHistory({ gravity: 1.2, expansion: () => 3 });
  for (let i = 0; i < h.s.length; i += 50)
    expect(relative(h.H[i] ** 2, ((9 * 1.2 * 8 * Math.PI) / 3) * NEWTON_G_CGS * h.rho[i])).toBeLessThan(1e-12);
});

test("a constant factor f on H equals a factor f^2 on Newton's constant", () => {
  const factor = computeThermalHistory({ expansion: () => 1.3 });
  const gravity = computeThermalHistory({ gravity: 1.69 });
  expect(Math.abs(factor.nEffComputed - gravity.nEffComputed)).toBeLessThan(1e-9);
  for (let i = 0; i < factor.s.length; i += 50) expect(relative(factor.t[i], gravity.t[i])).toBeLessThan(1e-9);
});

test("very fast expansion decouples neutrinos at once: N_eff of the instantaneous case with the same start", () => {
  const fast = computeThermalHistory({ expansion: () => 1e6 });
  const instant = computeThermalHistory({ incompleteDecoupling: false, startMeV: 10 });
  expect(Math.abs(fast.nEffComputed - instant.nEffComputed)).toBeLessThan(1e-5);
});

test("halving rtol moves N_eff by less than 1e-7, and starting at 20 MeV by less than 1e-5", () => {
  for (const options of [{}, { deltaNEff: 1 }, { deltaNEff: -2 }]) {
    const reference = computeThermalHistory({ ...options, rtol: 1e-12 }).nEffComputed;
    for (const rtol of [1e-9, 5e-10, 1e-11, 5e-12])
      expect(Math.abs(computeThermalHistory({ ...options, rtol }).nEffComputed - reference)).toBeLessThan(1e-7);
    const hotter = computeThermalHistory({ ...options, startMeV: 20 }).nEffComputed;
    expect(Math.abs(hotter - reference)).toBeLessThan(1e-5);
  }
});

test("a history does not depend on the calls before it", () => {
  const first = computeThermalHistory({ deltaNEff: 0.7 });
  computeThermalHistory({ deltaNEff: -3 });
  computeThermalHistory({ qedE2: false, qedE3: false });
  expect(computeThermalHistory({ deltaNEff: 0.7 }).lnA).toEqual(first.lnA);
});

test("the user's factor receives T, TMeV, t and H before the factor", () => {
  let worst = 0;
  const h = computeThermalHistory({
    expansion: (T, TMeV, t, H) => {
      worst = Math.max(worst, relative(mevToKelvin(TMeV), T));
      return H * t > 0 ? 2 : Number.NaN;
    },
  });
  expect(worst).toBeLessThan(1e-12);
  const plain = computeThermalHistory();
  expect(relative(h.H[0], 2 * plain.H[0])).toBeLessThan(1e-12);
  expect(relative(h.t[0], plain.t[0] / 2)).toBeLessThan(1e-12);
});

test("costs are counted", () => {
  const { counts } = computeThermalHistory();
  expect(counts.passes).toBe(1);
  expect(counts.rhs).toBeGreaterThan(counts.steps);
});

test.each<[string, Partial<BackgroundOptions>, RegExp]>([
  ["negative factor", { expansion: (T) => (T > 1e9 ? 1 : -1) }, /expansion = -1 at T = .* K, t = .* s: .*positive/],
  ["factor of zero", { expansion: () => 0 }, /expansion = 0 at T = /],
  ["NaN", { expansion: () => Number.NaN }, /expansion = NaN at T = /],
  ["infinite factor", { expansion: (_T, _M, t) => (t > 100 ? Number.POSITIVE_INFINITY : 1) }, /expansion = Infinity/],
  ["factor that leaves no age at the start", { expansion: (_T, _M, t) => t ** -2 }, /expansion/],
  ["factor that fails in a narrow range", { expansion: (T) => (T > 1e8 && T < 1.02e8 ? -1 : 1) }, /expansion = -1/],
  ["deltaNEff", { deltaNEff: -5 }, /deltaNEff = -5: accepted are -3.5 to 1000/],
  ["deltaNEff NaN", { deltaNEff: Number.NaN }, /deltaNEff = NaN/],
  ["xiE", { xiE: 11 }, /xiE = 11: accepted are -10 to 10/],
  ["startMeV", { startMeV: 1500 }, /startMeV = 1500 MeV: accepted are 2 to 1000 MeV/],
  ["gravity", { gravity: 0 }, /gravity = 0/],
  ["rtol", { rtol: 1 }, /rtol = 1/],
])("%s out of range is refused", (_name, options, message) => {
  expect(() => computeThermalHistory(options)).toThrow(InputError);
  expect(() => computeThermalHistory(options)).toThrow(message);
});

test("look-up outside the history is refused", () => {
  const h = computeThermalHistory();
  for (const T of [1e12, 1e6, -1, Number.NaN]) expect(() => h.at(T)).toThrow(InputError);
  for (const t of [1e-9, 1e12, Number.NaN]) expect(() => h.temperatureAt(t)).toThrow(/the thermal history covers/);
});
