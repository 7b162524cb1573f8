// The command recombination: its answers in every format, helium by default and given, and every refusal.
import { mkdtempSync, readFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { describe, expect, test } from "vitest";
import { runMain } from "./run-main.ts";

async function answer(...args: string[]) {
  const { status, out, err } = await runMain("recombination", ...args, "--format", "json", "--quiet");
  expect(status, err).toBe(0);
  return JSON.parse(out);
}

async function refused(...args: string[]): Promise<string> {
  const { status, out, err } = await runMain("recombination", ...args);
  expect(out).toBe("");
  expect(err).toMatch(/^emberline: .+\n$/);
  expect(status, err).toBe(2);
  return err.trim();
}

test("JSON holds every key, its table, and the source of every constant", async () => {
  const { results, provenance, cosmology, solver } = await answer("--yp", "0.2454");
  for (const key of ["zStar", "zDrag", "rStar_Mpc", "rDrag_Mpc", "theta100Star", "kD_invMpc", "zEq", "ageToday_Gyr"])
    expect(results[key], key).toBeGreaterThan(0);
  expect(Object.keys(results.xeAtZ)).toEqual(["20", "200"]);
  expect(results.table.columns).toEqual([
    ...["z", "xe", "Tm_K", "Tr_K", "opticalDepth", "visibility_per_z", "conformalTime_Mpc"],
  ]);
  expect(results.table.rows[0][0]).toBe(0);
  expect(results.table.rows.at(-1)[0]).toBe(10000);
  expect(cosmology).toMatchObject({ ypMass: 0.2454, tolerance: 1e-7, model: "three-level" });
  expect(provenance.rates).toEqual([]);
  for (const constant of provenance.recombination) expect(constant.source.length, constant.name).toBeGreaterThan(10);
  expect(solver.steps).toBeGreaterThan(100);
});

test("the help and the answer say the same of every ingredient", async () => {
  const help = (await runMain("help", "recombination")).out.replace(/\s+/g, " ");
  const text = (await runMain("recombination", "--yp", "0.2454")).out;
  const row = /hydrogen-bottleneck +in +(\S+)/.exec(text);
  expect(row?.[1]).toMatch(/^\+\d+$/);
  expect(help).toMatch(new RegExp(`hydrogen-bottleneck \\([^;]*: z_star \\${row?.[1]}\\)`));
});

test("without neutrinos the line of z_eq says so", async () => {
  const text = (await runMain("recombination", "--yp", "0.2454", "--n-eff", "0")).out.replace(/\s+/g, " ");
  expect(text).toContain("omega_b + omega_c against photons, as there are no neutrinos");
  expect(text).not.toContain("three massless");
});

test("helium is that of the nucleosynthesis run of the same cosmology", async () => {
  const network = ["--network", "twelve"];
  const { results, provenance } = await answer(...network, "--omega-b", "0.02", "--n-eff", "4", "--z", "1000");
  const early = await runMain(
    "abundances",
    ...network,
    "--omega-b",
    "0.02",
    "--n-eff",
    "4",
    "--errors",
    "none",
    "--format",
    "json",
  );
  const { YpMass } = JSON.parse(early.out).results.abundances;
  expect(results.ypMass).toBe(YpMass.value);
  // By number: the mass fraction Y is f m_He/(m_H + f m_He), m_He/m_H = 3.971526.
  expect(results.fHe * 3.971525936).toBeCloseTo(YpMass.value / (1 - YpMass.value), 8);
  expect(provenance.network).toBe("twelve");
  expect(provenance.rates.length).toBeGreaterThan(10);
});

test("--z gives exactly the redshifts asked for, in their order", async () => {
  const { results } = await answer("--yp", "0.24", "--z", "1100,1089.5,0,10000");
  expect(results.table.rows.map((row: number[]) => row[0])).toEqual([1100, 1089.5, 0, 10000]);
});

test("--budget adds the sensitivities, with the published exponents of r_drag", async () => {
  const { results } = await answer("--yp", "0.2454", "--budget", "--z", "0");
  const { zStar, zDrag, rDrag } = results.sensitivities;
  for (const s of [zStar, zDrag, rDrag])
    expect(Object.keys(s)).toEqual([
      ...["omegaB", "omegaC", "h0", "tCmb", "ypMass", "nEff", "alphaFactor", "lambda2s"],
    ]);
  // DESI Collaboration 2025, JCAP 02, 021, eq. 2.5: r_d ~ omega_b^-0.13 omega_m^-0.23 N_eff^-0.1, two digits; omega_m
  // includes omega_b, so d/d ln omega_b at fixed omega_c is -0.13 - 0.23 x 0.157 = -0.166 and d/d ln omega_c -0.193.
  expect(Math.abs(rDrag.omegaB + 0.166)).toBeLessThan(0.01);
  expect(Math.abs(rDrag.omegaC + 0.193)).toBeLessThan(0.03);
  expect(Math.abs(rDrag.nEff + 0.1)).toBeLessThan(0.01);
  expect(Math.abs(rDrag.h0)).toBeLessThan(1e-5);
});

test("reionisation by its optical depth", async () => {
  const { results, warnings } = await answer("--yp", "0.2454", "--tau-reion", "0.054", "--z", "0");
  expect(results.opticalDepthReionisation).toBeCloseTo(0.054, 9);
  expect(results.zReionisation).toBeGreaterThan(7);
  expect(results.zReionisation).toBeLessThan(8.5);
  expect(warnings.join()).toContain("T_m does not include");
});

test("every chart in one figure, and one by its name", async () => {
  const folder = mkdtempSync(join(tmpdir(), "emberline-"));
  const sheet = join(folder, "sheet.svg");
  const one = join(folder, "one.png");
  const { status, err } = await runMain("recombination", "--yp", "0.2454", "--chart", sheet, "--chart", `depth=${one}`);
  expect(status, err).toBe(0);
  expect(readFileSync(sheet, "utf8")).toContain("</svg>");
  expect(readFileSync(one).subarray(1, 4).toString()).toBe("PNG");
});

test("text names the definitions, within 80 columns", async () => {
  const { out, status } = await runMain(
    "recombination",
    "--yp",
    "0.2454",
    "--tau-reion",
    "0.06",
    "--budget",
    "--quiet",
  );
  expect(status).toBe(0);
  for (const line of out.split("\n")) expect([...line].length, line).toBeLessThanOrEqual(80);
  expect(out).toContain("optical depth 1, recombination alone");
  expect(out).toContain("Peq");
});

describe("bad input", () => {
  test.each([
    [["--yp", "1.5"], "--yp 1.5: out of range; accepted are 0 to 0.99"],
    [["--yp", "-0.1"], "0 to 0.99"],
    [["--h0", "0"], "20 to 150"],
    [["--alpha-factor", "5"], "0.5 to 2"],
    [["--tau-reion", "0.05", "--z-reion", "8"], "give one of them"],
    [["--expansion", "2"], "--expansion 2: refused by recombination"],
    [["--model", "nosuch"], "--model nosuch: unknown; accepted are three-level, saha"],
    [["--z", "abc"], "--z abc: not a finite number"],
    [["--z", "1,,2"], "redshifts from 0 to 10000"],
    [["--z", "20000"], "--z 20000: outside the table"],
    [["--without", "nosuch"], "--without nosuch: unknown; accepted are hydrogen-bottleneck"],
    [["--without", "coulomb"], "--without coulomb: unknown"],
    [["--model", "saha", "--without", "two-photon"], "--without two-photon: has no part in model saha"],
    [["--omega-c", "0.6", "--yp", "0.2"], "--h0 67.36 km/s/Mpc: matter and radiation"],
    [["--tau-reion", "0.0001", "--yp", "0.2"], "--tau-reion 0.0001: reionisation at z = 0 to 100"],
    [["--z", "100", "--chart", "x.svg"], "a chart needs all redshifts"],
  ])("%j", async (args, expected) => {
    expect(await refused(...args)).toContain(expected);
  });
});
