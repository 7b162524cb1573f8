/** The visibility function, in redshift and in conformal time: values, peaks and widths at half maximum. */
import { LIGHT_SPEED } from "../constants/codata.ts";
import { METRE_PER_MPC } from "../constants/units.ts";
import { findRoot } from "../numerics/roots.ts";
import type { LineOfSight } from "./optical-depth.ts";

/**
 * g(z) = e^-tau |d tau/dz|, normalised so that int g dz = 1 - e^-tau.
 * @param x ln(1 + z)
 */
export function visibilityPerZ(sight: LineOfSight, x: number, total = true): number {
  return Math.exp(-sight.opticalDepth(x, total) - x) * sight.scattering(x, total);
}

/**
 * g(eta) = e^-tau |d tau/d eta|, eta conformal time: e^-tau a n_e sigma_T.
 * @param x ln(1 + z)
 * @returns [1/Mpc]
 */
export function visibilityPerMpc(sight: LineOfSight, x: number, total = true): number {
  const H = sight.history.background.hubble(Math.expm1(x));
  const step = (LIGHT_SPEED.value / METRE_PER_MPC / H) * Math.exp(x);
  return (Math.exp(-sight.opticalDepth(x, total)) * sight.scattering(x, total)) / step;
}

export interface VisibilitySummary {
  /** Maximum of g(z) and its full width at half maximum in z. Widths are left out where today is within them. */
  readonly zPeak: number;
  readonly fwhmZ?: number;
  /** Maximum of g(eta), its full width at half maximum, and the redshift of the maximum. */
  readonly etaPeak_Mpc: number;
  readonly fwhmEta_Mpc?: number;
  readonly zOfEtaPeak: number;
  /** Width in redshift between the half-maximum points of g(eta). */
  readonly fwhmZOfEta?: number;
}

/** Place of the maximum of g and of the two points of half maximum, as ln(1 + z). */
function peakAndHalves(
  sight: LineOfSight,
  g: (x: number) => number,
): { peak: number; low: number | undefined; high: number } {
  const { edges } = sight;
  let best = -1;
  let most = 0;
  // The peak of last scattering, not that of reionisation: where the depth of recombination alone is 0.01 to 20.
  for (let i = 0; i < edges.length; i++) {
    const depth = sight.depthAtEdges[i];
    if (depth < 0.01 || depth > 20) continue;
    const value = g(edges[i]);
    if (value > most) {
      most = value;
      best = i;
    }
  }
  const peak = maximum(g, edges[Math.max(0, best - 1)], edges[best + 1]);
  const half = 0.5 * g(peak);
  const fall = (direction: 1 | -1) => {
    let i = best + direction;
    while (g(edges[i]) > half) i += direction;
    if (i < 0) return undefined;
    const inner = direction === 1 ? Math.max(peak, edges[i - 1]) : Math.min(peak, edges[i + 1]);
    return findRoot((x) => g(x) - half, inner, edges[i], 1e-10);
  };
  return { peak, low: fall(-1), high: fall(1) as number };
}

/** Maximum of a smooth function by golden-section search. */
function maximum(g: (x: number) => number, from: number, to: number): number {
  const golden = (Math.sqrt(5) - 1) / 2;
  let a = from;
  let b = to;
  let c = b - golden * (b - a);
  let d = a + golden * (b - a);
  let gc = g(c);
  let gd = g(d);
  while (b - a > 3e-8) {
    if (gc > gd) {
      b = d;
      d = c;
      gd = gc;
      c = b - golden * (b - a);
      gc = g(c);
    } else {
      a = c;
      c = d;
      gc = gd;
      d = a + golden * (b - a);
      gd = g(d);
    }
  }
  return (a + b) / 2;
}

/** Peaks and widths of last scattering; a constant factor such as e^-tau of reionisation moves none of them. */
export function visibilitySummary(sight: LineOfSight): VisibilitySummary {
  const inZ = peakAndHalves(sight, (x) => visibilityPerZ(sight, x, false));
  const inEta = peakAndHalves(sight, (x) => visibilityPerMpc(sight, x, false));
  const width = ({ low, high }: typeof inZ) => (low === undefined ? undefined : Math.exp(high) - Math.exp(low));
  const fwhmZ = width(inZ);
  const fwhmZOfEta = width(inEta);
  return {
    zPeak: Math.expm1(inZ.peak),
    ...(fwhmZ === undefined ? {} : { fwhmZ }),
    etaPeak_Mpc: sight.conformalTime(inEta.peak),
    ...(inEta.low === undefined
      ? {}
      : { fwhmEta_Mpc: sight.conformalTime(inEta.low) - sight.conformalTime(inEta.high) }),
    zOfEtaPeak: Math.expm1(inEta.peak),
    ...(fwhmZOfEta === undefined ? {} : { fwhmZOfEta }),
  };
}
