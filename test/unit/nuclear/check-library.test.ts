/** Checks of a library: ours passes, and each kind of damage is found at its line. */
import { describe, expect, test } from "vitest";
import { loadRates, readRateTexts } from "../../../src/node/load-rates.ts";
import { checkLibrary, formatFinding } from "../../../src/nuclear/check-library.ts";
import { checkTable, JUMP } from "../../../src/nuclear/check-table.ts";
import { buildLibrary } from "../../../src/nuclear/library.ts";
import { seededUniform } from "../../../src/numerics/random.ts";

const texts = readRateTexts();
const tdn = "t-d_n-he4/desouza2019.ecsv";
const findings = (changes: Record<string, string>) =>
  checkLibrary(buildLibrary(new Map([...texts, ...Object.entries(changes)]))).findings.map(formatFinding);
const ours = findings({});

test("our own library has no errors; its known weak spots are named, and nothing else", () => {
  const { findings: found, files, networks } = checkLibrary(loadRates());
  expect({ files, networks }).toEqual({ files: 219, networks: 4 });
  expect(found.filter((each) => each.severity === "error")).toEqual([]);
  expect(found.map((each) => each.file.split("/")[1]).sort()).toEqual([
    "d-p_gamma-he3", // marcucci2016: theory to 2 MeV, T9 = 4
    "d-p_gamma-he3", // mossa2020: polynomial to 2 MeV, T9 = 4
    "d-p_gamma-he3", // mossa2020-moscoso2021: the same
    "he3-d_p-he4", // desouza2019: the authors claim T9 <= 1
    "he3-d_p-he4", // desouza2019-case2: the same
    "li7-n_gamma-li8", // kadonis2009: the fit fails at T9 = 0.001
    "li8-he4_n-b11", // lacognata2011: starts at T9 = 0.014
    "t-d_n-he4", // desouza2019: the authors claim T9 <= 1
  ]);
});

describe("found at its place:", () => {
  const text = texts.get(tdn)!;
  test.each<[string, Record<string, string>, RegExp]>([
    [
      "two digits swapped",
      { [tdn]: text.replace("4.53649e+07", "5.43649e+07") },
      /^rates\/t-d_n-he4\/desouza2019\.ecsv:47: rate jumps \+19\.8 per cent off the curve of its neighbours at T9 = 0\.1; check the digits$/,
    ],
    [
      "an exponent lost",
      { [tdn]: text.replace("4.53649e+07", "4.53649e+06") },
      /desouza2019\.ecsv:47: rate jumps a factor 0\.10 off/,
    ],
    [
      "a small slip",
      { [tdn]: text.replace("4.53649e+07", "4.33649e+07") },
      /desouza2019\.ecsv:47: warning: rate has a kink, -4\.4 per cent/,
    ],
    [
      "a percentage as factor",
      { [tdn]: text.replace("4.53649e+07 1.0035", "4.53649e+07 35") },
      /desouza2019\.ecsv:47: warning: f_u = 35 is very large/,
    ],
    [
      "a refusal of the loader",
      { [tdn]: text.replace("4.53649e+07", "-1") },
      /desouza2019\.ecsv:47: rate = -1: must be positive/,
    ],
    [
      "a copy under another name",
      { "t-d_n-he4/smith2027.ecsv": text },
      /smith2027\.ecsv: warning: same numbers as evaluation desouza2019/,
    ],
    ["a stray file", { "t-d_n-he4/notes.txt": "x" }, /t-d_n-he4\/notes\.txt: not a rate file/],
    ["an empty folder", { "t-p_n-he3/readme.md": "x" }, /folder t-p_n-he3: no rate file/],
    ["both directions", { "t-p_n-he3/x.ecsv": "x" }, /folder t-p_n-he3: he3-n_p-t is filed too/],
    ["a reaction without effect", { "t-p_p-t/x.ecsv": "x" }, /folder t-p_p-t: this reaction changes nothing/],
    ["a folder in another order", { "d-t_n-he4/x.ecsv": "x" }, /folder d-t_n-he4: name it t-d_n-he4/],
    ["a folder that is no reaction", { "a_b/x.ecsv": "x" }, /unknown nuclide a/],
    [
      "a citation without year",
      { [tdn]: text.replace("Iliadis 2019, Phys. Rev. C 99, 014619", "Iliadis") },
      /desouza2019\.ecsv:10: warning: the citation names no year/,
    ],
    [
      "an assumed uncertainty that is not marked",
      { [tdn]: text.replace("uncertainty_basis: published", "uncertainty_basis: assumed") },
      /desouza2019\.ecsv:14: warning: assumed, but the note does not say ASSUMED/,
    ],
    [
      "a missing evaluation",
      { "networks/mine.csv": "reaction,evaluation\nt-d_n-he4,nobody1999\n" },
      /^rates\/networks\/mine\.csv:2: no file t-d_n-he4\/nobody1999\.ecsv/,
    ],
    [
      "a damaged list",
      { "networks/mine.csv": "reaction,evaluation\nt-d_n-he5,x\n" },
      /^rates\/networks\/mine\.csv:2: t \+ d -> n \+ he5: A is not conserved/,
    ],
    [
      "a dead end",
      { "networks/mine.csv": "reaction,evaluation\nli7-t_n-n-he4-he4,reaclib\n" },
      /networks\/mine\.csv:2: warning: network mine: no reaction makes li7/,
    ],
    [
      "an unstable nuclide that stays",
      {
        "networks/mine.csv":
          "reaction,evaluation\nli9_n-he4-he4,reaclib\nc9_p-he4-he4,reaclib\nbe11_he4-li7,reaclib\nbe12_n-b11,reaclib\nbe12_b12,reaclib\n",
      },
      /network mine: nothing destroys b12, which is unstable/,
    ],
    ["a nuclide table that is broken", { "nuclides.csv": "id\nn\n" }, /^rates\/nuclides\.csv:1: column Z/],
  ])("%s", (_, changes, message) => {
    const fresh = findings(changes).filter((each) => !ours.includes(each));
    expect(fresh.join("\n")).toMatch(new RegExp(message.source, "m"));
  });
});

test("a single wrong digit of 20 per cent is found in any table at any temperature in use", () => {
  const random = seededUniform(20260101);
  const library = loadRates();
  for (const id of library.reactions)
    for (const name of library.evaluations(id)) {
      const table = library.table(id, name);
      if (table.kind !== "table") continue;
      for (let trial = 0; trial < 5; trial++) {
        const rows = [...table.T9.keys()].filter((i) => table.T9[i] >= 0.01);
        const row = rows[Math.floor(random() * rows.length)];
        const rate = table.rate.map((each, i) => (i === row ? each * 1.2 : each));
        const errors = checkTable({ ...table, rate }).filter((each) => each.severity === "error");
        expect(
          errors.map((each) => each.row),
          `${table.file}, row ${row}, seed 20260101`,
        ).toEqual([row]);
      }
    }
  expect(JUMP).toBeLessThan(Math.log(1.2));
});
