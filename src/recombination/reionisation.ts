/** Reionisation of hydrogen and helium in the tanh form: extra free electrons at low redshift. */

/** Width in redshift of hydrogen reionisation, and place and width of the second ionisation of helium. */
export const REIONISATION = {
  width: 0.5,
  helium: 3.5,
  heliumWidth: 0.5,
  source: "Lewis 2008, PRD 78, 023002 (form and widths)",
} as const;

/**
 * Electrons per hydrogen nucleus of the tanh form: (1 + f_He)/2 [1 + tanh((y_re - y)/Dy)], y = (1 + z)^1.5,
 * Dy = 1.5 (1 + z_re)^0.5 0.5, and helium's second electron, f_He/2 [1 + tanh((3.5 - z)/0.5)] times the reionised share.
 * The factor (1 + tanh)/2 on the helium step matters only for z_re below 4: helium is not ionised twice before once.
 *
 * @param z redshift, >= 0
 * @param zRe redshift of half ionisation
 * @param fHe n_He/n_H
 */
export function reionisedElectrons(z: number, zRe: number, fHe: number): number {
  const y = (1 + z) ** 1.5;
  const yRe = (1 + zRe) ** 1.5;
  const share = 0.5 * (1 + Math.tanh((yRe - y) / (1.5 * Math.sqrt(1 + zRe) * REIONISATION.width)));
  const second = 0.5 * (1 + Math.tanh((REIONISATION.helium - z) / REIONISATION.heliumWidth));
  return share * (1 + fHe + fHe * second);
}

/**
 * x_e with reionisation: the residual of recombination is taken up, not added: x_rec (1 - s) + reionised electrons,
 * s the reionised share, so that x_e never exceeds the electrons that there are.
 * @param residual x_e of recombination alone at z
 */
export function totalElectrons(residual: number, z: number, zRe: number, fHe: number): number {
  const reionised = reionisedElectrons(z, zRe, fHe);
  return reionised + residual * Math.max(0, 1 - reionised / (1 + fHe));
}
