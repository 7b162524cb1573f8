/** What the rate equations share: the state of the plasma at one time, and the layout of their partial derivatives. */

/** State at one time. Fractions are per hydrogen nucleus unless said otherwise. */
export interface PlasmaState {
  /** Free electrons x_e. */
  xe: number;
  /** Ionised and neutral hydrogen; each kept to full relative precision. */
  xp: number;
  neutralH: number;
  /** Ionised (He II and He III) and neutral share of helium, per helium nucleus. */
  ionisedHe: number;
  neutralHe: number;
  /** Share of the ionised helium that is He II, and its derivatives by x_e and by ln of the He III Saha factor. */
  singlyShare: number;
  singlyShareByXe: number;
  singlyShareBySaha: number;
  /** Hydrogen nuclei [cm^-3]. */
  nH: number;
  /** Expansion rate [1/s]. */
  H: number;
  /** Temperature of matter and of radiation [K]. */
  Tm: number;
  Tr: number;
}

/** A fresh state to be filled in. */
export function emptyState(): PlasmaState {
  return {
    xe: 0,
    xp: 0,
    neutralH: 0,
    ionisedHe: 0,
    neutralHe: 0,
    singlyShare: 1,
    singlyShareByXe: 0,
    singlyShareBySaha: 0,
    nH: 0,
    H: 0,
    Tm: 0,
    Tr: 0,
  };
}

/**
 * Output of a rate function: the value, then its partial derivatives by x_e, by the logits ln(x_p/x_1s) and
 * ln(He ionised/He neutral), by ln T_m, ln T_r, ln n_H, ln H, and by ln of the He III Saha factor.
 */
export const RATE = {
  value: 0,
  xe: 1,
  logitH: 2,
  logitHe: 3,
  lnTm: 4,
  lnTr: 5,
  lnNH: 6,
  lnH: 7,
  lnSaha: 8,
  size: 9,
} as const;
