/** Recombination of a prepared model: helium, switches of both calculations, overrides, the table on demand. */
import { describe, expect, test } from "vitest";
import { prepareModel } from "../../../src/model/prepare.ts";
import { recombinationSensitivities } from "../../../src/model/recombination-budget.ts";
import { loadRates } from "../../../src/node/load-rates.ts";
import { heliumToHydrogen } from "../../../src/parameters/helium.ts";
import { computeRecombination, parseRedshifts } from "../../../src/requests/recombination.ts";
import { STANDARD } from "../recombination/cosmologies.ts";

const library = loadRates();

describe("helium", () => {
  const model = prepareModel(library, { network: "twelve", errors: "none" });

  test("is that of the model's own nucleosynthesis run, by number, and follows omega_b and N_eff", () => {
    const { abundances } = model.abundances({ omegaB: 0.02, nEff: 3.5 });
    const { fHe, ypMass } = model.recombination({ omegaB: 0.02, nEff: 3.5 });
    expect(ypMass).toBe(abundances.YpMass?.value);
    expect(fHe).toBe(heliumToHydrogen(ypMass));
    // Never the nucleon fraction 4 n_He/n_b, which is 0.0013 larger.
    expect((abundances.Yp?.value as number) - ypMass).toBeGreaterThan(0.001);
  });

  test("follows the neutron mean life and rates of the model", () => {
    expect(model.recombination({ tauN: 890 }).ypMass).toBeGreaterThan(model.recombination().ypMass);
    expect(model.recombination({ scales: { "p-n_gamma-d": 1.5 } }).ypMass).not.toBe(model.recombination().ypMass);
  });

  test("given as mass fraction it needs no nucleosynthesis run", () => {
    const { ypMass, fHe } = model.recombination({ ypMass: 0.3 });
    expect(ypMass).toBe(0.3);
    expect(fHe).toBeCloseTo(0.3 / (3.971525936 * 0.7), 9);
  });
});

describe("switches", () => {
  test("those of nucleosynthesis act on helium, those of recombination on the history", () => {
    const model = prepareModel(library, { network: "twelve", errors: "none", without: ["coulomb"] });
    const plain = prepareModel(library, { network: "twelve", errors: "none" });
    expect(model.recombination().ypMass).toBe(model.abundances().abundances.YpMass?.value);
    expect(model.recombination().ypMass).not.toBe(plain.recombination().ypMass);
    const other = plain.recombination({ without: ["two-photon"] });
    expect(other.ypMass).toBe(plain.recombination().ypMass);
    expect(other.zStar).toBeLessThan(plain.recombination().zStar - 50);
  });

  test("an unknown name and an expansion factor are refused", () => {
    const model = prepareModel(library, { network: "twelve" });
    expect(() => model.recombination({ without: ["coulomb"] })).toThrow("without = coulomb: accepted are");
    expect(() => model.recombination({ expansion: "1.1" })).toThrow("refused by recombination");
    expect(() => model.recombination({ expansion: " 1 " })).not.toThrow();
  });
});

test("the table is there when read, and part of the JSON", () => {
  const results = prepareModel(library).recombination({ ypMass: 0.2454 });
  expect(results.table.rows.length).toBeGreaterThan(200);
  expect(results.table).toBe(results.table);
  expect(JSON.parse(JSON.stringify(results)).table.columns[0]).toBe("z");
});

test("the same keys give the same numbers, whatever was asked before", () => {
  const model = prepareModel(library, { ypMass: 0.2454 });
  const first = model.recombination({ omegaB: 0.021 });
  model.recombination({ omegaB: 0.03, without: ["helium-triplet"], zReion: 8 });
  expect(JSON.stringify(model.recombination({ omegaB: 0.021 }))).toBe(JSON.stringify(first));
});

describe("sensitivities", () => {
  const s = recombinationSensitivities(STANDARD);

  test("with all densities as T0^3 the Universe is the same at every temperature: 1 + z and comoving lengths go as 1/T0", () => {
    const along = (of: Readonly<Record<"tCmb" | "omegaB" | "omegaC", number>>) => of.tCmb + 3 * (of.omegaB + of.omegaC);
    // d ln z = (1 + z)/z d ln(1 + z); the depth below z = 10, where Lambda acts, is 2e-5.
    expect(Math.abs(along(s.zStar) + 1 + 1 / 1089.5)).toBeLessThan(5e-5);
    expect(Math.abs(along(s.zDrag) + 1 + 1 / 1059.7)).toBeLessThan(5e-5);
    expect(Math.abs(along(s.rDrag) + 1)).toBeLessThan(1e-4);
  });

  test("Lambda and H0 do not matter at last scattering", () => {
    expect(Math.abs(s.zStar.h0)).toBeLessThan(1e-5);
    expect(Math.abs(s.rDrag.h0)).toBeLessThan(1e-5);
  });

  test("z_star of the two-photon rate and of the alpha-factor agree with finite changes", () => {
    // 8.2206 instead of 8.2245809 /s (Labzowsky et al. 2005): -0.0229 in z_star, and the factor 1.14: +0.84.
    expect(Math.abs(s.zStar.lambda2s * 1089.5 * Math.log(8.2206 / 8.2245809) + 0.0229)).toBeLessThan(5e-4);
    expect(Math.abs(s.zStar.alphaFactor * 1089.5 * Math.log(1.14) - 0.84)).toBeLessThan(0.08);
  });

  test("a parameter that is zero, or has no part in the model, has sensitivity 0", () => {
    const without = recombinationSensitivities({ ...STANDARD, fHe: 0, omegaC: 0, nEff: 0, model: "saha" });
    for (const name of ["ypMass", "omegaC", "nEff", "alphaFactor", "lambda2s"] as const)
      expect(without.zStar[name], name).toBe(0);
    expect(without.zStar.tCmb).toBeLessThan(-0.5);
  });
});

describe("request", () => {
  test("redshifts as numbers or text; anything else is refused", () => {
    expect(parseRedshifts("1100, 1089.5")).toEqual([1100, 1089.5]);
    expect(parseRedshifts([0, 3])).toEqual([0, 3]);
    for (const bad of ["", "1,,2", "x", "-1", "1e999"])
      expect(() => parseRedshifts(bad), bad).toThrow("give redshifts of 0 or more");
  });

  test("input is refused before anything is computed", async () => {
    await expect(computeRecombination({ z: "x" }, library)).rejects.toThrow("z = x");
    await expect(computeRecombination({ tauReion: 0.05, zReion: 8 }, library)).rejects.toThrow("give one of them");
    await expect(computeRecombination({ model: "nosuch" }, library)).rejects.toThrow("accepted are three-level, saha");
  });

  test("warnings name what is not modelled", async () => {
    const { warnings } = await computeRecombination(
      { ypMass: 0.24, zReion: 8, xiE: 0.1, nEff: 0, tolerance: 1e-3, z: [0] },
      library,
    );
    expect(warnings.join("\n")).toMatch(/degeneracy.*\n.*reionisation\n.*no neutrinos.*\n.*tolerance/s);
  });
});
