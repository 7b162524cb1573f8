/** What the larger networks change, and that their heavy abundances are orders of magnitude only. */
import { describe, expect, test } from "vitest";
import { computeErrorBudget } from "../../src/model/error-budget.ts";
import { prepareModel } from "../../src/model/prepare.ts";
import { loadRates } from "../../src/node/load-rates.ts";
import { type AbundanceName, HEAVY_ABUNDANCE_NAMES, ORDER_OF_MAGNITUDE } from "../../src/nucleosynthesis/abundances.ts";
import { computeTimeline } from "../../src/nucleosynthesis/timeline.ts";

const library = loadRates();
const LIGHT: readonly AbundanceName[] = ["Yp", "dToH", "tToH", "he3ToH", "li6ToH", "li7ToH"];
const run = (network: string, omegaB: number) =>
  prepareModel(library, { network, omegaB, errors: "none", tolerance: 1e-7 }).abundances();
const values = (network: string, omegaB = 0.02237) => {
  const { abundances } = run(network, omegaB);
  return (name: AbundanceName) => abundances[name]!.value;
};

describe("wide against extended: 18 nuclides and 69 reactions more", () => {
  const nuclides = (network: string) =>
    new Set(library.network(network).flatMap(({ reaction }) => reaction.split(/[_-]/).filter((id) => id !== "gamma")));
  test("the additional nuclides", () => {
    const [extended, wide] = [nuclides("extended"), nuclides("wide")];
    const added = [...wide].filter((id) => !extended.has(id));
    expect(added).toHaveLength(18);
    expect([...extended].filter((id) => !wide.has(id))).toEqual([]);
    expect(library.network("wide").length - library.network("extended").length).toBe(69);
    // Of all baryons they never hold more than those that pass through mass 6 and above: 1e-9, mostly as 7Li and 7Be.
    const model = prepareModel(library, { network: "wide", errors: "none" });
    const context = model.context(model.parameters());
    const { eta10, tauN } = model.parameters();
    const { Y } = computeTimeline(context, { eta10, tauN, tolerance: 1e-5 });
    const most = Math.max(
      ...Y.map((row) =>
        context.data.nuclides.reduce((sum, { id, A }, i) => sum + (added.includes(id) && A > 6 ? A * row[i] : 0), 0),
      ),
    );
    expect(most).toBeGreaterThan(0);
    expect(most).toBeLessThan(1e-12);
  });
  test.each([0.005, 0.02237, 0.06])(
    "omega_b = %d: light elements stay, heavy ones move by less than 1e-4",
    (omegaB) => {
      const [extended, wide] = [values("extended", omegaB), values("wide", omegaB)];
      // Light elements: only what passes through the added nuclides could move them, 1e-9 of the baryons, and the integration.
      for (const name of LIGHT) expect(Math.abs(wide(name) / extended(name) - 1), name).toBeLessThan(1e-8);
      // Heavy ones: far below what their rates leave open (30 per cent and more), so extended is complete for them.
      for (const name of HEAVY_ABUNDANCE_NAMES) {
        const change = Math.abs(wide(name) / extended(name) - 1);
        expect(change, name).toBeLessThan(1e-4);
        if (name === "cnoToH") expect(change, "the added nuclides make some CNO").toBeGreaterThan(1e-8);
      }
    },
  );
});

test("extended against standard: what flows on beyond mass 12 is taken from no light element", () => {
  const [standard, extended] = [values("standard"), values("extended")];
  for (const name of LIGHT) expect(Math.abs(extended(name) / standard(name) - 1), name).toBeLessThan(1e-8);
});

describe("9Be, 10B, 11B and CNO are orders of magnitude", () => {
  // Coc, Uzan & Vangioni 2014, JCAP 10, 050, abstract (from memory): CNO/H = (5-30)e-16.
  test("CNO/H lies in the published range", () => {
    const cno = values("extended")("cnoToH");
    expect(cno).toBeGreaterThan(5e-16);
    expect(cno).toBeLessThan(30e-16);
  });
  // Coc, Goriely, Xu, Saimpert & Vangioni 2012, ApJ 744, 158 (from memory): 9Be/H = 9.6e-19, 11B/H = 3.05e-16.
  test.each<[AbundanceName, number]>([
    ["be9ToH", 9.6e-19],
    ["b11ToH", 3.05e-16],
  ])("%s agrees with a published calculation within a factor of 10", (name, published) => {
    expect(Math.abs(Math.log10(values("extended")(name) / published))).toBeLessThan(1);
  });
  test("because nine tenths of their variance come from assumed uncertainties; the others are marked by their share", () => {
    const model = prepareModel(library, { network: "extended" });
    const { variance, sources } = computeErrorBudget(model, model.parameters());
    const assumed = new Set(sources.filter(({ basis }) => basis === "assumed").map(({ name }) => name));
    const share = (abundance: string) =>
      Object.entries(variance[abundance]).reduce((sum, [name, each]) => sum + (assumed.has(name) ? each : 0), 0);
    for (const name of ORDER_OF_MAGNITUDE) expect(share(name), name).toBeGreaterThan(0.9);
    const stated = model.abundances().assumedVarianceShare!;
    for (const name of [...LIGHT, ...HEAVY_ABUNDANCE_NAMES]) expect(stated[name], name).toBeCloseTo(share(name), 6);
    expect(share("dToH")).toBeLessThan(0.05);
  });
  test.each(["extended", "wide"])("network %s says so in its warnings; smaller ones do not", (network) => {
    expect(run(network, 0.02237).warnings.join()).toMatch(/9Be, 10B, 11B and CNO are orders of magnitude only/);
    expect(run("standard", 0.02237).warnings).toEqual([]);
  });
});
