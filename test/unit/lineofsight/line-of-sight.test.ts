/** The line of sight: identities of depth and visibility, widths, horizons, diffusion, the table, reionisation. */
import { describe, expect, test } from "vitest";
import { BOLTZMANN, LIGHT_SPEED, THOMSON } from "../../../src/constants/codata.ts";
import { METRE_PER_MPC } from "../../../src/constants/units.ts";
import { comovingDistance, conformalTime } from "../../../src/lineofsight/distances.ts";
import { lineOfSight } from "../../../src/lineofsight/optical-depth.ts";
import { reionisationDepth } from "../../../src/lineofsight/reionisation-depth.ts";
import { baryonLoading, soundHorizon } from "../../../src/lineofsight/sound-horizon.ts";
import { computeLineOfSight } from "../../../src/lineofsight/summary.ts";
import { adaptiveTable, RECOMBINATION_COLUMNS, TABLE_ACCURACY, tableAt } from "../../../src/lineofsight/table.ts";
import { visibilityPerMpc, visibilityPerZ } from "../../../src/lineofsight/visibility.ts";
import { notAKnotSpline } from "../../../src/numerics/interpolate.ts";
import { integrateAdaptive } from "../../../src/numerics/quadrature.ts";
import { computeIonisationHistory } from "../../../src/recombination/history.ts";
import type { RecombinationInputs } from "../../../src/recombination/inputs.ts";
import { reionisedElectrons, totalElectrons } from "../../../src/recombination/reionisation.ts";
import { STANDARD } from "../recombination/cosmologies.ts";

const run = (changes: Partial<RecombinationInputs> = {}) => {
  const inputs = { ...STANDARD, ...changes };
  return computeLineOfSight(inputs, computeIonisationHistory(inputs));
};
const { sight, summary } = run();
const { history } = sight;
const x = (z: number) => Math.log1p(z);

describe("identities", () => {
  test("dtau_dz_matches_visibility: g(z) = e^-tau d tau/dz at every redshift", () => {
    for (const z of [5, 200, 800, 1000, 1089, 1200, 1500, 3000]) {
      const h = 1e-4 * (1 + z);
      const slope = (sight.opticalDepth(x(z + h)) - sight.opticalDepth(x(z - h))) / (2 * h);
      const g = Math.exp(-sight.opticalDepth(x(z))) * slope;
      expect(Math.abs(visibilityPerZ(sight, x(z)) / g - 1), `z = ${z}`).toBeLessThan(2e-5);
    }
  });

  test("the visibility is normalised: int g dz = 1 - e^-tau, in z and in conformal time", () => {
    const whole = 1 - Math.exp(-sight.opticalDepth(x(9000)));
    const inZ = integrateAdaptive((s) => visibilityPerZ(sight, s) * Math.exp(s), 0, x(9000), 1e-9).value;
    expect(Math.abs(inZ / whole - 1)).toBeLessThan(1e-7);
    const perStep = (s: number) =>
      (LIGHT_SPEED.value / METRE_PER_MPC / history.background.hubble(Math.expm1(s))) * Math.exp(s);
    const inEta = integrateAdaptive((s) => visibilityPerMpc(sight, s) * perStep(s), 0, x(9000), 1e-9).value;
    expect(Math.abs(inEta / whole - 1)).toBeLessThan(1e-7);
  });

  test("d tau/dz is c sigma_T n_e/((1 + z) H), with n_e = x_e n_H", () => {
    for (const z of [100, 1000, 2000]) {
      const ne = history.xeAt(x(z)) * history.nH0 * (1 + z) ** 3;
      const expected = (LIGHT_SPEED.value * THOMSON.value * ne * 1e6) / history.background.hubble(z);
      expect(Math.abs(sight.scattering(x(z)) / expected - 1)).toBeLessThan(1e-12);
    }
  });

  test("the cumulated depth agrees with an adaptive integral", () => {
    for (const z of [150, 1089.5, 1500, 5000]) {
      const exact = integrateAdaptive((s) => sight.scattering(s), 0, x(z), 1e-9).value;
      expect(Math.abs(sight.opticalDepth(x(z)) / exact - 1), `z = ${z}`).toBeLessThan(1e-7);
    }
  });

  test("conformal time cumulated along the panels is that of the background alone", () => {
    for (const z of [0, 3, 1089, 9000])
      expect(Math.abs(sight.conformalTime(x(z)) / conformalTime(history.background, z) - 1)).toBeLessThan(1e-9);
  });

  test("z_star and z_drag are where their depths are 1", () => {
    expect(sight.opticalDepth(x(summary.zStar))).toBeCloseTo(1, 8);
    expect(sight.dragDepth(x(summary.zDrag))).toBeCloseTo(1, 8);
  });

  test("theta_star, ages and temperature follow from the redshift", () => {
    expect(summary.temperatureAtStar_K).toBe(STANDARD.tCmb * (1 + summary.zStar));
    const D = comovingDistance(history.background, summary.zStar);
    expect(summary.theta100Star).toBeCloseTo((100 * summary.rStar_Mpc) / D, 12);
    expect(BOLTZMANN.value).toBe(1.380649e-23);
  });
});

test("sound horizon without baryons is the conformal time over sqrt(3)", () => {
  const light = computeIonisationHistory({ ...STANDARD, omegaB: 1e-4 }).background;
  // In radiation domination c_s = c/sqrt(3) (1 - R/2) with R growing as a: the horizon is shorter by R/4.
  const R = baryonLoading(light) * 1e-6;
  const shorter = 1 - (soundHorizon(light, 1e6) * Math.sqrt(3)) / conformalTime(light, 1e6);
  expect(Math.abs(shorter / (R / 4) - 1)).toBeLessThan(0.01);
  // R0 = 3 rho_b/(4 rho_gamma) = 31500 omega_b (T/2.7 K)^-4, Eisenstein & Hu 1998, ApJ 496, 605, eq. 5: three digits.
  expect(Math.abs(baryonLoading(history.background) / (31500 * 0.02237 * (2.7255 / 2.7) ** -4) - 1)).toBeLessThan(
    0.003,
  );
});

test("k_D: the cumulated diffusion agrees with an adaptive integral up to z = 1e7", () => {
  const R0 = baryonLoading(history.background);
  const integrand = (s: number) => {
    const R = R0 * Math.exp(-s);
    const step = (LIGHT_SPEED.value / METRE_PER_MPC / history.background.hubble(Math.expm1(s))) * Math.exp(s);
    // c dz/H = step ds; a n_e sigma_T = (d tau/ds)/step.
    return ((R * R + (16 / 15) * (1 + R)) / (6 * (1 + R) ** 2)) * ((step * step) / sight.scattering(s));
  };
  const edges = [x(summary.zStar), 7.3, 8, 9, 11, x(1e7)];
  let sum = 0;
  for (let i = 1; i < edges.length; i++) sum += integrateAdaptive(integrand, edges[i - 1], edges[i], 1e-9).value;
  expect(Math.abs(summary.kD_invMpc * Math.sqrt(sum) - 1)).toBeLessThan(1e-7);
});

describe("visibility", () => {
  // Jones & Wyse 1985, A&A 149, 144: tau = 0.37 (z/1000)^14.25 has its peak at 1066.8 and FWHM 187.3 (independent
  // evaluation made for this project); ours is the same kind of curve.
  test("peak and half-maximum points are stationary and half", () => {
    const { visibility: v } = summary;
    const g = (z: number) => visibilityPerZ(sight, x(z));
    expect(g(v.zPeak)).toBeGreaterThan(g(v.zPeak + 0.1));
    expect(g(v.zPeak)).toBeGreaterThan(g(v.zPeak - 0.1));
    const eta = (z: number) => visibilityPerMpc(sight, x(z));
    expect(eta(v.zOfEtaPeak)).toBeGreaterThan(eta(v.zOfEtaPeak + 0.1));
    expect(eta(v.zOfEtaPeak)).toBeGreaterThan(eta(v.zOfEtaPeak - 0.1));
    expect(sight.conformalTime(x(v.zOfEtaPeak))).toBeCloseTo(v.etaPeak_Mpc, 6);
    // Brute force on a grid of 0.05 in z: the width is good to the spacing.
    let first = 0;
    let last = 0;
    const half = 0.5 * g(v.zPeak);
    for (let z = 700; z < 1500; z += 0.05)
      if (g(z) >= half) {
        if (first === 0) first = z;
        last = z;
      }
    expect(Math.abs(last - first - (v.fwhmZ as number))).toBeLessThan(0.11);
  });

  test("reionisation moves neither peak nor width", () => {
    const { visibility } = run({ tauReion: 0.08 }).summary;
    expect(visibility.zPeak).toBeCloseTo(summary.visibility.zPeak, 2);
    expect(visibility.fwhmEta_Mpc as number).toBeCloseTo(summary.visibility.fwhmEta_Mpc as number, 4);
  });
});

describe("table", () => {
  test.each([
    ["three-level", {}],
    ["saha", { model: "saha" as const }],
    ["with reionisation", { zReion: 9 }],
    ["without helium", { fHe: 0 }],
  ])("%s: a cubic spline in z through the rows reproduces every column within 1e-5", (_name, changes) => {
    const { sight: line } = run(changes);
    const rows = adaptiveTable(line).rows as readonly (readonly number[])[];
    const z = rows.map((row) => row[0]);
    const between = z.slice(1).flatMap((to, i) => [0.21, 0.5, 0.77].map((u) => z[i] + u * (to - z[i])));
    const exact = tableAt(line, between).rows as readonly (readonly number[])[];
    for (let c = 1; c < RECOMBINATION_COLUMNS.length; c++) {
      const values = rows.map((row) => row[c]);
      const spline = notAKnotSpline(z, values);
      const largest = Math.max(...values);
      const relativeToMaximum = RECOMBINATION_COLUMNS[c] === "visibility_per_z";
      exact.forEach((row, i) => {
        const unit = relativeToMaximum ? largest : Math.max(Math.abs(row[c]), 1e-12 * largest);
        const where = `${RECOMBINATION_COLUMNS[c]} at z = ${between[i]}`;
        expect(Math.abs(spline.value(between[i]) - row[c]) / unit, where).toBeLessThan(TABLE_ACCURACY);
      });
    }
    expect(z[0]).toBe(0);
    expect(z[z.length - 1]).toBe(1e4);
    expect(z.every((value, i) => i === 0 || value > z[i - 1])).toBe(true);
  });

  test("exact redshifts stand as asked, and one outside is refused", () => {
    expect(tableAt(sight, [1100, 1089.5]).rows.map((row) => row[0])).toEqual([1100, 1089.5]);
    expect(() => tableAt(sight, [-1])).toThrow("z = -1: the table covers 0 to 10000");
    expect(() => tableAt(sight, [10001])).toThrow("z = 10001: the table covers 0 to 10000");
  });
});

describe("reionisation", () => {
  test("half of hydrogen and of first helium at z_re, everything at z = 0, nothing above", () => {
    const f = 0.08;
    expect(reionisedElectrons(8, 8, f)).toBeCloseTo((1 + f) / 2, 6);
    expect(reionisedElectrons(0, 8, f)).toBeCloseTo(1 + 2 * f, 5);
    expect(reionisedElectrons(20, 8, f)).toBeLessThan(1e-9);
    expect(reionisedElectrons(3.5, 8, f)).toBeCloseTo(1 + 1.5 * f, 6);
  });

  test("the residual is taken up, so that x_e never exceeds the electrons there are", () => {
    for (const z of [0, 3, 6, 8, 12, 30]) expect(totalElectrons(2e-4, z, 8, 0.08)).toBeLessThanOrEqual(1 + 2 * 0.08);
    expect(totalElectrons(2e-4, 30, 8, 0.08)).toBeCloseTo(2e-4, 12);
  });

  // Planck 2018 VI, A&A 641, A6, Table 2: tau = 0.0544 +- 0.0073 with z_re = 7.67 +- 0.73 (from memory).
  test("tau = 0.0544 belongs to z_re near 7.7", () => {
    expect(Math.abs(run({ tauReion: 0.0544 }).summary.zReionisation! - 7.67)).toBeLessThan(0.1);
  });

  test("depth and redshift are inverse, and the depth agrees with an adaptive integral", () => {
    const z = run({ tauReion: 0.1 }).summary.zReionisation as number;
    expect(reionisationDepth(history, z)).toBeCloseTo(0.1, 9);
    const line = lineOfSight(history, z);
    const electron = (s: number) =>
      (line.scattering(s, false) / line.xe(s, false)) * reionisedElectrons(Math.expm1(s), z, STANDARD.fHe);
    expect(Math.abs(integrateAdaptive(electron, 0, x(40), 1e-10).value / 0.1 - 1)).toBeLessThan(1e-7);
  });

  test("total depth is that of recombination plus what reionisation adds", () => {
    const { sight: line } = run({ zReion: 8 });
    const added = line.opticalDepth(x(1000)) - line.opticalDepth(x(1000), false);
    expect(Math.abs(added / reionisationDepth(history, 8) - 1)).toBeLessThan(2e-3);
  });

  test("a depth that no redshift gives is refused; 0 is none", () => {
    expect(() => run({ tauReion: 1e-5 })).toThrow(/tauReion = 0.00001: reionisation at z = 0 to 100 has a depth of/);
    expect(run({ tauReion: 0 }).summary.opticalDepthReionisation).toBeUndefined();
  });
});
