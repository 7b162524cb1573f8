/** Roots of a function of one variable. */
import { CalculationError } from "./check.ts";

/** Enough to bisect the whole range of numbers. */
const MAX_ITERATIONS = 2200;

/**
 * Root of f in [a, b] by Brent's method (bisection, secant, inverse quadratic), to `tolerance` in x.
 * @throws {CalculationError} if f(a) and f(b) have the same sign or f is not finite
 * @see Brent 1973, Algorithms for Minimization without Derivatives, ch. 4
 */
export function findRoot(f: (x: number) => number, a: number, b: number, tolerance = 1e-12): number {
  let fa = f(a);
  let fb = f(b);
  if (fa === 0) return a;
  if (fb === 0) return b;
  if (!(fa * fb < 0)) throw new CalculationError("root", `no change of sign between ${a} and ${b}: f = ${fa}, ${fb}`);
  let c = a;
  let fc = fa;
  let d = b - a;
  let e = d;
  for (let i = 0; i < MAX_ITERATIONS; i++) {
    if (fb * fc > 0) {
      c = a;
      fc = fa;
      d = b - a;
      e = d;
    }
    if (Math.abs(fc) < Math.abs(fb)) {
      a = b;
      b = c;
      c = a;
      fa = fb;
      fb = fc;
      fc = fa;
    }
    const tol = 2 * Number.EPSILON * Math.abs(b) + tolerance / 2;
    const m = (c - b) / 2;
    if (Math.abs(m) <= tol || fb === 0) return b;
    if (Math.abs(e) >= tol && Math.abs(fa) > Math.abs(fb)) {
      const s = fb / fa;
      let p: number;
      let q: number;
      if (a === c) {
        p = 2 * m * s;
        q = 1 - s;
      } else {
        const r = fb / fc;
        const t = fa / fc;
        p = s * (2 * m * t * (t - r) - (b - a) * (r - 1));
        q = (t - 1) * (r - 1) * (s - 1);
      }
      if (p > 0) q = -q;
      else p = -p;
      if (2 * p < Math.min(3 * m * q - Math.abs(tol * q), Math.abs(e * q))) {
        e = d;
        d = p / q;
      } else {
        d = m;
        e = m;
      }
    } else {
      d = m;
      e = m;
    }
    a = b;
    fa = fb;
    b += Math.abs(d) > tol ? d : m > 0 ? tol : -tol;
    fb = f(b);
    if (Number.isNaN(fb)) throw new CalculationError("root", `function is not a number at ${b}`);
  }
  throw new CalculationError("root", `no convergence between ${a} and ${b}`);
}
