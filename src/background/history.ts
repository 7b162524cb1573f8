/** The thermal history: photon and neutrino temperatures, expansion rate, time and scale factor from 10 MeV to 0.4 keV. */
import { G_CM3_PER_MEV4, kelvinToT9, mevToT9, t9ToKelvin, t9ToMeV } from "../constants/units.ts";
import { CalculationError, InputError } from "../numerics/check.ts";
import { intervalOf, notAKnotSpline, type Spline } from "../numerics/interpolate.ts";
import { integrateSmooth } from "../numerics/ode-smooth.ts";
import { effectiveNeutrinoNumber } from "./neutrinos.ts";
import {
  type BackgroundOptions,
  type CompleteOptions,
  completeOptions,
  END_T9,
  entropyScaling,
  equations,
  PHOTONS,
  type Scratch,
} from "./thermal-equations.ts";

export {
  BACKGROUND_DEFAULTS,
  type BackgroundOptions,
  END_T9,
  type ExpansionFactor,
  START_MEV,
} from "./thermal-equations.ts";

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

/** ln of (aT)_end/(aT)_start in the standard case: only the point from which the dark radiation is iterated. */
const LN_HEATING_GUESS = 0.33497;
/** Agreement demanded between the ln(aT) assumed for the dark radiation and the one that results. */
const DARK_TOLERANCE = 1e-10;
/** Below this disagreement the next pass may be the last one: it writes the columns. */
const NEARLY_DARK = 1e-5;
const MAX_PASSES = 30;
/** Enough for an expansion a thousand times slower, in which the neutrinos stay tightly coupled (a stiff problem). */
const MAX_STEPS = 200_000;

/** Uniform grid in s = -ln T9 from the start to END_T9. */
export function outputGrid(startMeV: number): Float64Array {
  const first = -Math.log(mevToT9(startMeV));
  const last = -Math.log(END_T9);
  const intervals = Math.ceil((last - first) / GRID_SPACING);
  return Float64Array.from({ length: intervals + 1 }, (_, i) => first + ((last - first) * i) / intervals);
}

/**
 * Integrates T_gamma, T_nue, T_numu = T_nutau, a and t from `startMeV` to T9 = 0.005 with odex, s = -ln T9 as variable.
 * Start: one temperature, t = 1/(2H). Without incomplete decoupling the neutrinos keep a T_nu from the start on and a
 * follows from entropy conservation, only t being integrated. Dark radiation scales with the (aT) of the end, so the
 * history is repeated until both agree to 1e-10. Degeneracies count in the energy densities, not in the exchange rates.
 *
 * @param options departures from BACKGROUND_DEFAULTS
 * @returns columns on a uniform grid of about 1030 points, good to 1e-7 for cubic splines except in the first three
 *   intervals, where T_nu relaxes (by 4e-7) from the one common temperature
 * @throws {InputError} for an option out of range, or a user's factor that is not positive and finite throughout
 * @throws {CalculationError} if the integration fails
 * @see Escudero 2020, JCAP 05, 048 (arXiv:2001.04466); Bennett et al. 2021, JCAP 04, 073
 */
export function computeThermalHistory(options: Partial<BackgroundOptions> = {}): ThermalHistory {
  const o = completeOptions(options);
  const s = outputGrid(o.startMeV);
  const columns = Array.from({ length: 8 }, () => new Float64Array(s.length));
  const [t, lnAT, nue, numu, H, lnDtds, rho, heating] = columns;
  const write: Writer = (i, y, scratch) => {
    t[i] = Math.exp(y[3]);
    lnAT[i] = y[0];
    nue[i] = Math.exp(y[1] - y[0]);
    numu[i] = Math.exp(y[2] - y[0]);
    H[i] = scratch.H;
    lnDtds[i] = Math.log(scratch.dtds);
    rho[i] = scratch.rho * t9ToMeV(Math.exp(-s[i])) ** 4 * G_CM3_PER_MEV4;
  };
  const total = { steps: 0, rejected: 0, rhs: 0, passes: 0 };
  const exact = o.deltaNEff === 0 || !o.incompleteDecoupling; // nothing to iterate
  let lnHeating = o.incompleteDecoupling ? LN_HEATING_GUESS : entropyScaling(o, s[0])(s[s.length - 1]);
  let miss = exact ? 0 : Number.POSITIVE_INFINITY;
  for (let done = false; !done; ) {
    const writing = miss < NEARLY_DARK;
    const end = explained(() => integrate(o, lnHeating, s, writing ? write : undefined));
    miss = Math.abs(end.lnHeating - lnHeating);
    lnHeating = end.lnHeating;
    total.steps += end.steps;
    total.rejected += end.rejected;
    total.rhs += end.rhs;
    total.passes++;
    done = writing && (exact || miss <= DARK_TOLERANCE);
    if (!done && total.passes >= MAX_PASSES)
      throw new CalculationError(
        "background",
        `dark radiation deltaNEff = ${o.deltaNEff}: ln(aT) still moves by ${miss}`,
      );
  }
  const last = s.length - 1;
  const lnA = s.map((v, i) => lnAT[i] - lnHeating + v - Math.log(t9ToKelvin(1)));
  for (let i = 0; i <= last; i++) heating[i] = Math.exp(3 * (lnHeating - lnAT[i]));
  return assembleHistory(s, { t, lnA, TnueOverT: nue, TnumuOverT: numu, H, lnDtds, rho, heating }, total);
}

/** The columns of a history that are stored; all else follows from them. */
export const HISTORY_COLUMNS = ["t", "lnA", "TnueOverT", "TnumuOverT", "H", "lnDtds", "rho", "heating"] as const;
export type HistoryColumns = Record<(typeof HISTORY_COLUMNS)[number], Float64Array>;

/** A history from its columns over s. */
export function assembleHistory(s: Float64Array, c: HistoryColumns, counts: ThermalHistory["counts"]): ThermalHistory {
  const last = s.length - 1;
  const rhoPhotons = PHOTONS * t9ToMeV(END_T9) ** 4 * G_CM3_PER_MEV4;
  return {
    s,
    ...c,
    TnutauOverT: c.TnumuOverT,
    nEffComputed: effectiveNeutrinoNumber(c.rho[last] - rhoPhotons, rhoPhotons),
    photonToNeutrinoTemperature: 1 / c.TnueOverT[last],
    counts,
    ...interpolation(s, { ...c, nue: c.TnueOverT, numu: c.TnumuOverT }),
  };
}

/** Says in words of this integration why it failed: expansion so slow or fast that the equations cannot be followed. */
function explained<T>(run: () => T): T {
  try {
    return run();
  } catch (error) {
    if (!(error instanceof CalculationError)) throw error;
    throw new CalculationError(
      "background",
      `thermal history: ${error.message} (x = -ln T9); a factor on H far below 1e-3 or above 1e6 is out of its reach`,
    );
  }
}

/** Receives the state at output point i; y and scratch are valid during the call only. */
type Writer = (i: number, y: ArrayLike<number>, scratch: Scratch) => void;

/** One pass over the whole history for an assumed final ln(aT), written to the columns if `write` is given. */
function integrate(o: CompleteOptions, lnHeating: number, s: Float64Array, write?: Writer) {
  const { rhs, startTime, scratch } = equations(o, lnHeating);
  const last = s[s.length - 1];
  const options = { rtol: o.rtol, atol: o.rtol, firstStep: 1e-3, maxSteps: MAX_STEPS };
  const outputs = write ? s : [];
  const lnStart = Math.log(startTime(s[0]));
  if (o.incompleteDecoupling) {
    const each = (i: number, x: number, y: Float64Array) => {
      rhs(x, y);
      write?.(i, y, scratch);
    };
    const end = integrateSmooth(rhs, s[0], [0, 0, 0, lnStart], last, outputs, each, options);
    return { ...end, lnHeating: end.y[0] };
  }
  const scaling = entropyScaling(o, s[0]);
  const state = [0, 0, 0, 0];
  const timeOnly = (x: number, y: ArrayLike<number>) => {
    state[0] = scaling(x);
    state[3] = y[0];
    return [rhs(x, state)[3]];
  };
  const each = (i: number, x: number, y: Float64Array) => {
    timeOnly(x, y);
    write?.(i, state, scratch);
  };
  const end = integrateSmooth(timeOnly, s[0], [lnStart], last, outputs, each, options);
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
      const v = -Math.log(kelvinToT9(T));
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
      const i = intervalOf(c.t, t);
      let v = s[i] + ((target - age.y[i]) / (age.y[i + 1] - age.y[i])) * (s[i + 1] - s[i]);
      for (let k = 0; k < 4; k++) v -= (age.value(v) - target) / age.derivative(v); // nearly linear: converges at once
      return temperatureOf(v);
    },
  };
}
