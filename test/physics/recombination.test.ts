/** Published distances, horizons and redshifts of last scattering and baryon drag, and the published fits to them. */
import { describe, expect, test } from "vitest";
import { ageAt, lateBackground } from "../../src/background/expansion.ts";
import { SECONDS_PER_JULIAN_YEAR } from "../../src/constants/units.ts";
import { comovingDistance } from "../../src/lineofsight/distances.ts";
import { soundHorizon } from "../../src/lineofsight/sound-horizon.ts";
import { computeLineOfSight } from "../../src/lineofsight/summary.ts";
import { computeIonisationHistory } from "../../src/recombination/history.ts";
import type { RecombinationInputs } from "../../src/recombination/inputs.ts";
import { STANDARD } from "../unit/recombination/cosmologies.ts";

const gigayears = (seconds: number) => seconds / SECONDS_PER_JULIAN_YEAR / 1e9;
const run = (changes: Partial<RecombinationInputs> = {}) => {
  const inputs = { ...STANDARD, ...changes };
  return computeLineOfSight(inputs, computeIonisationHistory(inputs)).summary;
};

// Planck 2018 VI, A&A 641, A6, Table 2, TT,TE,EE+lowE+lensing; N_eff = 3.046, one neutrino of 0.06 eV. At the published
// redshifts z_* = 1089.92 and z_drag = 1059.94 these are pure integrals.
describe("Planck 2018, TT,TE,EE+lowE+lensing, at its z_* and z_drag", () => {
  const b = lateBackground({ omegaB: 0.02237, omegaC: 0.12, h0: 67.36, tCmb: 2.7255, nEff: 3.046, sumMnu: 0.06 });
  const rStar = soundHorizon(b, 1089.92);

  test("r_* = 144.43 Mpc", () => expect(Math.abs(rStar - 144.43)).toBeLessThan(0.03));
  test("r_drag = 147.09 Mpc", () => expect(Math.abs(soundHorizon(b, 1059.94) - 147.09)).toBeLessThan(0.03));
  test("D_M(z_*) = 13872.8 Mpc", () => expect(Math.abs(comovingDistance(b, 1089.92) / 13872.8 - 1)).toBeLessThan(1e-4));
  test("100 theta_* = 1.04110", () =>
    expect(Math.abs((100 * rStar) / comovingDistance(b, 1089.92) - 1.0411)).toBeLessThan(1e-4));
  test("age 13.797 Gyr", () => expect(Math.abs(gigayears(ageAt(b, 0)) - 13.797)).toBeLessThan(0.001));
  test("z_eq = 3402", () => expect(Math.abs(b.zEq - 3402)).toBeLessThan(1));
  test("omega_m = 0.1430, Omega_m = 0.3153", () => {
    expect(Math.abs(b.omegaM - 0.143)).toBeLessThan(1e-4);
    expect(Math.abs(b.omegaM / 0.6736 ** 2 - 0.3153)).toBeLessThan(2e-4);
  });

  // Independent quadrature made for this project: 144.432, 147.092, 13872.75, 1.04112, 13.7971; last digit +-1.
  test("independent quadrature of the same integrals", () => {
    expect(Math.abs(rStar - 144.432)).toBeLessThan(1e-3);
    expect(Math.abs(soundHorizon(b, 1059.94) - 147.092)).toBeLessThan(1e-3);
    expect(Math.abs(comovingDistance(b, 1089.92) - 13872.75)).toBeLessThan(0.02);
    expect(Math.abs(gigayears(ageAt(b, 0)) - 13.7971)).toBeLessThan(1e-4);
  });

  // For Planck parameters 371.7 kyr at z = 1089.92 (independent quadrature made for this project).
  test("age at z_* 371.7 kyr", () => expect(Math.abs(gigayears(ageAt(b, 1089.92)) * 1e6 - 371.7)).toBeLessThan(0.1));
});

// The same paper, TT,TE,EE+lowE+lensing+BAO (omega_b 0.02242, omega_c 0.11933, H0 67.66): independent integrals
// r_* 144.567, r_drag 147.214, 100 theta_* 1.04119, age 13.7872, z_eq 3387.1.
describe("Planck 2018 with BAO, at its z_* = 1089.80 and z_drag = 1060.01", () => {
  const b = lateBackground({ omegaB: 0.02242, omegaC: 0.11933, h0: 67.66, tCmb: 2.7255, nEff: 3.046, sumMnu: 0.06 });
  const rStar = soundHorizon(b, 1089.8);

  test("published values", () => {
    expect(Math.abs(rStar - 144.57)).toBeLessThan(0.03);
    expect(Math.abs(soundHorizon(b, 1060.01) - 147.21)).toBeLessThan(0.03);
    expect(Math.abs((100 * rStar) / comovingDistance(b, 1089.8) - 1.04119)).toBeLessThan(1e-4);
    expect(Math.abs(gigayears(ageAt(b, 0)) - 13.787)).toBeLessThan(0.001);
    expect(Math.abs(b.zEq - 3387)).toBeLessThan(1);
    expect(Math.abs(b.omegaM / 0.6766 ** 2 - 0.30966)).toBeLessThan(0.0015);
  });

  test("independent quadrature of the same integrals", () => {
    expect(Math.abs(rStar - 144.567)).toBeLessThan(1e-3);
    expect(Math.abs(soundHorizon(b, 1060.01) - 147.214)).toBeLessThan(1e-3);
    expect(Math.abs(gigayears(ageAt(b, 0)) - 13.7872)).toBeLessThan(1e-4);
    expect(Math.abs(b.zEq - 3387.1)).toBeLessThan(0.1);
  });
});

// z_* = 1089.92 +- 0.25 and z_drag = 1059.94 +- 0.30 (same table): 2 for a plain three-level atom. The factor 1.14 of
// Seager, Sasselov & Scott 1999, ApJ 523, L1 moves z_* to about 1090.3.
describe("redshifts of last scattering and drag", () => {
  const plain = run();
  const faster = run({ alphaFactor: 1.14 });

  test("plain three-level atom within 2 of the published redshifts", () => {
    expect(Math.abs(plain.zStar - 1089.92)).toBeLessThan(2);
    expect(Math.abs(plain.zDrag - 1059.94)).toBeLessThan(2);
  });

  test("with the factor 1.14, 0.8 higher", () => {
    expect(Math.abs(faster.zStar - 1090.3)).toBeLessThan(0.1);
    expect(Math.abs(faster.zDrag - 1059.94)).toBeLessThan(2);
  });

  test("damping wavenumber 0.14087 /Mpc within 1 %", () => {
    expect(Math.abs(plain.kD_invMpc / 0.14087 - 1)).toBeLessThan(0.01);
  });

  test("about 3,000 K, 350,000 to 400,000 years, half ionised near 1370 (Saha) and 1270", () => {
    expect(Math.abs(plain.temperatureAtStar_K - 3000)).toBeLessThan(50);
    expect(plain.ageAtStar_yr).toBeGreaterThan(350e3);
    expect(plain.ageAtStar_yr).toBeLessThan(400e3);
    expect(Math.abs(plain.zHalfIonisedSaha - 1370)).toBeLessThan(5);
    expect(Math.abs((plain.zHalfIonised as number) - 1270)).toBeLessThan(5);
  });
});

// Bennett et al. 2003, ApJS 148, 1: z_dec = 1089 +- 1, the peak of the visibility function, thickness 195 +- 2 (full width
// at half maximum), 379 (+8 -7) kyr; omega_b = 0.0224, omega_m = 0.135, h = 0.71.
describe("WMAP first year", () => {
  const s = run({ omegaB: 0.0224, omegaC: 0.1126, h0: 71, tCmb: 2.725, sumMnu: 0 });

  test("the peak of g(eta) at 1089 within 3 and its width 195 within 4 %", () => {
    expect(Math.abs(s.visibility.zOfEtaPeak - 1089)).toBeLessThan(3);
    expect(Math.abs((s.visibility.fwhmZOfEta as number) / 195 - 1)).toBeLessThan(0.04);
  });

  test("379 (+8 -7) kyr within one standard deviation", () => {
    expect(s.ageAtStar_yr).toBeGreaterThan(372e3);
    expect(s.ageAtStar_yr).toBeLessThan(387e3);
  });
});

test("g(z) peaks about 10 below g(eta): the two visibility functions are not one", () => {
  const { visibility } = run();
  expect(visibility.zOfEtaPeak - visibility.zPeak).toBeGreaterThan(8);
  expect(visibility.zOfEtaPeak - visibility.zPeak).toBeLessThan(12);
});
