/** The thermal history: photon and neutrino temperatures, expansion rate, time and scale factor from 10 MeV to 0.4 keV. */
import { G_CM3_PER_MEV4, GK_PER_MEV, NEWTON_G_CGS, t9ToKelvin } from "../constants/units.ts";
import { InputError, requirePositive, requireRange } from "../numerics/check.ts";
import { notAKnotSpline, type Spline } from "../numerics/interpolate.ts";
import { integrateSmooth } from "../numerics/ode-smooth.ts";
import {
  effectiveNeutrinoNumber,
  energyFromPlasma,
  energyToElectronNeutrinos,
  exchangeWeights,
  neutrinoDensityFactor,
  RHO_PER_NEFF,
} from "./neutrinos.ts";
import { PLASMA_COLUMNS, plasmaTable } from "./plasma.ts";

/** Factor on H at T [K], TMeV, t [s] and H [1/s], the last before the factor. */
export type ExpansionFactor = (T: number, TMeV: number, t: number, H: number) => number;

export interface BackgroundOptions {
  /** Dark radiation: delta-N_eff x 7/8 (4/11)^(4/3) rho_gamma of the end, scaled as a^-4. */
  readonly deltaNEff: number;
  /** Degeneracies mu/T of the three flavours. */
  readonly xiE: number;
  readonly xiMu: number;
  readonly xiTau: number;
  /** Finite-temperature QED terms of order e^2 and e^3. */
  readonly qedE2: boolean;
  readonly qedE3: boolean;
  /** Three neutrino temperatures with energy exchange; false: instantaneous decoupling at `startMeV`. */
  readonly incompleteDecoupling: boolean;
  /** Factor on Newton's G. */
  readonly gravity?: number;
  readonly expansion?: ExpansionFactor;
  /** Photon temperature of the start [MeV]: 10, or 20 for instantaneous decoupling, unless given. */
  readonly startMeV?: number;
  /** Relative error control of the integration. */
  readonly rtol?: number;
}

export const BACKGROUND_DEFAULTS = {
  deltaNEff: 0,
  xiE: 0,
  xiMu: 0,
  xiTau: 0,
  qedE2: true,
  qedE3: true,
  incompleteDecoupling: true,
  gravity: 1,
  rtol: 1e-9,
} as const satisfies BackgroundOptions;

/** Options with every default filled in. */
type Complete = BackgroundOptions & { readonly gravity: number; readonly rtol: number };

/** Start of the history [MeV] unless `startMeV` is given. */
export const START_MEV = { threeTemperatures: 10, instantaneous: 20 } as const;
/** Photon temperature of the end [GK]: 0.43 keV. */
export const END_T9 = 0.005;
/** Largest spacing of the output grid in ln T. */
const GRID_SPACING = 1 / 102.4;

/** The state of the Universe at one photon temperature. */
export interface ThermalState {
  readonly T: number;
  readonly t: number;
  readonly lnA: number;
  readonly TnueOverT: number;
  readonly TnumuOverT: number;
  readonly H: number;
  /** dt/ds [s]. */
  readonly dtds: number;
  /** Energy density without baryons [g/cm3]. */
  readonly rho: number;
}

/**
 * Columns over s = -ln T9, which is uniform and ascending (cooling). Baryons are *not* in it, so that one history serves
 * every omega_b: a consumer adds them by H -> H sqrt(1 + rho_b/rho) and dt/ds -> dt/ds / sqrt(1 + rho_b/rho).
 */
export interface ThermalHistory {
  readonly s: Float64Array;
  /** Age [s]; 1/(2H) at the start. */
  readonly t: Float64Array;
  /** ln of the scale factor, with a T = 1 K at the end. */
  readonly lnA: Float64Array;
  readonly TnueOverT: Float64Array;
  readonly TnumuOverT: Float64Array;
  /** The same array as TnumuOverT: both flavours share one temperature. */
  readonly TnutauOverT: Float64Array;
  /** Expansion rate [1/s], with the user's factor, without baryons. */
  readonly H: Float64Array;
  /** ln(dt/ds [s]), without baryons. */
  readonly lnDtds: Float64Array;
  /** Total energy density without baryons [g/cm3]. */
  readonly rho: Float64Array;
  /** [(aT)_end/(aT)]^3 = n_b/(eta n_gamma(T)), eta being today's. */
  readonly heating: Float64Array;
  readonly nEffComputed: number;
  /** T_gamma/T_nue at the end. */
  readonly photonToNeutrinoTemperature: number;
  readonly counts: HistoryCounts;
  /** State at T [K], interpolated by cubic splines. @throws {InputError} outside the range of the history */
  at(T: number): ThermalState;
  /** Photon temperature [K] at age t [s]. @throws {InputError} outside the range of the history */
  temperatureAt(t: number): number;
}

/** Cost of a history: odex steps, rejected steps, evaluations, passes until the dark radiation is consistent. */
export interface HistoryCounts {
  readonly steps: number;
  readonly rejected: number;
  readonly rhs: number;
  readonly passes: number;
}

/** H^2 = FRIEDMANN rho: 8 pi G/3 with rho in MeV4, [1/(s2 MeV4)]. */
const FRIEDMANN = ((8 * Math.PI) / 3) * NEWTON_G_CGS * G_CM3_PER_MEV4;
/** rho_gamma/T^4. */
const PHOTONS = Math.PI ** 2 / 15;

/** Everything the right-hand side computes at one point; rewritten by each evaluation. */
interface Scratch {
  /** Total energy density over T^4. */
  rho: number;
  H: number;
  dtds: number;
  plasma: Float64Array;
  weights: Float64Array;
}

/**
 * The equations in s = -ln T9 for y = [ln(aT), ln(a T_nue), ln(a T_numu), ln t], the first three relative to (aT) of the
 * start: d rho_em/dt = -3H(rho + P)_em - Q gives dt/ds = (d rho_em/d ln T)/[3H(rho + P)_em + Q], Q the energy that the
 * neutrinos gain; d ln(a T_nu)/dt = (d rho_nu/dt)_exchange/(4 rho_nu).
 * @param lnHeating ln of (aT)_end/(aT)_start, which sets the dark radiation
 */
function equations(o: Complete, lnHeating: number) {
  const table = plasmaTable(o);
  const weights = exchangeWeights();
  const nE = neutrinoDensityFactor(o.xiE);
  const nMuTau = neutrinoDensityFactor(o.xiMu) + neutrinoDensityFactor(o.xiTau);
  const dark = o.deltaNEff * RHO_PER_NEFF * PHOTONS;
  const hubble = Math.sqrt(FRIEDMANN * o.gravity);
  const lnGK = Math.log(GK_PER_MEV);
  const scratch: Scratch = {
    rho: 0,
    H: 0,
    dtds: 0,
    plasma: new Float64Array(PLASMA_COLUMNS),
    weights: new Float64Array(4),
  };
  const dydt = [0, 0, 0, 0];
  /** Total rho/T^4 from the plasma columns already in scratch. */
  const density = (u: number, v: number, lnAT: number) =>
    scratch.plasma[0] + nE * u ** 4 + nMuTau * v ** 4 + dark * Math.exp(4 * (lnHeating - lnAT));
  const expansionRate = (lnT: number, rho: number, t: number) => {
    const T = Math.exp(lnT);
    const H = hubble * Math.sqrt(rho) * T * T;
    return o.expansion ? H * checkedFactor(o.expansion, T, t, H) : H;
  };
  /** d/ds of y, in an array that is reused. */
  const rhs = (s: number, y: ArrayLike<number>): number[] => {
    const lnT = -s - lnGK;
    const T = Math.exp(lnT);
    table.evaluate(lnT, scratch.plasma);
    const u = Math.exp(y[1] - y[0]);
    const v = Math.exp(y[2] - y[0]);
    const rho = density(u, v, y[0]);
    const t = Math.exp(y[3]);
    const H = expansionRate(lnT, rho, t);
    const [, enthalpy, heatCapacity] = scratch.plasma;
    let gainE = 0;
    let gainMu = 0;
    let exchange = 0;
    const T4 = T ** 4;
    if (o.incompleteDecoupling) {
      weights.evaluate(lnT, scratch.weights);
      const w = scratch.weights;
      gainE = energyFromPlasma(w[0], w[1], T, u * T) / T4;
      gainMu = energyFromPlasma(w[2], w[3], T, v * T) / T4;
      exchange = energyToElectronNeutrinos(u * T, v * T) / T4;
    }
    const dtds = heatCapacity / (3 * H * enthalpy + gainE + 2 * gainMu);
    dydt[0] = H * dtds - 1;
    dydt[1] = ((gainE + 2 * exchange) / (4 * nE * u ** 4)) * dtds;
    dydt[2] = ((2 * gainMu - 2 * exchange) / (4 * nMuTau * v ** 4)) * dtds;
    dydt[3] = dtds / t;
    scratch.rho = rho;
    scratch.H = H;
    scratch.dtds = dtds;
    return dydt;
  };
  /** Age at the start, t = 1/(2H), where H may depend on t through the user's factor. */
  const startTime = (lnT: number) => {
    table.evaluate(lnT, scratch.plasma);
    const rho = density(1, 1, 0);
    let t = 1 / (2 * hubble * Math.sqrt(rho) * Math.exp(2 * lnT));
    for (let i = 0; o.expansion && i < 50; i++) {
      const next = 1 / (2 * expansionRate(lnT, rho, t));
      if (Math.abs(next / t - 1) < 1e-14) break;
      t = next;
    }
    return t;
  };
  return { rhs, startTime, scratch, lnGK };
}

/** @throws {InputError} unless the user's factor is finite and positive */
function checkedFactor(expansion: ExpansionFactor, TMeV: number, t: number, H: number): number {
  const T = TMeV * GK_PER_MEV * 1e9;
  const factor = expansion(T, TMeV, t, H);
  if (!(factor > 0 && factor < Number.POSITIVE_INFINITY))
    throw new InputError(
      "expansion",
      `expansion = ${factor} at T = ${T.toPrecision(6)} K, t = ${t.toPrecision(6)} s: the factor on H must be positive and finite from ${END_T9} GK up to the start`,
    );
  return factor;
}

/** ln of (aT)_end/(aT)_start in the standard case: only the point from which the dark radiation is iterated. */
const LN_HEATING_GUESS = 0.3354;
/** Agreement demanded between the ln(aT) assumed for the dark radiation and the one that results. */
const DARK_TOLERANCE = 1e-10;
const MAX_PASSES = 20;

/** Uniform grid in s = -ln T9 from the start to END_T9. */
function outputGrid(startMeV: number): Float64Array {
  const first = -Math.log(startMeV * GK_PER_MEV);
  const last = -Math.log(END_T9);
  const intervals = Math.ceil((last - first) / GRID_SPACING);
  return Float64Array.from({ length: intervals + 1 }, (_, i) => first + ((last - first) * i) / intervals);
}

/** @throws {InputError} naming the option out of range */
function checkOptions(o: Complete, startMeV: number): void {
  requireRange("deltaNEff", o.deltaNEff, "", -3.044, 1000);
  requireRange("xiE", o.xiE, "", -10, 10);
  requireRange("xiMu", o.xiMu, "", -10, 10);
  requireRange("xiTau", o.xiTau, "", -10, 10);
  requireRange("startMeV", startMeV, "MeV", 2, 1000);
  requireRange("rtol", o.rtol, "", 1e-13, 1e-4);
  requirePositive("gravity", o.gravity, "");
}

/**
 * Integrates T_gamma, T_nue, T_numu = T_nutau, a and t from `startMeV` to T9 = 0.005 with odex, s = -ln T9 as variable.
 * Start: one temperature, t = 1/(2H). Without incomplete decoupling the neutrinos keep a T_nu from the start on and a
 * follows from entropy conservation, only t being integrated. Dark radiation scales with the (aT) of the end, so the
 * history is repeated until both agree to 1e-10. Degeneracies count in the energy densities, not in the exchange rates.
 *
 * @param options departures from BACKGROUND_DEFAULTS
 * @returns columns on a uniform grid of about 1030 points, good to 1e-8 for cubic splines
 * @throws {InputError} for an option out of range, or a user's factor that is not positive and finite throughout
 * @throws {CalculationError} if the integration fails
 * @see Escudero 2020, JCAP 05, 048 (arXiv:2001.04466); Bennett et al. 2021, JCAP 04, 073
 */
export function computeThermalHistory(options: Partial<BackgroundOptions> = {}): ThermalHistory {
  const o: Complete = { ...BACKGROUND_DEFAULTS, ...options };
  const startMeV = o.startMeV ?? (o.incompleteDecoupling ? START_MEV.threeTemperatures : START_MEV.instantaneous);
  checkOptions(o, startMeV);
  const s = outputGrid(startMeV);
  const columns = Array.from({ length: 8 }, () => new Float64Array(s.length));
  const [t, lnAT, nue, numu, H, lnDtds, rho, heating] = columns;
  const total = { steps: 0, rejected: 0, rhs: 0, passes: 0 };
  let lnHeating = o.incompleteDecoupling ? LN_HEATING_GUESS : entropyHeating(o, s[0], s[s.length - 1]);
  for (;;) {
    const end = integrate(o, lnHeating, s, (i, y, scratch) => {
      t[i] = Math.exp(y[3]);
      lnAT[i] = y[0];
      nue[i] = Math.exp(y[1] - y[0]);
      numu[i] = Math.exp(y[2] - y[0]);
      H[i] = scratch.H;
      lnDtds[i] = Math.log(scratch.dtds);
      rho[i] = scratch.rho * (Math.exp(-s[i]) / GK_PER_MEV) ** 4 * G_CM3_PER_MEV4;
    });
    total.steps += end.steps;
    total.rejected += end.rejected;
    total.rhs += end.rhs;
    total.passes++;
    const miss = end.lnHeating - lnHeating;
    lnHeating = end.lnHeating;
    if (o.deltaNEff === 0 || Math.abs(miss) <= DARK_TOLERANCE || total.passes >= MAX_PASSES) break;
  }
  const last = s.length - 1;
  const lnA = s.map((v, i) => lnAT[i] - lnHeating + v - Math.log(t9ToKelvin(1)));
  for (let i = 0; i <= last; i++) heating[i] = Math.exp(3 * (lnHeating - lnAT[i]));
  const rhoPhotons = PHOTONS * (END_T9 / GK_PER_MEV) ** 4 * G_CM3_PER_MEV4;
  return {
    s,
    t,
    lnA,
    TnueOverT: nue,
    TnumuOverT: numu,
    TnutauOverT: numu,
    H,
    lnDtds,
    rho,
    heating,
    nEffComputed: effectiveNeutrinoNumber(rho[last] - rhoPhotons, rhoPhotons),
    photonToNeutrinoTemperature: 1 / nue[last],
    counts: total,
    ...interpolation(s, { t, lnA, nue, numu, H, lnDtds, rho }),
  };
}

/** ln of (aT)_end/(aT)_start from entropy conservation of the plasma. */
function entropyHeating(o: Complete, sStart: number, sEnd: number): number {
  return entropyScaling(o, sStart)(sEnd);
}

/** ln(aT) relative to the start as a function of s: a^3 T^3 (rho + P)/T^4 stays constant. */
function entropyScaling(o: Complete, sStart: number): (s: number) => number {
  const table = plasmaTable(o);
  const out = new Float64Array(PLASMA_COLUMNS);
  const enthalpy = (s: number) => {
    table.evaluate(-s - Math.log(GK_PER_MEV), out);
    return out[1];
  };
  const first = enthalpy(sStart);
  return (s) => Math.log(first / enthalpy(s)) / 3;
}

/** One pass over the whole history for an assumed final ln(aT). */
function integrate(
  o: Complete,
  lnHeating: number,
  s: Float64Array,
  each: (i: number, y: ArrayLike<number>, scratch: Scratch) => void,
) {
  const { rhs, startTime, scratch, lnGK } = equations(o, lnHeating);
  const lnT0 = Math.log(startTime(-s[0] - lnGK));
  const options = { rtol: o.rtol, atol: o.rtol, firstStep: 1e-3 };
  const last = s[s.length - 1];
  if (o.incompleteDecoupling) {
    const end = integrateSmooth(
      rhs,
      s[0],
      [0, 0, 0, lnT0],
      last,
      s,
      (i, x, y) => {
        rhs(x, y);
        each(i, y, scratch);
      },
      options,
    );
    return { ...end, lnHeating: end.y[0] };
  }
  const scaling = entropyScaling(o, s[0]);
  const full = [0, 0, 0, 0];
  const complete = (x: number, lnT: number) => {
    full[0] = scaling(x);
    full[3] = lnT;
    return rhs(x, full);
  };
  const end = integrateSmooth(
    (x, y) => [complete(x, y[0])[3]],
    s[0],
    [lnT0],
    last,
    s,
    (i, x, y) => {
      complete(x, y[0]);
      each(i, full, scratch);
    },
    options,
  );
  return { ...end, lnHeating: scaling(last) };
}

/** Look-up by temperature and by age, by not-a-knot splines over s made at the first call. */
function interpolation(
  s: Float64Array,
  c: Record<"t" | "lnA" | "nue" | "numu" | "H" | "lnDtds" | "rho", Float64Array>,
): Pick<ThermalHistory, "at" | "temperatureAt"> {
  const splines = new Map<string, Spline>();
  const spline = (name: string, y: () => Float64Array) => {
    let known = splines.get(name);
    if (!known) {
      known = notAKnotSpline(s, y());
      splines.set(name, known);
    }
    return known;
  };
  const log = (y: Float64Array) => () => y.map(Math.log);
  const last = s.length - 1;
  const temperatureOf = (v: number) => t9ToKelvin(Math.exp(-v));
  return {
    at(T) {
      const v = -Math.log(T / t9ToKelvin(1));
      if (!(v >= s[0] - 1e-12 && v <= s[last] + 1e-12))
        throw new InputError(
          "range",
          `T = ${T} K: the thermal history covers ${temperatureOf(s[last])} to ${temperatureOf(s[0])} K`,
        );
      return {
        T,
        t: Math.exp(spline("t", log(c.t)).value(v)),
        lnA: spline("lnA", () => c.lnA).value(v),
        TnueOverT: spline("nue", () => c.nue).value(v),
        TnumuOverT: spline("numu", () => c.numu).value(v),
        H: Math.exp(spline("H", log(c.H)).value(v)),
        dtds: Math.exp(spline("lnDtds", () => c.lnDtds).value(v)),
        rho: Math.exp(spline("rho", log(c.rho)).value(v)),
      };
    },
    temperatureAt(t) {
      if (!(t >= c.t[0] && t <= c.t[last]))
        throw new InputError("range", `t = ${t} s: the thermal history covers ${c.t[0]} to ${c.t[last]} s`);
      const age = spline("t", log(c.t));
      const target = Math.log(t);
      let lo = 0;
      let hi = last;
      while (hi - lo > 1) {
        const middle = (lo + hi) >> 1;
        if (c.t[middle] <= t) lo = middle;
        else hi = middle;
      }
      let v = s[lo] + ((target - age.y[lo]) / (age.y[hi] - age.y[lo])) * (s[hi] - s[lo]);
      for (let i = 0; i < 8; i++) v -= (age.value(v) - target) / age.derivative(v);
      return temperatureOf(v);
    },
  };
}
