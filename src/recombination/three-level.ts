/** Hydrogen as an effective three-level atom (Peebles): the net recombination rate and its derivatives. */
import { CM3_PER_M3 } from "../constants/units.ts";
import type { RecombinationValues } from "./atomic.ts";
import { type PlasmaState, RATE } from "./plasma-state.ts";
import { sahaCoefficients, termTemperature } from "./saha.ts";

export interface HydrogenCoefficients {
  /** Case-B fit a t^b/(1 + c t^d) [cm^3/s], t = T/1e4 K, with the factor on it. */
  readonly a: number;
  readonly b: number;
  readonly c: number;
  readonly d: number;
  /** 2 pi m_e k/h^2 [1/(cm^2 K)]. */
  readonly thermal: number;
  /** Energies over k [K]: ionisation from the ground state, from n = 2, Lyman alpha. */
  readonly ionisation: number;
  readonly fromTwo: number;
  readonly lymanAlpha: number;
  /** lambda^3/(8 pi) of Lyman alpha [cm^3]: K = this/H. */
  readonly escapeVolume: number;
  /** 2s-1s two-photon rate [1/s]. */
  readonly twoPhoton: number;
  /** Switches. */
  readonly bottleneck: boolean;
  readonly redshifting: boolean;
  readonly ratesAtMatterTemperature: boolean;
}

/** Coefficients from the constants. @param factor on the case-B coefficient @param without names of switches left out */
export function hydrogenCoefficients(
  values: RecombinationValues,
  factor: number,
  twoPhotonFactor: number,
  without: readonly string[],
): HydrogenCoefficients {
  const ionisation = termTemperature(values.hIonisation);
  const lymanAlpha = termTemperature(values.hLymanAlpha);
  return {
    a: values.hAlphaA * factor,
    b: values.hAlphaB,
    c: values.hAlphaC,
    d: values.hAlphaD,
    thermal: sahaCoefficients(values).thermal,
    ionisation,
    lymanAlpha,
    fromTwo: ionisation - lymanAlpha,
    escapeVolume: CM3_PER_M3 / values.hLymanAlpha ** 3 / (8 * Math.PI),
    twoPhoton: without.includes("two-photon") ? 0 : values.hTwoPhoton * twoPhotonFactor,
    bottleneck: !without.includes("hydrogen-bottleneck"),
    redshifting: !without.includes("lyman-alpha-escape"),
    ratesAtMatterTemperature: !without.includes("matter-temperature-rates"),
  };
}

/**
 * Case-B recombination coefficient of hydrogen, a t^b/(1 + c t^d), t = T/1e4 K.
 * @param T [K], > 0
 * @returns [cm^3/s], within 0.16 % of tabulated quadratures for 100 K to 1.6e4 K
 * @see Pequignot, Petitjean & Boisson 1991, A&A 251, 680
 */
export function caseB(c: Pick<HydrogenCoefficients, "a" | "b" | "c" | "d">, T: number): number {
  const lnT4 = Math.log(T * 1e-4);
  return (c.a * Math.exp(c.b * lnT4)) / (1 + c.c * Math.exp(c.d * lnT4));
}

/**
 * d ln(x_p/x_1s)/d ln a = -(C/H) [alpha n_H x_e/x_1s - alpha S exp(-E/kT)/x_p]: Peebles' equation
 * dx_p/dt = -C [alpha n_H x_e x_p - beta x_1s exp(-E_Lya/kT)] divided by x_p x_1s, with
 * beta = alpha S exp(-E_2/kT), S = (2 pi m_e kT/h^2)^(3/2), and the Peebles factor
 * C = (1/(K n_1s) + Lambda)/(1/(K n_1s) + Lambda + beta), K = lambda^3/(8 pi H).
 * alpha at T_m; beta and the exponential at T_m (the classical choice) or at T_r.
 *
 * @param out receives value and partial derivatives, laid out as RATE
 * @see Peebles 1968, ApJ 153, 1; Zeldovich, Kurt & Sunyaev 1968
 */
export function hydrogenRate(c: HydrogenCoefficients, s: PlasmaState, partials: boolean, out: Float64Array): void {
  const { nH, H, xe, xp, neutralH } = s;
  const lnT4 = Math.log(s.Tm * 1e-4);
  const fitTail = c.c * Math.exp(c.d * lnT4);
  const alpha = (c.a * Math.exp(c.b * lnT4)) / (1 + fitTail);
  const alphaSlope = c.b - (c.d * fitTail) / (1 + fitTail);
  const T = c.ratesAtMatterTemperature ? s.Tm : s.Tr;
  let alphaBack = alpha;
  let alphaBackSlope = alphaSlope;
  if (!c.ratesAtMatterTemperature) {
    const lnTr4 = Math.log(T * 1e-4);
    const tail = c.c * Math.exp(c.d * lnTr4);
    alphaBack = (c.a * Math.exp(c.b * lnTr4)) / (1 + tail);
    alphaBackSlope = c.b - (c.d * tail) / (1 + tail);
  }
  const x = c.thermal * T;
  const alphaS = alphaBack * x * Math.sqrt(x);
  const beta = alphaS * Math.exp(-c.fromTwo / T);
  const up = (alphaS * Math.exp(-c.ionisation / T)) / xp;
  const down = (alpha * nH * xe) / neutralH;
  const escaping = c.redshifting ? H / (c.escapeVolume * nH * neutralH) : 0;
  const leave = escaping + c.twoPhoton;
  const sum = leave + beta;
  const C = c.bottleneck ? leave / sum : 1;
  const G = down - up;
  out[RATE.value] = (-C * G) / H;
  if (!partials) return;
  const upSlope = up * (alphaBackSlope + 1.5 + c.ionisation / T);
  // dC = (beta d(leave) - leave d(beta))/(leave + beta)^2
  const cByLnEscape = c.bottleneck ? (beta * escaping) / (sum * sum) : 0;
  const cByLnT = c.bottleneck ? (-leave * beta * (alphaBackSlope + 1.5 + c.fromTwo / T)) / (sum * sum) : 0;
  const back = (cByLnT * G - C * upSlope) / -H;
  const forth = (C * down * alphaSlope) / -H;
  out[RATE.xe] = (C * down) / (-H * xe);
  out[RATE.logitH] = (cByLnEscape * xp * G + C * (down * xp + up * neutralH)) / -H;
  out[RATE.logitHe] = 0;
  out[RATE.lnTm] = c.ratesAtMatterTemperature ? forth + back : forth;
  out[RATE.lnTr] = c.ratesAtMatterTemperature ? 0 : back;
  out[RATE.lnNH] = (-cByLnEscape * G + C * down) / -H;
  out[RATE.lnH] = (cByLnEscape * G) / -H - out[RATE.value];
  out[RATE.lnSaha] = 0;
}
