/** The published fits as formulas, and how far they are from the calculation. */
import { describe, expect, test } from "vitest";
import {
  aubourg2015DragHorizon,
  desi2025DragHorizon,
  eisensteinHu1998Approximation,
  eisensteinHu1998DragRedshift,
  eisensteinHu1998SoundHorizon,
  huSugiyama1996,
} from "../../../src/lineofsight/published-fits.ts";
import { computeLineOfSight } from "../../../src/lineofsight/summary.ts";
import { computeIonisationHistory } from "../../../src/recombination/history.ts";
import { STANDARD } from "../recombination/cosmologies.ts";

// omega_b = 0.02237, omega_m = 0.1430: each formula evaluated independently for this project.
describe("formulas", () => {
  test.each([
    ["fit-hs96: Hu & Sugiyama 1996, ApJ 471, 542, eq. E1", huSugiyama1996(0.02237, 0.143), 1091.90689, 1e-6],
    [
      "fit-eh98-zd: Eisenstein & Hu 1998, ApJ 496, 605, eq. 4",
      eisensteinHu1998DragRedshift(0.02237, 0.143),
      1020.71582,
      1e-6,
    ],
    [
      "fit-eh98-s: the same, eqs. 2-6, T0 = 2.7255 K",
      eisensteinHu1998SoundHorizon(0.02237, 0.143, 2.7255),
      150.914173,
      1e-5,
    ],
    ["fit-eh98-s: the same, eq. 26", eisensteinHu1998Approximation(0.02237, 0.143), 149.838649, 1e-5],
    [
      "fit-aubourg: Aubourg et al. 2015, PRD 92, 123516, eq. 16",
      aubourg2015DragHorizon(0.02237, 0.142356, 0.000644),
      147.0667,
      1e-6,
    ],
    // The row gives omega_m = 0.1430 as omega_cb + omega_nu = 0.142356 + 0.000644, and N_eff = 3.046.
    ["fit-desi: DESI 2025, JCAP 02, 021, eq. 2.5", desi2025DragHorizon(0.02237, 0.143, 3.046), 147.059728, 1e-6],
  ])("%s", (_name, value, published, relative) => {
    expect(Math.abs(value / published - 1)).toBeLessThan(relative);
  });
});

describe("beside the calculation", () => {
  const inputs = { ...STANDARD, nEff: 3.046 };
  const { summary, sight } = computeLineOfSight(inputs, computeIonisationHistory(inputs));
  const { omegaM, omegaNuMassive } = sight.history.background;

  // Physics tolerances of these fits: 3 in z_star; 5e-4 and 1e-3 of r_drag.
  test("z_star of 1996 is within 3, above", () => {
    expect(Math.abs(huSugiyama1996(0.02237, omegaM) - summary.zStar)).toBeLessThan(3);
  });
  test("r_drag of 2015 within 5e-4, of 2025 within 1e-3", () => {
    expect(Math.abs(aubourg2015DragHorizon(0.02237, 0.14237, omegaNuMassive) / summary.rDrag_Mpc - 1)).toBeLessThan(
      5e-4,
    );
    expect(Math.abs(desi2025DragHorizon(0.02237, omegaM, 3.046) / summary.rDrag_Mpc - 1)).toBeLessThan(1e-3);
  });
});
