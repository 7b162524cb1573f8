/**
 * Corrections to the Born n <-> p rates: Coulomb, zero-temperature radiative, finite nucleon mass, weak magnetism.
 *
 * Not included, together of order 1e-4 in Y_p: finite-temperature radiative corrections (photon bath, electron mass
 * shift in the weak vertices) and the balance of bremsstrahlung emission and absorption. Coulomb and radiative factors
 * multiply the thermal 1/M terms as they stand, which leaves products of relative order alpha T/M (below 1e-4 at 1 MeV).
 * @see Dicus et al. 1982, Phys. Rev. D 26, 2694; Lopez & Turner 1999, Phys. Rev. D 59, 103502;
 *      Brown & Sawyer 2001, Phys. Rev. D 63, 083503
 */
import { requirePositive } from "../numerics/check.ts";
import { dilogarithm, gamma, logGamma } from "../numerics/special.ts";
import { bornIntegrand, type Integrand } from "./born.ts";
import { nucleonMass, type WeakInputs, type WeakOptions } from "./inputs.ts";

/**
 * Relativistic Fermi function of an electron that leaves, or comes to, a proton:
 * F = 2 (1 + g) (2 p R)^(2(g - 1)) e^(pi y) |Gamma(g + i y)|^2 / Gamma(2g + 1)^2, g = sqrt(1 - alpha^2), y = alpha E/p.
 * Grows as 2 pi y for p -> 0. To be used where electron and proton are on the same side of the reaction
 * (n <-> p e- nubar, n nu <-> p e-); a positron meets only the neutron, so F = 1 there.
 *
 * @param p electron momentum [MeV], > 0
 * @param inputs electron mass, alpha and the proton radius R
 * @returns F >= 1; relative accuracy 1e-13 of the formula; R = 1.2 fm instead of 0.841 fm moves the rates by 1e-5
 * @throws {RangeError} if p is not positive and finite
 * @see Fermi 1934, Z. Phys. 88, 161; Wilkinson 1982, Nucl. Phys. A 377, 474
 */
export function fermiFunction(p: number, inputs: WeakInputs): number {
  requirePositive("p", p, "MeV");
  const { alpha, electronMass, protonRadius } = inputs;
  const g = Math.sqrt(1 - alpha * alpha);
  const y = (alpha * Math.hypot(p, electronMass)) / p;
  const modulus = Math.exp(Math.PI * y + 2 * logGamma(g, y).re);
  return (2 * (1 + g) * (2 * p * protonRadius) ** (2 * (g - 1)) * modulus) / gamma(2 * g + 1) ** 2;
}

/**
 * Sirlin's function of the order-alpha correction to the electron spectrum of a beta decay (infinite nucleon mass):
 * g = 3 ln(m_p/m_e) - 3/4 + 4 (a/b - 1)(k/(3E) - 3/2 + ln(2k/m_e)) - (4/b) Li2(2b/(1 + b))
 *     + (a/b)(2(1 + b^2) + k^2/(6 E^2) - 4a), b = p/E, a = atanh(b).
 *
 * @param E energy of the charged lepton [MeV], > m_e
 * @param k energy of the neutrino or antineutrino [MeV], > 0
 * @throws {RangeError} if E is not above m_e or k not positive
 * @see Sirlin 1967, Phys. Rev. 164, 1767, eq. (20b)
 */
export function sirlinFunction(E: number, k: number, inputs: WeakInputs): number {
  const { electronMass, protonMass } = inputs;
  requirePositive("k", k, "MeV");
  requirePositive("E - m_e", E - electronMass, "MeV");
  const p = Math.sqrt((E - electronMass) * (E + electronMass));
  const b = p / E;
  const a = Math.log((E + p) / electronMass); // atanh(b) without the cancellation in 1 - b
  return (
    3 * Math.log(protonMass / electronMass) -
    0.75 +
    4 * (a / b - 1) * (k / (3 * E) - 1.5 + Math.log((2 * k) / electronMass)) -
    (4 / b) * dilogarithm((2 * b) / (1 + b)) +
    (a / b) * (2 * (1 + b * b) + (k * k) / (6 * E * E) - 4 * a)
  );
}

/**
 * Constants of the radiative correction that multiply every channel alike (leading logarithms, axial box, low- and
 * high-energy pieces). They cancel in rates normalised to tau_n and matter for {@link decayPhaseSpace} alone.
 * @see Czarnecki, Marciano & Sirlin 2004, Phys. Rev. D 70, 093006, eq. (15); the numbers from memory
 */
const RADIATIVE_CONSTANTS = {
  shortDistance: 1.02094,
  axialBox: 0.891,
  shortDistanceNext: -0.00043,
  leadingLogarithm: 1.02248,
  axialMass: 1.2e3,
  axialConstant: -0.34,
  inverseAlphaProton: 134,
  leadingLogarithmNext: -1e-4,
} as const;

/**
 * Zero-temperature radiative factor R = [1 + (alpha/2 pi)(g - 3 ln(m_p/2Q))] x constants for all six channels,
 * with E the charged lepton's and k the neutrino's energy, both positive.
 * @param E [MeV], > m_e @param k [MeV], > 0
 * @returns R, about 1.04 in neutron decay; orders alpha^2 and alpha (energy/m_p) beyond the constants are left out
 * @see Sirlin 1967, Phys. Rev. 164, 1767; Czarnecki, Marciano & Sirlin 2004, Phys. Rev. D 70, 093006;
 *      use for the two-body channels: Dicus et al. 1982, Phys. Rev. D 26, 2694
 */
export function radiativeFactor(E: number, k: number, inputs: WeakInputs): number {
  const { alpha, protonMass, Q } = inputs;
  const c = RADIATIVE_CONSTANTS;
  const outer = 1 + (alpha / (2 * Math.PI)) * (sirlinFunction(E, k, inputs) - 3 * Math.log(protonMass / (2 * Q)));
  const box = c.shortDistance + (c.axialBox * alpha) / Math.PI + c.shortDistanceNext;
  const logarithm =
    c.leadingLogarithm +
    (Math.log(protonMass / c.axialMass) + c.axialConstant) / (2 * Math.PI * c.inverseAlphaProton) +
    c.leadingLogarithmNext;
  return outer * box * logarithm;
}

/**
 * Integrand with the first-order terms in 1/M: recoil, thermal motion of the nucleons (at the photon temperature) and,
 * if wanted, weak magnetism. With S = cLL + cRR + cLR, cLL = (1 + gA)^2/4 + f gA, cRR = (1 - gA)^2/4 - f gA,
 * cLR = (gA^2 - 1)/4, D2 = S (k^2 + p^2) + (2/3) cLR k p^2/E and G = k^2 f(k), the Born k^2 f of n -> p becomes
 *   [A G - (B G)' + (C G)'']/S (derivatives in k at fixed E, then k = E - Q), where
 *   A = S + (cLL p^2/E - cRR k - 3 T cLR)/M, C = T D2/(2M),
 *   B = -D2/(2M) + (T/M)(cLL + cRR)(k - p^2/E) - (3/2) Q T S/M;
 * p -> n with G = k^2 h(k) is [A G + (B G)' + (C G)'']/S, where
 *   A = S + (cLL k - cRR p^2/E - 3 T cLR)/M, same C,
 *   B = -D2/(2M) + (T/M)(cLL + cRR)(p^2/E - k) + (3/2) Q T S/M.
 *
 * @param E signed electron energy [MeV], |E| >= m_e
 * @returns coefficients [MeV^2, MeV^3, MeV^4] of f and its derivatives; what is left out is of order (energy/M)^2
 * @see Seckel 1993 (hep-ph/9305311); Lopez, Turner & Gyuk 1997, Phys. Rev. D 56, 3191; this form derived for this project
 */
export function finiteMassIntegrand(E: number, weakMagnetism: boolean, inputs: WeakInputs): Integrand {
  const { gA, Q, electronMass } = inputs;
  const f = weakMagnetism ? inputs.magnetism : 0;
  const M = nucleonMass(inputs);
  const S = (1 + 3 * gA * gA) / 4;
  const cLL = ((1 + gA) ** 2 / 4 + f * gA) / S;
  const cRR = ((1 - gA) ** 2 / 4 - f * gA) / S;
  const cLR = (gA * gA - 1) / 4 / S;
  const k = E - Q;
  const p2 = E * E - electronMass * electronMass;
  const drift = p2 / E; // E v^2
  // C/T and its derivatives in k, all divided by S; B at T = 0 is -C/T
  const C = (k * k + p2 + (2 / 3) * cLR * k * drift) / (2 * M);
  const dC = (2 * k + (2 / 3) * cLR * drift) / (2 * M);
  const ddC = 1 / M;
  const thermal = (cLL + cRR) / M;
  const A1 = (-3 * cLR) / M;
  const B1 = thermal * (k - drift) - (1.5 * Q) / M; // slope of B in T for n -> p; opposite for p -> n
  const c0T = A1 - thermal + ddC;
  const c1T = 2 * dC - B1;
  const n = onProduct(k, 1 + (cLL * drift - cRR * k) / M + dC, c0T, C, c1T, C);
  const p = onProduct(k, 1 + (cLL * k - cRR * drift) / M - dC, c0T, -C, c1T, C);
  return { n0: n[0], n1: n[1], n2: n[2], p0: p[0], p1: p[1], p2: p[2] };
}

/** (c0 + T c0T) G + (c1 + T c1T) G' + T c2T G'' with G = k^2 f, rearranged into coefficients of f, f' and f''. */
function onProduct(
  k: number,
  c0: number,
  c0T: number,
  c1: number,
  c1T: number,
  c2T: number,
): [[number, number], [number, number], number] {
  const k2 = k * k;
  return [[c0 * k2 + 2 * k * c1, c0T * k2 + 2 * k * c1T + 2 * c2T], [c1 * k2, c1T * k2 + 4 * k * c2T], c2T * k2];
}

/**
 * Integrand at one signed electron energy and the factor (Fermi function and radiative correction) on the whole of it.
 * @param E signed electron energy [MeV], |E| > m_e, E not equal to Q
 */
export function correctedIntegrand(
  E: number,
  options: WeakOptions,
  inputs: WeakInputs,
): { readonly factor: number; readonly integrand: Integrand } {
  const energy = Math.abs(E);
  const p = Math.sqrt((energy - inputs.electronMass) * (energy + inputs.electronMass));
  let factor = 1;
  if (options.coulomb && E > 0) factor *= fermiFunction(p, inputs);
  if (options.radiative) factor *= radiativeFactor(energy, Math.abs(E - inputs.Q), inputs);
  const integrand = options.finiteMass
    ? finiteMassIntegrand(E, options.weakMagnetism, inputs)
    : bornIntegrand(E, inputs);
  return { factor, integrand };
}
