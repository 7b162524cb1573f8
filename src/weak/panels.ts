/** Energy panels of the weak integrals: Gauss nodes with everything that does not depend on temperature. */
import { gaussLegendre } from "../numerics/quadrature.ts";
import { correctedIntegrand } from "./corrections.ts";
import type { WeakInputs, WeakOptions } from "./inputs.ts";

/**
 * The three pieces of the energy axis, each with a scale-free variable x >= 0 that starts at the sharp point:
 * neutrino: E = Q + x (n nu <-> p e-); antineutrino: E = Q - x, x <= Q - m_e (n <-> p e- nubar);
 * positron: E = -(m_e + x) (n e+ <-> p nubar).
 */
export type Segment = "neutrino" | "antineutrino" | "positron";

/** Numbers kept for each node, see {@link Panel}. */
export const STRIDE = 12;

/**
 * Nodes of one panel. Row i of `data` holds x [MeV], |E| [MeV], then, multiplied by the quadrature weight, p |E| dE and
 * the correction factor: n0 (two numbers), n1 (two), n2, p0 (two), p1 (two), p2 of the integrand.
 */
export interface Panel {
  readonly count: number;
  readonly data: Float64Array;
}

/**
 * Panels for one set of switches and constants. The axis is cut at x = L 2^j, L = Q - m_e: a head [0, L 2^j] and bodies
 * [L 2^(j-1), L 2^j]. A temperature picks the head next to it and the bodies above, so that its scale is always
 * resolved while all nodes are shared between temperatures; panels are made when first asked for and kept.
 */
export interface PanelStore {
  /** L = Q - m_e [MeV]. */
  readonly scale: number;
  head(segment: Segment, level: number): Panel;
  body(segment: Segment, level: number): Panel;
}

/** Empty store. @param points Gauss points in each panel */
export function createPanelStore(options: WeakOptions, inputs: WeakInputs, points: number): PanelStore {
  const scale = inputs.Q - inputs.electronMass;
  const emptyMaps = () => ({ neutrino: new Map(), antineutrino: new Map(), positron: new Map() });
  const heads: Record<Segment, Map<number, Panel>> = emptyMaps();
  const bodies: Record<Segment, Map<number, Panel>> = emptyMaps();
  const make = (kept: Map<number, Panel>, segment: Segment, lo: number, hi: number, level: number): Panel => {
    const panel = makePanel(segment, lo, hi, options, inputs, points);
    kept.set(level, panel);
    return panel;
  };
  return {
    scale,
    head(segment, level) {
      const kept = heads[segment];
      return kept.get(level) ?? make(kept, segment, 0, scale * 2 ** level, level);
    },
    body(segment, level) {
      const kept = bodies[segment];
      return kept.get(level) ?? make(kept, segment, scale * 2 ** (level - 1), scale * 2 ** level, level);
    },
  };
}

/**
 * Fractions of u = sqrt(E - m_e) at which the panel that ends at p = 0 is cut: the Fermi function changes its form at
 * p = 2 pi alpha E, a fiftieth of the panel.
 */
const END_POINT_CUTS = [0, 0.02, 0.15, 1];

/**
 * Gauss panel in x from lo to hi. Panels that touch p = 0 use u = sqrt(E - m_e), in which p is smooth; those that touch
 * k = 0 use v = sqrt(x), which tames the k^2 ln k of the radiative correction.
 */
function makePanel(
  segment: Segment,
  lo: number,
  hi: number,
  options: WeakOptions,
  inputs: WeakInputs,
  points: number,
): Panel {
  const { Q, electronMass } = inputs;
  const top = Q - electronMass;
  const rows: number[] = [];
  const add = (x: number, kinetic: number, dE: number) => {
    const energy = electronMass + kinetic;
    const p = Math.sqrt(kinetic * (kinetic + 2 * electronMass));
    const { factor, integrand } = correctedIntegrand(segment === "positron" ? -energy : energy, options, inputs);
    const { n0, n1, n2, p0, p1, p2 } = integrand;
    const w = dE * p * energy * factor;
    rows.push(x, energy, ...[...n0, ...n1, n2, ...p0, ...p1, p2].map((c) => w * c));
  };
  if (segment === "positron" && lo === 0)
    forNodes([0, Math.sqrt(hi)], points, (u, du) => add(u * u, u * u, 2 * u * du));
  else if (segment === "antineutrino" && hi >= top) {
    const cuts = END_POINT_CUTS.map((cut) => cut * Math.sqrt(top - lo));
    forNodes(cuts, points, (u, du) => add(top - u * u, u * u, 2 * u * du));
  } else {
    const kinetic = {
      neutrino: (x: number) => top + x,
      antineutrino: (x: number) => top - x,
      positron: (x: number) => x,
    };
    if (lo === 0) forNodes([0, Math.sqrt(hi)], points, (v, dv) => add(v * v, kinetic[segment](v * v), 2 * v * dv));
    else forNodes([lo, hi], points, (x, dx) => add(x, kinetic[segment](x), dx));
  }
  return { count: rows.length / STRIDE, data: Float64Array.from(rows) };
}

/** Calls use(v, dv) at the Gauss nodes of consecutive intervals. */
function forNodes(edges: readonly number[], points: number, use: (v: number, dv: number) => void): void {
  const { nodes, weights } = gaussLegendre(points);
  for (let j = 1; j < edges.length; j++) {
    const half = (edges[j] - edges[j - 1]) / 2;
    for (let i = 0; i < points; i++) use(edges[j - 1] + half * (1 + nodes[i]), half * weights[i]);
  }
}
