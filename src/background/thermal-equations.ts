/** The equations of the thermal history: photon and neutrino temperatures, scale factor and time against ln T. */
import { G_CM3_PER_MEV4, GK_PER_MEV, mevToKelvin, NEWTON_G_CGS } from "../constants/units.ts";
import { InputError, requireRange } from "../numerics/check.ts";
import {
  energyFromPlasma,
  energyToElectronNeutrinos,
  exchangeWeights,
  neutrinoDensityFactor,
  RHO_PER_NEFF,
} from "./neutrinos.ts";
import { PLASMA_COLUMNS, plasmaTable } from "./plasma.ts";

/**
 * Factor on H at T [K], TMeV, t [s] and H [1/s], the last before the factor and without baryons. It acts from the start
 * on, neutrino decoupling included.
 */
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
  rtol: 1e-11,
} as const satisfies BackgroundOptions;

/** Options with every default filled in. */
export type CompleteOptions = BackgroundOptions & {
  readonly gravity: number;
  readonly startMeV: number;
  readonly rtol: number;
};

/** Start of the history [MeV] unless `startMeV` is given. */
export const START_MEV = { threeTemperatures: 10, instantaneous: 20 } as const;
/** Photon temperature of the end [GK]: 0.43 keV. */
export const END_T9 = 0.005;

/** Fills in the defaults and checks the ranges. @throws {InputError} naming the option out of range */
export function completeOptions(options: Partial<BackgroundOptions>): CompleteOptions {
  const given = Object.fromEntries(Object.entries(options).filter(([, value]) => value !== undefined));
  const merged = { ...BACKGROUND_DEFAULTS, ...(given as Partial<BackgroundOptions>) };
  const startMeV =
    merged.startMeV ?? (merged.incompleteDecoupling ? START_MEV.threeTemperatures : START_MEV.instantaneous);
  const o: CompleteOptions = { ...merged, startMeV } as CompleteOptions;
  requireRange("deltaNEff", o.deltaNEff, "", -3.5, 1000); // the total density stays positive down to -3.5
  requireRange("xiE", o.xiE, "", -10, 10);
  requireRange("xiMu", o.xiMu, "", -10, 10);
  requireRange("xiTau", o.xiTau, "", -10, 10);
  requireRange("startMeV", o.startMeV, "MeV", 2, 1000);
  requireRange("rtol", o.rtol, "", 1e-13, 1e-4);
  requireRange("gravity", o.gravity, "", 1e-6, 1e6);
  return o;
}

/** H^2 = FRIEDMANN rho: 8 pi G/3 with rho in MeV4, [1/(s2 MeV4)]. */
const FRIEDMANN = ((8 * Math.PI) / 3) * NEWTON_G_CGS * G_CM3_PER_MEV4;
/** rho_gamma/T^4. */
export const PHOTONS = Math.PI ** 2 / 15;

/** What the right-hand side found at its latest point. */
export interface Scratch {
  /** Total energy density over T^4. */
  rho: number;
  H: number;
  dtds: number;
  /** rho/T^4, (rho + P)/T^4, (d rho/d ln T)/T^4 of the plasma. */
  plasma: Float64Array;
  /** Exchange weights of nu_e and nu_mu. */
  weights: Float64Array;
}

/**
 * The equations in s = -ln T9 for y = [ln(aT), ln(a T_nue), ln(a T_numu), ln t], the first three relative to (aT) of the
 * start: d rho_em/dt = -3H(rho + P)_em - Q gives dt/ds = (d rho_em/d ln T)/[3H(rho + P)_em + Q], Q the energy that the
 * neutrinos gain; d ln(a T_nu)/dt = (d rho_nu/dt)_exchange/(4 rho_nu). nu_mu and nu_tau share T_numu, not their xi.
 * @param lnHeating ln of (aT)_end/(aT)_start, which sets the dark radiation
 */
export function equations(o: CompleteOptions, lnHeating: number) {
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
  const startTime = (s: number) => {
    const lnT = -s - lnGK;
    table.evaluate(lnT, scratch.plasma);
    const rho = density(1, 1, 0);
    let t = 1 / (2 * hubble * Math.sqrt(rho) * Math.exp(2 * lnT));
    if (!o.expansion) return t;
    for (let i = 0; i < 500; i++) {
      const next = 1 / (2 * expansionRate(lnT, rho, t));
      if (Math.abs(next / t - 1) < 1e-13) return next;
      t = next;
    }
    throw new InputError(
      "expansion",
      "expansion: the age t = 1/(2H) at the start does not settle; weaken its t dependence",
    );
  };
  return { rhs, startTime, scratch };
}

/** @throws {InputError} unless the user's factor is finite and positive */
function checkedFactor(expansion: ExpansionFactor, TMeV: number, t: number, H: number): number {
  const T = mevToKelvin(TMeV);
  const factor = expansion(T, TMeV, t, H);
  if (!(factor > 0 && factor < Number.POSITIVE_INFINITY))
    throw new InputError(
      "expansion",
      `expansion = ${factor} at T = ${T.toPrecision(6)} K, t = ${t.toPrecision(6)} s: the factor on H must be positive and finite from ${END_T9} GK up to the start`,
    );
  return factor;
}

/** ln(aT) relative to the start as a function of s: a^3 T^3 (rho + P)/T^4 stays constant. */
export function entropyScaling(o: CompleteOptions, sStart: number): (s: number) => number {
  const table = plasmaTable(o);
  const out = new Float64Array(PLASMA_COLUMNS);
  const enthalpy = (s: number) => {
    table.evaluate(-s - Math.log(GK_PER_MEV), out);
    return out[1];
  };
  const first = enthalpy(sStart);
  return (s) => Math.log(first / enthalpy(s)) / 3;
}
