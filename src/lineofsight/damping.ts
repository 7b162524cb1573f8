/** Photon diffusion (Silk) damping scale. */
import type { LineOfSight } from "./optical-depth.ts";

/**
 * Damping wavenumber at last scattering,
 * k_D^-2 = int_(z_star)^inf c dz/H [R^2 + (16/15)(1 + R)]/[6 (1 + R)^2 a n_e sigma_T], a = 1/(1 + z);
 * cut at z = 1e7, which leaves out 1e-9 of it (a cut at 1e4 would leave out 5e-4).
 *
 * @param logStar ln(1 + z_star)
 * @returns k_D [1/Mpc]
 * @see Kaiser 1983, MNRAS 202, 1169; Zaldarriaga & Harari 1995, PRD 52, 3276
 */
export function dampingWavenumber(sight: LineOfSight, logStar: number): number {
  return 1 / Math.sqrt(sight.diffusion(logStar));
}
