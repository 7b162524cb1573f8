/** The library: selection, overlay, what is refused and what is suggested. */
import { describe, expect, test } from "vitest";
import { loadRates, readRateTexts } from "../../../src/node/load-rates.ts";
import { buildLibrary, overlay, selectNetwork } from "../../../src/nuclear/library.ts";
import { qValueMeV } from "../../../src/nuclear/reaction.ts";

const library = loadRates();
const texts = readRateTexts();

test.each([
  ["twelve", 12, 8],
  ["standard", 74, 17],
  ["extended", 111, 26],
  ["wide", 180, 44],
])("network %s has %i reactions among %i nuclides", (name, reactions, nuclides) => {
  const selected = selectNetwork(library, name);
  expect(selected.length).toBe(reactions);
  const ids = new Set(["n", "p", ...selected.flatMap(({ reaction }) => [...reaction.reactants, ...reaction.products])]);
  expect(ids.size).toBe(nuclides);
});

test("each network is part of the next larger one, with the same evaluations", () => {
  const lists = ["twelve", "standard", "extended", "wide"].map((name) =>
    library.network(name).map(({ reaction, evaluation }) => `${reaction} ${evaluation}`),
  );
  for (let k = 1; k < lists.length; k++) expect(lists[k]).toEqual(expect.arrayContaining(lists[k - 1]));
});

test("Q-values in all files agree with the mass table to the digits written", () => {
  for (const id of library.reactions)
    for (const name of library.evaluations(id)) {
      const { reaction, qValueKeV } = library.table(id, name);
      expect(Math.abs(qValueKeV - 1000 * qValueMeV(reaction, library.nuclides)), `${id} ${name}`).toBeLessThan(6e-4);
    }
});

test("assumed uncertainties are marked in the file, in the field and in the note", () => {
  let assumed = 0;
  for (const id of library.reactions)
    for (const name of library.evaluations(id)) {
      const { uncertaintyBasis, note } = library.table(id, name);
      expect(uncertaintyBasis === "assumed", `${id} ${name}`).toBe(/ASSUMED/.test(note ?? ""));
      if (uncertaintyBasis === "assumed") assumed++;
    }
  expect(assumed).toBeGreaterThan(100);
});

test("evaluations asked for replace the network's, in any notation", () => {
  const chosen = (evaluations: Record<string, string>) =>
    selectNetwork(library, "twelve", evaluations).find(({ reaction }) => reaction.id === "d-p_gamma-he3")!;
  expect(chosen({}).evaluationName).toBe("iliadis2016");
  expect(chosen({ "d-p_gamma-he3": "mossa2020" }).rateTable.citation).toContain("Mossa");
  expect(chosen({ "d(p,g)he3": "marcucci2016" }).evaluationName).toBe("marcucci2016");
});

test("all alternatives are there", () => {
  const has = (id: string) => library.evaluations(id);
  expect(has("d-p_gamma-he3")).toEqual([
    "descouvemont2004",
    "iliadis2016",
    "marcucci2016",
    "mossa2020",
    "mossa2020-moscoso2021",
    "reaclib",
  ]);
  expect(has("be7-n_p-li7")).toEqual(["damone2018", "descouvemont2004", "desouza2020", "reaclib"]);
  expect(has("he3-d_p-he4")).toEqual(["descouvemont2004", "desouza2019", "desouza2019-case2", "reaclib"]);
  expect(has("t-d_n-he4")).toEqual(["descouvemont2004", "desouza2019", "reaclib"]);
});

test.each([
  ["t-he4_gamma-li7", "descouvemont2004-s0", "descouvemont2004"],
  ["li7-p_he4-he4", "descouvemont2004-s0", "descouvemont2004"],
  ["li6-p_he3-he4", "pizzone2005-s0", "pizzone2005"],
  ["be7-p_gamma-b8", "angulo1999-s0", "angulo1999"],
])("%s: %s is %s with another uncertainty, from memory and in no network", (id, name, original) => {
  const [further, standing] = [library.table(id, name), library.table(id, original)];
  expect(further.uncertaintyBasis).toBe("from memory");
  expect(further.note).toMatch(/from memory/);
  expect([...further.rate]).toEqual([...standing.rate]);
  expect([...further.factorUncertainty]).not.toEqual([...standing.factorUncertainty]);
  for (const network of library.networkNames)
    expect(library.network(network).find(({ reaction }) => reaction === id)?.evaluation ?? original).toBe(original);
});

describe("refused", () => {
  test.each<[string, () => unknown, RegExp]>([
    [
      "an unknown network",
      () => selectNetwork(library, "standrad"),
      /^network = standrad: unknown; accepted are extended, standard, twelve, wide; did you mean standard\?$/,
    ],
    [
      "a path as a network",
      () => selectNetwork(library, "../networks/twelve"),
      /^network = \.\.\/networks\/twelve: unknown/,
    ],
    [
      "an unknown evaluation",
      () => selectNetwork(library, "twelve", { "d-d_p-t": "gomezinesta2018" }),
      /^evaluation of d-d_p-t = gomezinesta2018: unknown; accepted are gomezinesta2017, reaclib; did you mean gomezinesta2017\?$/,
    ],
    [
      "an evaluation of another reaction",
      () => selectNetwork(library, "twelve", { "d-d_p-t": "desouza2019" }),
      /evaluation of d-d_p-t = desouza2019: unknown/,
    ],
    [
      "a reaction outside the network",
      () => selectNetwork(library, "twelve", { "li6-n_t-he4": "reaclib" }),
      /^network twelve, evaluation of li6-n_t-he4: no such reaction there/,
    ],
    [
      "a mistyped reaction",
      () => selectNetwork(library, "twelve", { "d-d_p-tt": "reaclib" }),
      /did you mean d-d_p-t\?/,
    ],
    ["the computed weak rates", () => selectNetwork(library, "twelve", { n_p: "reaclib" }), /n <-> p are computed/],
    [
      "one reaction named twice",
      () => selectNetwork(library, "twelve", { "d-d_p-t": "reaclib", "d(d,p)t": "reaclib" }),
      /given twice/,
    ],
    ["an unknown nuclide", () => library.nuclide("xx"), /nuclide xx: not in nuclides\.csv/],
    ["an unknown reaction", () => library.evaluations("d-p_gama-he3"), /did you mean d-p_gamma-he3\?/],
  ])("%s", (_, act, message) => {
    expect(act).toThrow(message);
  });

  const broken = (path: string, text: string | undefined) => {
    const copy = new Map(texts);
    if (text === undefined) copy.delete(path);
    else copy.set(path, text);
    return buildLibrary(copy);
  };
  test.each<[string, string, string | undefined, RegExp]>([
    [
      "a network that lists a file which is not there",
      "d-d_p-t/gomezinesta2017.ecsv",
      undefined,
      /^rates\/networks\/twelve\.csv:\d+: no file d-d_p-t\/gomezinesta2017\.ecsv in the library$/,
    ],
    [
      "a network with a mistyped reaction",
      "networks/twelve.csv",
      "reaction,evaluation\nd-d_p-q,x\n",
      /^rates\/networks\/twelve\.csv:2: .*unknown nuclide q/,
    ],
    [
      "a network with nuclides in another order",
      "networks/twelve.csv",
      "reaction,evaluation\nn-p_gamma-d,ando2006\n",
      /:2: reaction n-p_gamma-d: write p-n_gamma-d/,
    ],
    [
      "a reaction listed twice",
      "networks/twelve.csv",
      "reaction,evaluation\nd-d_p-t,reaclib\nd-d_p-t,reaclib\n",
      /:3: reaction d-d_p-t is listed twice/,
    ],
    ["an empty network", "networks/twelve.csv", "", /networks\/twelve\.csv:1: no rows/],
    ["a library without masses", "nuclides.csv", undefined, /nuclides\.csv is missing/],
    [
      "a damaged rate file",
      "d-d_p-t/gomezinesta2017.ecsv",
      "junk\n",
      /^rates\/d-d_p-t\/gomezinesta2017\.ecsv:1: line 1 must read/,
    ],
  ])("%s", (_, path, text, message) => {
    expect(() => selectNetwork(broken(path, text), "twelve")).toThrow(message);
  });
});

test("a damaged file that is not used does no harm", () => {
  const copy = new Map(texts).set("d-d_p-t/reaclib.ecsv", "junk\n");
  expect(selectNetwork(buildLibrary(copy), "twelve").length).toBe(12);
  expect(() => selectNetwork(buildLibrary(copy), "twelve", { "d-d_p-t": "reaclib" })).toThrow(/reaclib\.ecsv:1/);
});

describe("overlay", () => {
  const path = "t-d_n-he4/desouza2019.ecsv";
  const doubled = texts.get(path)!.replaceAll(/^([\d.]+) ([\d.e+-]+) /gm, (_, T9, rate) => `${T9} ${2 * rate} `);
  const over = (files: [string, string][]) => overlay(library, buildLibrary(new Map(files)));
  test("a file of the same path replaces ours, all else stays", () => {
    const joined = over([[path, doubled]]);
    expect(joined.table("t-d_n-he4", "desouza2019").rate[0]).toBe(2 * 1.99783e-7);
    expect(library.table("t-d_n-he4", "desouza2019").rate[0]).toBe(1.99783e-7);
    expect(selectNetwork(joined, "wide").length).toBe(180);
  });
  test("a new evaluation can be selected, and is not until it is", () => {
    const joined = over([["t-d_n-he4/mine2026.ecsv", doubled]]);
    expect(joined.evaluations("t-d_n-he4")).toContain("mine2026");
    const rate = (evaluations: Record<string, string>) =>
      selectNetwork(joined, "twelve", evaluations).find((each) => each.reaction.id === "t-d_n-he4")!.rateTable.rate[0];
    expect(rate({})).toBe(1.99783e-7);
    expect(rate({ "t-d_n-he4": "mine2026" })).toBe(2 * 1.99783e-7);
  });
  test("a network of one's own stands beside ours", () => {
    const joined = over([["networks/mine.csv", "reaction,evaluation\nd-p_gamma-he3,mossa2020\n"]]);
    expect(joined.networkNames).toEqual(["extended", "mine", "standard", "twelve", "wide"]);
    expect(selectNetwork(joined, "mine")[0].evaluationName).toBe("mossa2020");
  });
  test("a file whose reaction is not that of its folder is refused", () => {
    const other = doubled.replace("t + d -> he4 + n", "d + d -> t + p").replace("17589.300", "4032.664");
    expect(() => selectNetwork(over([[path, other]]), "twelve")).toThrow(
      /is d-d_p-t, but the file lies in folder t-d_n-he4/,
    );
  });
});
