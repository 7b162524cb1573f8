/** Published closed-form fits to last scattering and the sound horizon: for comparison, never used in a calculation. */

/**
 * Redshift of last scattering of Hu & Sugiyama 1996, ApJ 471, 542, eq. E-1 (coefficients from memory):
 * z = 1048 [1 + 0.00124 w_b^-0.738] [1 + g1 w_m^g2]. Fitted to the recombination physics of 1996: about 2 too high.
 * @param omegaB Omega_b h^2
 * @param omegaM Omega_m h^2
 */
export function huSugiyama1996(omegaB: number, omegaM: number): number {
  const g1 = (0.0783 * omegaB ** -0.238) / (1 + 39.5 * omegaB ** 0.763);
  const g2 = 0.56 / (1 + 21.1 * omegaB ** 1.81);
  return 1048 * (1 + 0.00124 * omegaB ** -0.738) * (1 + g1 * omegaM ** g2);
}

/**
 * Drag redshift of Eisenstein & Hu 1998, ApJ 496, 605, eq. 4. Known to be 40 too low; its definition differs.
 */
export function eisensteinHu1998DragRedshift(omegaB: number, omegaM: number): number {
  const b1 = 0.313 * omegaM ** -0.419 * (1 + 0.607 * omegaM ** 0.674);
  const b2 = 0.238 * omegaM ** 0.223;
  return ((1291 * omegaM ** 0.251) / (1 + 0.659 * omegaM ** 0.828)) * (1 + b1 * omegaB ** b2);
}

/**
 * Sound horizon at that redshift, the same paper, eqs. 2 to 6.
 * @param tCmb [K]
 * @returns [Mpc]
 */
export function eisensteinHu1998SoundHorizon(omegaB: number, omegaM: number, tCmb: number): number {
  const theta = tCmb / 2.7;
  const zEq = 2.5e4 * omegaM * theta ** -4;
  const kEq = 7.46e-2 * omegaM * theta ** -2;
  const R = (z: number) => (31.5 * omegaB * theta ** -4 * 1000) / z;
  const drag = R(eisensteinHu1998DragRedshift(omegaB, omegaM));
  const equality = R(zEq);
  const ratio = (Math.sqrt(1 + drag) + Math.sqrt(drag + equality)) / (1 + Math.sqrt(equality));
  return (2 / (3 * kEq)) * Math.sqrt(6 / equality) * Math.log(ratio);
}

/**
 * Sound horizon, the same paper, approximation of eq. 26: 44.5 ln(9.83/w_m)/sqrt(1 + 10 w_b^(3/4)).
 * @returns [Mpc]
 */
export function eisensteinHu1998Approximation(omegaB: number, omegaM: number): number {
  return (44.5 * Math.log(9.83 / omegaM)) / Math.sqrt(1 + 10 * omegaB ** 0.75);
}

/**
 * Sound horizon at the drag epoch of Aubourg et al. 2015, PRD 92, 123516, eq. 16 (coefficients from memory):
 * 55.154 exp(-72.3 (w_nu + 0.0006)^2)/(w_cb^0.25351 w_b^0.12807), for N_eff = 3.046.
 * @param omegaCb Omega_cb h^2, baryons and cold dark matter
 * @param omegaNu Omega_nu h^2 of the massive neutrino
 * @returns [Mpc], within 0.02 % near the Planck cosmology
 */
export function aubourg2015DragHorizon(omegaB: number, omegaCb: number, omegaNu: number): number {
  return (55.154 * Math.exp(-72.3 * (omegaNu + 0.0006) ** 2)) / (omegaCb ** 0.25351 * omegaB ** 0.12807);
}

/**
 * The same of DESI Collaboration 2025, JCAP 02, 021, eq. 2.5 (coefficients from memory):
 * 147.05 (w_b/0.02236)^-0.13 (w_m/0.1432)^-0.23 (N_eff/3.04)^-0.1.
 * @returns [Mpc]
 */
export function desi2025DragHorizon(omegaB: number, omegaM: number, nEff: number): number {
  return 147.05 * (omegaB / 0.02236) ** -0.13 * (omegaM / 0.1432) ** -0.23 * (nEff / 3.04) ** -0.1;
}
