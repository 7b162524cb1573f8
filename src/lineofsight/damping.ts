/** Photon diffusion (Silk) damping scale. */
import { LIGHT_SPEED } from "../constants/codata.ts";
import { METRE_PER_MPC } from "../constants/units.ts";
import { gaussLegendre } from "../numerics/quadrature.ts";
import { Z_TOP } from "../recombination/history.ts";
import { diffusionWeight, type LineOfSight, thomsonPerElectron } from "./optical-depth.ts";
import { baryonLoading } from "./sound-horizon.ts";

/** Redshift to which the diffusion integral is taken; what is left out is 1e-9 of it. */
const Z_FAR = 1e7;
const POINTS = 5;
const PANELS = 20;

/**
 * Damping wavenumber at last scattering,
 * k_D^-2 = int_(z_star)^inf c dz/H [R^2 + (16/15)(1 + R)]/[6 (1 + R)^2 a n_e sigma_T], a = 1/(1 + z).
 * Above Z_TOP, which contributes 5e-4 of it, x_e is that of Z_TOP (constant there to 1e-6).
 *
 * @param logStar ln(1 + z_star)
 * @returns k_D [1/Mpc]
 * @see Kaiser 1983, MNRAS 202, 1169; Zaldarriaga & Harari 1995, PRD 52, 3276
 */
export function dampingWavenumber(sight: LineOfSight, logStar: number): number {
  const { history } = sight;
  const { background } = history;
  const R0 = baryonLoading(background);
  const perElectron = thomsonPerElectron(history);
  const { nodes, weights } = gaussLegendre(POINTS);
  const expansion = new Float64Array(2);
  const top = Math.log1p(Z_TOP);
  const xe = sight.xe(top, false);
  const half = (Math.log1p(Z_FAR) - top) / PANELS / 2;
  let far = 0;
  for (let i = 0; i < PANELS; i++)
    for (let k = 0; k < POINTS; k++) {
      const x = top + half * (2 * i + 1 + nodes[k]);
      background.hubbleAndSlope(-x, expansion);
      const step = (LIGHT_SPEED.value / METRE_PER_MPC / expansion[0]) * Math.exp(x);
      far += (weights[k] * half * diffusionWeight(R0 * Math.exp(-x)) * step * step) / (perElectron(x) * xe);
    }
  return 1 / Math.sqrt(sight.diffusion(logStar) + far);
}
