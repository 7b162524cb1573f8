/** Gauss-Legendre nodes and weights, composite rules, and an adaptive integral with an error estimate. */
import { CalculationError } from "./check.ts";

export interface GaussRule {
  readonly nodes: Float64Array;
  readonly weights: Float64Array;
}

const rules = new Map<number, GaussRule>();

/**
 * Gauss-Legendre rule with n points on [-1, 1], by Newton iteration on the Legendre recurrence; exact to rounding.
 * @param n number of points, >= 1
 * @see Abramowitz & Stegun 1964, 25.4.29
 */
export function gaussLegendre(n: number): GaussRule {
  const known = rules.get(n);
  if (known) return known;
  const nodes = new Float64Array(n);
  const weights = new Float64Array(n);
  for (let i = 0; i < (n + 1) >> 1; i++) {
    let x = Math.cos((Math.PI * (i + 0.75)) / (n + 0.5));
    let derivative = 0;
    for (let iteration = 0; iteration < 100; iteration++) {
      let p0 = 1;
      let p1 = x;
      for (let k = 2; k <= n; k++) {
        const p2 = ((2 * k - 1) * x * p1 - (k - 1) * p0) / k;
        p0 = p1;
        p1 = p2;
      }
      if (n === 1) p0 = 1;
      derivative = (n * (x * p1 - p0)) / (x * x - 1);
      const dx = p1 / derivative;
      x -= dx;
      if (Math.abs(dx) < 1e-15) break;
    }
    if (n % 2 === 1 && i === (n - 1) / 2) x = 0;
    let p0 = 1;
    let p1 = x;
    for (let k = 2; k <= n; k++) {
      const p2 = ((2 * k - 1) * x * p1 - (k - 1) * p0) / k;
      p0 = p1;
      p1 = p2;
    }
    derivative = (n * (x * p1 - p0)) / (x * x - 1);
    const w = 2 / ((1 - x * x) * derivative * derivative);
    nodes[i] = -x;
    nodes[n - 1 - i] = x;
    weights[i] = w;
    weights[n - 1 - i] = w;
  }
  const rule = { nodes, weights };
  rules.set(n, rule);
  return rule;
}

/** Integral of f over [a, b] with the n-point Gauss-Legendre rule. */
export function integrateGauss(f: (x: number) => number, a: number, b: number, n: number): number {
  const { nodes, weights } = gaussLegendre(n);
  const half = (b - a) / 2;
  const middle = (a + b) / 2;
  let sum = 0;
  for (let i = 0; i < n; i++) sum += weights[i] * f(middle + half * nodes[i]);
  return sum * half;
}

/** Integral of f over consecutive panels given by `edges` (ascending), n points each. */
export function integratePanels(f: (x: number) => number, edges: ArrayLike<number>, n: number): number {
  let sum = 0;
  for (let i = 1; i < edges.length; i++) sum += integrateGauss(f, edges[i - 1], edges[i], n);
  return sum;
}

/**
 * Adaptive integral of f over [a, b]: Gauss 10 against Gauss 21 points, the worst panel halved until the summed
 * difference is below `rtol` of the result (or below `atol`).
 * @throws {CalculationError} if 2000 panels do not reach the tolerance or f is not finite
 */
export function integrateAdaptive(
  f: (x: number) => number,
  a: number,
  b: number,
  rtol = 1e-10,
  atol = 0,
): { value: number; error: number } {
  const panel = (lo: number, hi: number) => {
    const value = integrateGauss(f, lo, hi, 21);
    return { lo, hi, value, error: Math.abs(value - integrateGauss(f, lo, hi, 10)) };
  };
  const panels = [panel(a, b)];
  for (;;) {
    let value = 0;
    let error = 0;
    let worst = 0;
    for (let i = 0; i < panels.length; i++) {
      value += panels[i].value;
      error += panels[i].error;
      if (panels[i].error > panels[worst].error) worst = i;
    }
    if (!Number.isFinite(value)) throw new CalculationError("quadrature", `integral over [${a}, ${b}] is not finite`);
    if (error <= Math.max(rtol * Math.abs(value), atol)) return { value, error };
    if (panels.length >= 2000)
      throw new CalculationError("quadrature", `integral over [${a}, ${b}]: error ${error} above tolerance`);
    const { lo, hi } = panels[worst];
    const middle = (lo + hi) / 2;
    panels[worst] = panel(lo, middle);
    panels.push(panel(middle, hi));
  }
}
