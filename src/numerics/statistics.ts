/** Statistics: regularised incomplete gamma, normal and chi-squared distributions and their quantiles, sample summaries. */
import { logGamma } from "./special.ts";

/**
 * Regularised incomplete gamma functions P(a, x) and Q(a, x) = 1 - P: series below x = a + 1, continued fraction
 * above; relative accuracy 1e-14 in the smaller of the two.
 * @param a shape, >= 0.5
 * @param x >= 0
 * @see Abramowitz & Stegun 1964, 6.5.29 and 6.5.31
 */
export function incompleteGamma(a: number, x: number): { P: number; Q: number } {
  if (!(a >= 0.5 && x >= 0)) throw new RangeError(`incomplete gamma: a = ${a}, x = ${x} outside a >= 0.5, x >= 0`);
  if (x === 0) return { P: 0, Q: 1 };
  // Gamma(a + 1) keeps the Lanczos series in its range; Q needs Gamma(a) = Gamma(a + 1)/a.
  const front = Math.exp(a * Math.log(x) - x - logGamma(a + 1).re);
  if (x < a + 1) {
    let term = 1;
    let sum = 1;
    for (let k = 1; k < 10000; k++) {
      term *= x / (a + k);
      sum += term;
      if (term < sum * 1e-17) break;
    }
    const P = front * sum;
    return { P, Q: 1 - P };
  }
  const tiny = 1e-300;
  let b = x + 1 - a;
  let c = 1 / tiny;
  let d = 1 / b;
  let h = d;
  for (let k = 1; k < 10000; k++) {
    const an = -k * (k - a);
    b += 2;
    d = an * d + b;
    if (Math.abs(d) < tiny) d = tiny;
    c = b + an / c;
    if (Math.abs(c) < tiny) c = tiny;
    d = 1 / d;
    const change = d * c;
    h *= change;
    if (Math.abs(change - 1) < 1e-16) break;
  }
  const Q = front * a * h;
  return { P: 1 - Q, Q };
}

/** Probability that a standard normal variable is below x. */
export function normalCdf(x: number): number {
  const { P, Q } = incompleteGamma(0.5, (x * x) / 2);
  return x >= 0 ? 0.5 + P / 2 : Q / 2;
}

/**
 * x with normalCdf(x) = p, by Halley steps from a rational start; absolute accuracy 1e-13 for 1e-300 < p < 1.
 * @throws {RangeError} unless 0 < p < 1
 * @see start: Abramowitz & Stegun 1964, 26.2.23
 */
export function normalQuantile(p: number): number {
  if (!(p > 0 && p < 1)) throw new RangeError(`normal quantile: p = ${p} must lie between 0 and 1`);
  if (p > 0.5) return -normalQuantile(1 - p);
  if (p === 0.5) return 0;
  const t = Math.sqrt(-2 * Math.log(p));
  let x = -(t - (2.515517 + t * (0.802853 + t * 0.010328)) / (1 + t * (1.432788 + t * (0.189269 + t * 0.001308))));
  for (let i = 0; i < 4; i++) {
    const density = Math.exp((-x * x) / 2) / Math.sqrt(2 * Math.PI);
    const step = (normalCdf(x) - p) / density;
    x -= step / (1 + (x * step) / 2);
    if (Math.abs(step) < 1e-15 * Math.abs(x)) break;
  }
  return x;
}

/** Probability that a chi-squared variable of k degrees of freedom is below x. */
export function chiSquaredCdf(x: number, k: number): number {
  return x <= 0 ? 0 : incompleteGamma(k / 2, x / 2).P;
}

/** Probability that a chi-squared variable of k degrees of freedom exceeds x. */
export function chiSquaredSurvival(x: number, k: number): number {
  return x <= 0 ? 1 : incompleteGamma(k / 2, x / 2).Q;
}

/** Mean of a sample. */
export function mean(x: ArrayLike<number>): number {
  let sum = 0;
  for (let i = 0; i < x.length; i++) sum += x[i];
  return sum / x.length;
}

/** Covariance of two samples of equal length, with divisor n - 1. */
export function covariance(x: ArrayLike<number>, y: ArrayLike<number>): number {
  const mx = mean(x);
  const my = mean(y);
  let sum = 0;
  for (let i = 0; i < x.length; i++) sum += (x[i] - mx) * (y[i] - my);
  return sum / (x.length - 1);
}

/** Quantile q of an ascending sample: linear between order statistics at (i)/(n - 1) (Hyndman & Fan 1996, type 7). */
export function sortedQuantile(sorted: ArrayLike<number>, q: number): number {
  const position = q * (sorted.length - 1);
  const i = Math.min(Math.floor(position), sorted.length - 2);
  if (sorted.length === 1) return sorted[0];
  return sorted[i] + (position - i) * (sorted[i + 1] - sorted[i]);
}
