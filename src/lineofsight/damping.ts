/** Photon diffusion (Silk) damping scale. */
import { LIGHT_SPEED } from "../constants/codata.ts";
import { METRE_PER_MPC } from "../constants/units.ts";
import { gaussLegendre } from "../numerics/quadrature.ts";
import type { LineOfSight } from "./optical-depth.ts";
import { baryonLoading } from "./sound-horizon.ts";

/** Redshift to which the diffusion integral is taken; what is left out is 1e-9 of it. */
const Z_FAR = 1e7;
const POINTS = 5;
const WIDEST = 0.25;

/**
 * Damping wavenumber at last scattering,
 * k_D^-2 = int_(z_star)^inf c dz/H [R^2 + (16/15)(1 + R)]/[6 (1 + R)^2 a n_e sigma_T], a = 1/(1 + z).
 *
 * @param logStar ln(1 + z_star)
 * @returns k_D [1/Mpc]
 * @see Kaiser 1983, MNRAS 202, 1169; Zaldarriaga & Harari 1995, PRD 52, 3276
 */
export function dampingWavenumber(sight: LineOfSight, logStar: number): number {
  const { history, edges } = sight;
  const { background } = history;
  const R0 = baryonLoading(background);
  const { nodes, weights } = gaussLegendre(POINTS);
  const expansion = new Float64Array(2);
  let sum = 0;
  const panel = (from: number, to: number) => {
    const half = (to - from) / 2;
    for (let k = 0; k < POINTS; k++) {
      const x = (to + from) / 2 + half * nodes[k];
      background.hubbleAndSlope(-x, expansion);
      // c dz/H and a n_e sigma_T in units of d ln(1 + z): c (1+z)/H squared over d tau/d ln(1 + z).
      const step = (LIGHT_SPEED.value / METRE_PER_MPC / expansion[0]) * Math.exp(x);
      const R = R0 * Math.exp(-x);
      const weight = (R * R + (16 / 15) * (1 + R)) / (6 * (1 + R) * (1 + R));
      sum += (weights[k] * half * weight * step * step) / sight.scattering(x, false);
    }
  };
  let from = logStar;
  for (const edge of edges)
    if (edge > logStar + 1e-9) {
      panel(from, edge);
      from = edge;
    }
  const far = Math.log1p(Z_FAR);
  const panels = Math.ceil((far - from) / WIDEST);
  const width = (far - from) / panels;
  for (let i = 0; i < panels; i++) panel(from + i * width, from + (i + 1) * width);
  return 1 / Math.sqrt(sum);
}
