/** Neutral helium: net recombination rate of He II through singlets and triplets, with absorption of the lines by neutral hydrogen. */
import { BOLTZMANN } from "../constants/codata.ts";
import { CM3_PER_M3, GRAM_PER_U } from "../constants/units.ts";
import { hydrogenPhotoionisation, type RecombinationValues } from "./atomic.ts";
import { type PlasmaState, RATE } from "./plasma-state.ts";
import { sahaCoefficients, termTemperature } from "./saha.ts";

/** alpha = q/(s2 (1 + s2)^(1-p) (1 + s1)^(1+p)), s_i = sqrt(T/T_i). */
export interface VernerFerlandFit {
  /** [cm^3/s] */
  readonly q: number;
  readonly p: number;
  /** [K] */
  readonly T1: number;
  readonly T2: number;
}

/** One resonance line to the ground state and the way out that it offers. */
export interface HeliumChannel {
  readonly fit: VernerFerlandFit;
  /** Weight of the metastable level's Saha factor: 4 for 2 1S, 4/3 for 2 3S. */
  readonly backWeight: number;
  /** Ionisation energy of the metastable level over k [K]. */
  readonly fromMetastable: number;
  /** Energy of the line's upper level above the metastable one over k [K]. */
  readonly raise: number;
  /** Einstein A of the line times the ratio of weights, upper level to metastable [1/s]. */
  readonly rate: number;
  /** tau = this n_H x_HeI/H: 3 A lambda^3/(8 pi) [cm^3/s]. */
  readonly depth: number;
  /**
   * Escape by continuum absorption, 1/(1 + a gamma^b), gamma = opacity y_I/(x_1s sqrt(T_m)): ln(a opacity^b) and b;
   * absorb false: none.
   */
  readonly lnAbsorption: number;
  readonly b: number;
  readonly absorb: boolean;
  /** Two-photon decay of the metastable level [1/s]. */
  readonly twoPhoton: number;
}

export interface HeliumCoefficients {
  readonly fHe: number;
  readonly thermal: number;
  readonly ionisation: number;
  readonly singlet: HeliumChannel;
  readonly triplet: HeliumChannel;
  readonly bottleneck: boolean;
  readonly useTriplet: boolean;
}

/** Coefficients from the constants. @param fHe n_He/n_H @param without names of switches left out */
export function heliumCoefficients(
  values: RecombinationValues,
  fHe: number,
  without: readonly string[],
): HeliumCoefficients {
  const absorb = !without.includes("helium-continuum-opacity");
  const heliumMass = (values.heliumMass * GRAM_PER_U) / 1000;
  const alphaFit = (logQ: number, p: number): VernerFerlandFit => ({
    q: 10 ** logQ * CM3_PER_M3,
    p,
    T1: 10 ** values.he1AlphaLogT1,
    T2: values.he1AlphaT2,
  });
  const line = (A: number, wavenumber: number, a: number, b: number) => {
    const sigma = hydrogenPhotoionisation(wavenumber / values.hIonisation, values.hPhotoionisation);
    // Doppler width at 1 K, nu sqrt(2 k/(m c^2)) [1/s].
    const width = wavenumber * Math.sqrt((2 * BOLTZMANN.value) / heliumMass);
    const opacity = ((3 * A) / (8 * Math.PI ** 1.5 * wavenumber ** 2 * sigma * width)) * fHe;
    return {
      depth: (3 * A * CM3_PER_M3) / (8 * Math.PI * wavenumber ** 3),
      lnAbsorption: Math.log(a) + b * Math.log(opacity),
      b,
      absorb,
    };
  };
  const ionisation = termTemperature(values.he1Ionisation);
  const singletS = termTemperature(values.he1SingletS);
  const tripletS = termTemperature(values.he1TripletS);
  return {
    fHe,
    thermal: sahaCoefficients(values).thermal,
    ionisation,
    bottleneck: !without.includes("helium-bottleneck"),
    useTriplet: !without.includes("helium-triplet"),
    singlet: {
      fit: alphaFit(values.he1AlphaSingletLogQ, values.he1AlphaSingletP),
      backWeight: 4,
      fromMetastable: ionisation - singletS,
      raise: termTemperature(values.he1SingletP) - singletS,
      rate: 3 * values.he1SingletA,
      ...line(values.he1SingletA, values.he1SingletP, values.he1EscapeSingletA, values.he1EscapeSingletB),
      twoPhoton: without.includes("helium-two-photon") ? 0 : values.he1TwoPhoton,
    },
    triplet: {
      fit: alphaFit(values.he1AlphaTripletLogQ, values.he1AlphaTripletP),
      backWeight: 4 / 3,
      fromMetastable: ionisation - tripletS,
      raise: termTemperature(values.he1TripletP) - tripletS,
      rate: values.he1TripletA,
      ...line(values.he1TripletA, values.he1TripletP, values.he1EscapeTripletA, values.he1EscapeTripletB),
      twoPhoton: 0,
    },
  };
}

/**
 * Case-B recombination coefficient of one spin system of He I in the form of Verner & Ferland.
 * @param T [K], > 0
 * @returns [cm^3/s]; singlets plus triplets within 1 % of Hummer & Storey 1998 for 2500 K to 1e4 K
 */
export function vernerFerland(fit: VernerFerlandFit, T: number): number {
  const s1 = Math.sqrt(T / fit.T1);
  const s2 = Math.sqrt(T / fit.T2);
  return (fit.q / s2) * Math.exp((fit.p - 1) * Math.log1p(s2) - (1 + fit.p) * Math.log1p(s1));
}

/** Value of C alpha of one channel and its logarithm-derivatives, kept between calls. */
interface ChannelRate {
  value: number;
  lnTm: number;
  logitHe: number;
  logitH: number;
  lnNH: number;
  lnH: number;
}

const emptyChannel = (): ChannelRate => ({ value: 0, lnTm: 0, logitHe: 0, logitH: 0, lnNH: 0, lnH: 0 });

/**
 * Inhibited recombination coefficient C alpha of one channel, C = 1/(1 + beta/(R + Lambda)) with
 * R = A (P_S + P_con) exp(-raise/T), P_S = (1 - e^-tau)/tau (Sobolev), P_con = 1/(1 + a gamma^b).
 * Without two-photon decay beta/R is formed with one exponential, since both underflow below 500 K.
 */
function channelRate(
  c: HeliumChannel,
  k: HeliumCoefficients,
  s: PlasmaState,
  s1: number,
  s2: number,
  ln1: number,
  ln2: number,
  lnShare: number,
  partials: boolean,
  out: ChannelRate,
): void {
  const { Tm, nH, H } = s;
  const { p, q } = c.fit;
  const alpha = (q / s2) * Math.exp((p - 1) * ln2 - (1 + p) * ln1);
  const alphaSlope = -0.5 * (1 + ((1 - p) * s2) / (1 + s2) + ((1 + p) * s1) / (1 + s1));
  if (!k.bottleneck) {
    out.value = alpha;
    out.lnTm = alpha * alphaSlope;
    out.logitHe = out.logitH = out.lnNH = out.lnH = 0;
    return;
  }
  const tau = (c.depth * nH * k.fHe * s.neutralHe) / H;
  const passed = Math.exp(-tau);
  const sobolev = tau > 0.1 ? (1 - passed) / tau : tau > 1e-8 ? -Math.expm1(-tau) / tau : 1 - tau / 2;
  const continuum = c.absorb ? 1 / (1 + Math.exp(c.lnAbsorption + c.b * lnShare)) : 0;
  const P = sobolev + continuum;
  const x = k.thermal * Tm;
  const back = c.backWeight * alpha * x * Math.sqrt(x);
  // q = beta/(R + Lambda), with the Boltzmann factor of R taken out of both.
  const beta = back * Math.exp(-(c.fromMetastable - c.raise) / Tm);
  const lambda = c.twoPhoton > 0 ? c.twoPhoton * Math.exp(Math.min(700, c.raise / Tm)) : 0;
  const leave = c.rate * P + lambda;
  const C = leave / (leave + beta);
  out.value = C * alpha;
  if (!partials) return;
  // d ln C = (1 - C)(d ln leave - d ln beta)
  const inhibited = out.value * (1 - C);
  const bySobolev = (passed - sobolev) * (c.rate / leave) * inhibited;
  const byContinuum = -c.b * continuum * (1 - continuum) * (c.rate / leave) * inhibited;
  const betaSlope = alphaSlope + 1.5 + (c.fromMetastable - c.raise) / Tm;
  out.lnNH = bySobolev;
  out.lnH = -bySobolev;
  out.logitHe = -s.ionisedHe * (bySobolev + byContinuum);
  out.logitH = s.xp * byContinuum;
  out.lnTm =
    out.value * alphaSlope - inhibited * betaSlope - 0.5 * byContinuum + inhibited * (-lambda / leave) * (c.raise / Tm);
}

const singlet = emptyChannel();
const triplet = emptyChannel();

/**
 * d ln(He ionised/He neutral)/d ln a = -(1/H) (C_s alpha_s + C_t alpha_t) [n_H x_e w/y_I - Q/y_II], y_I and y_II the
 * neutral and ionised shares of helium, w the part of the ionised that is He II, Q = 4 S exp(-E/kT): singlet and
 * triplet share one departure from equilibrium because they share one ionisation energy. All at T_m.
 *
 * @param out receives value and partial derivatives, laid out as RATE
 * @see Seager, Sasselov & Scott 2000, ApJS 128, 407; Switzer & Hirata 2008, PRD 77, 083006; Wong, Moss & Scott 2008, MNRAS 386, 1023
 */
export function heliumRate(k: HeliumCoefficients, s: PlasmaState, partials: boolean, out: Float64Array): void {
  const { nH, H, xe, Tm, ionisedHe, neutralHe } = s;
  const s1 = Math.sqrt(Tm / k.singlet.fit.T1);
  const s2 = Math.sqrt(Tm / k.singlet.fit.T2);
  const ln1 = Math.log(1 + s1);
  const ln2 = Math.log(1 + s2);
  const lnShare = Math.log(s.neutralHe / (s.neutralH * Math.sqrt(Tm)));
  channelRate(k.singlet, k, s, s1, s2, ln1, ln2, lnShare, partials, singlet);
  let A = singlet.value;
  if (k.useTriplet) {
    channelRate(k.triplet, k, s, s1, s2, ln1, ln2, lnShare, partials, triplet);
    A += triplet.value;
  }
  const x = k.thermal * Tm;
  const up = (4 * x * Math.sqrt(x) * Math.exp(-k.ionisation / Tm)) / ionisedHe;
  const down = (nH * xe * s.singlyShare) / neutralHe;
  const D = down - up;
  out[RATE.value] = (-A * D) / H;
  if (!partials) return;
  const t = k.useTriplet;
  const byXe = down / xe + (s.singlyShareByXe / s.singlyShare) * down;
  out[RATE.xe] = (A * byXe) / -H;
  out[RATE.logitH] = ((singlet.logitH + (t ? triplet.logitH : 0)) * D) / -H;
  out[RATE.logitHe] =
    ((singlet.logitHe + (t ? triplet.logitHe : 0)) * D + A * (down * ionisedHe + up * neutralHe)) / -H;
  out[RATE.lnTm] = ((singlet.lnTm + (t ? triplet.lnTm : 0)) * D - A * up * (1.5 + k.ionisation / Tm)) / -H;
  out[RATE.lnTr] = 0;
  out[RATE.lnNH] = ((singlet.lnNH + (t ? triplet.lnNH : 0)) * D + A * down) / -H;
  out[RATE.lnH] = ((singlet.lnH + (t ? triplet.lnH : 0)) * D) / -H - out[RATE.value];
  out[RATE.lnSaha] = (A * down * (s.singlyShareBySaha / s.singlyShare)) / -H;
}
