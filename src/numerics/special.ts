/** Special functions the weak rates need: |Gamma(x + iy)|^2 and the dilogarithm. */

const LANCZOS = [
  0.99999999999980993, 676.5203681218851, -1259.1392167224028, 771.32342877765313, -176.61502916214059,
  12.507343278686905, -0.13857109526572012, 9.9843695780195716e-6, 1.5056327351493116e-7,
];

/**
 * ln Gamma(x + iy) (real and imaginary part), Lanczos approximation with g = 7, n = 9; relative accuracy 1e-14.
 * @param x real part, > 0.5
 * @see Lanczos 1964, SIAM J. Numer. Anal. B 1, 86; coefficients of Godfrey (2001), from memory, tested on identities
 */
export function logGamma(x: number, y = 0): { re: number; im: number } {
  const zr = x - 1;
  let sr = LANCZOS[0];
  let si = 0;
  for (let k = 1; k < 9; k++) {
    const dr = zr + k;
    const norm = dr * dr + y * y;
    sr += (LANCZOS[k] * dr) / norm;
    si -= (LANCZOS[k] * y) / norm;
  }
  const tr = zr + 7.5;
  const logT = 0.5 * Math.log(tr * tr + y * y);
  const argT = Math.atan2(y, tr);
  const a = zr + 0.5;
  return {
    re: 0.5 * Math.log(2 * Math.PI) + a * logT - y * argT - tr + 0.5 * Math.log(sr * sr + si * si),
    im: a * argT + y * logT - y + Math.atan2(si, sr),
  };
}

/** Gamma(x) for x > 0.5. */
export function gamma(x: number): number {
  return Math.exp(logGamma(x).re);
}

/**
 * Dilogarithm Li2(x) = -int_0^x ln(1 - t)/t dt for real x <= 1; absolute accuracy 1e-15.
 * Series in -ln(1 - x) with Bernoulli numbers after reduction to [-1, 1/2].
 * @throws {RangeError} if x > 1
 * @see Lewin 1981, Polylogarithms and Associated Functions, sec. 1.2-1.4
 */
export function dilogarithm(x: number): number {
  if (!(x <= 1)) throw new RangeError(`Li2(${x}): real argument must be at most 1`);
  const zeta2 = (Math.PI * Math.PI) / 6;
  if (x === 1) return zeta2;
  if (x > 0.5) return zeta2 - Math.log(x) * Math.log(1 - x) - dilogarithm(1 - x);
  if (x < -1) return -zeta2 - 0.5 * Math.log(-x) ** 2 - dilogarithm(1 / x);
  const u = -Math.log1p(-x);
  const u2 = u * u;
  // B_2k/(2k + 1)! for k = 1 ...
  const b = [
    1 / 36,
    -1 / 3600,
    1 / 211680,
    -1 / 10886400,
    1 / 526901760,
    -691 / 16999766784000,
    1 / 1120863744000,
    -3617 / 181400588328960000,
    43867 / 97072790126247936000,
  ];
  let sum = 0;
  for (let k = b.length - 1; k >= 0; k--) sum = sum * u2 + b[k];
  return u - u2 / 4 + u * u2 * sum;
}
