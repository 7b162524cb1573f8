// The commands `rates list`, `show` and `compare`: formats, 80 columns, charts.
import { mkdtempSync, readdirSync, readFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { describe, expect, test } from "vitest";
import { displayWidth, TEXT_WIDTH } from "../../src/output/text.ts";
import { runMain } from "./run-main.ts";

const folder = () => mkdtempSync(join(tmpdir(), "emberline-rates-"));
const json = async (...args: string[]) => {
  const { status, out } = await runMain("rates", ...args, "--format", "json");
  expect(status).toBe(0);
  return JSON.parse(out);
};
const fits = (text: string) => {
  for (const line of text.split("\n")) expect(displayWidth(line), line).toBeLessThanOrEqual(TEXT_WIDTH);
};

describe("list", () => {
  test("without a word after it, rates lists everything, in 80 columns", async () => {
    const [plain, list] = [await runMain("rates"), await runMain("rates", "list")];
    expect(plain).toEqual(list);
    expect(list.status).toBe(0);
    expect(list.out).toContain("Rates: 180 reactions, 214 evaluations");
    fits(list.out);
  });
  test("filters: network, nuclide in any notation, reaction in any notation", async () => {
    const twelve = (await json("list", "--network", "twelve")).results;
    expect(twelve.reactions).toBe(12);
    const beryllium = (await json("list", "--nuclide", "7Be", "--network", "twelve")).results;
    expect([...new Set(beryllium.rates.map((rate: { reaction: string }) => rate.reaction))]).toEqual([
      "he3-he4_gamma-be7",
      "be7-n_p-li7",
    ]);
    const one = (await json("list", "--reaction", "d(p,g)he3")).results;
    expect(one.reactions).toBe(1);
    const used = one.rates.find((rate: { evaluation: string }) => rate.evaluation === "iliadis2016");
    expect(used).toMatchObject({ usedBy: ["twelve", "standard", "extended", "wide"], uncertaintyBasis: "published" });
    expect(used.citation).toMatch(/ApJ 831, 107/);
  });
  test("csv and ecsv hold one row an evaluation", async () => {
    const { out } = await runMain("rates", "list", "--network", "twelve", "--format", "ecsv");
    expect(out).toContain('{name: "valid_T9_from", unit: "GK", datatype: float64');
    const rows = out.split("\n").filter((line) => line !== "" && !line.startsWith("#"));
    const { results } = await json("list", "--network", "twelve");
    expect(rows).toHaveLength(results.evaluations + 1);
  });
  test("assumed uncertainties are marked", async () => {
    const { out } = await runMain("rates", "list", "--reaction", "t(a,g)7Li");
    expect(out).toMatch(/> descouvemont2004 .*1\.080\*/);
    expect(out).toMatch(/descouvemont2004-s0 .*1\.053\*/);
    expect(out).toMatch(/\* assumed or\s+from memory, not published/);
  });
});

describe("show", () => {
  test("every field of the file, a table at chosen temperatures, the range of the claim", async () => {
    const { status, out } = await runMain("rates", "show", "t(d,n)4He", "--t9", "0.1,0.5,1,3");
    expect(status).toBe(0);
    fits(out);
    for (const text of ["de Souza, Boston, Coc, Iliadis 2019", "10.1103/PhysRevC.99.014619", "t-d_n-he4", "17589.300"])
      expect(out).toContain(text);
    expect(out).toMatch(/rows above 1 are used beyond the claim/);
    const rows = out.split("\n").filter((line) => /^ +[0-9.]+ +[0-9]/.test(line));
    expect(rows.map((line) => line.trim().split(/ +/)[0])).toEqual(["0.1", "0.5", "1", "3"]);
    expect(rows.map((line) => line.endsWith("!"))).toEqual([false, false, false, true]);
  });
  test("json: rate as printed at a grid point, reverse by the factor given, no reverse of decays", async () => {
    const { results } = await json("show", "t-d_n-he4", "--t9", "0.1,2");
    const { columns, rows } = results.table;
    expect(columns).toEqual(["T9", "rate", "f_u", "reverse_rate", "ln_reverse_over_forward", "claim"]);
    expect(rows[0].slice(0, 3)).toEqual([0.1, expect.closeTo(4.53649e7, -1), expect.closeTo(1.0035, 10)]);
    const { lnConstant, power, qOverK_GK } = results.detailedBalance;
    expect(rows[1][4]).toBeCloseTo(lnConstant + power * Math.log(2) - qOverK_GK / 2, 10);
    expect(rows[1][3]).toBeCloseTo(rows[1][1] * Math.exp(rows[1][4]), 45);
    expect(rows.map((row: unknown[]) => row[5])).toEqual(["inside", "above"]);
    const decay = (await json("show", "t(b-)he3")).results;
    expect(decay.table.columns).toEqual(["T9", "rate", "f_u", "claim"]);
    expect(decay.halfLife_s / (12.32 * 3.15576e7)).toBeCloseTo(1, 2); // 12.32 a
  });
  test("another evaluation, by name or by reaction and name; the network's otherwise", async () => {
    const shown = async (...args: string[]) => (await json("show", "d(p,g)he3", ...args)).results.evaluation;
    expect(await shown()).toBe("iliadis2016");
    expect(await shown("--evaluation", "mossa2020")).toBe("mossa2020");
    expect(await shown("--evaluation", "d-p_gamma-he3=mossa2020")).toBe("mossa2020");
    expect((await json("show", "f18-n_p-o18")).results.usedBy).toEqual(["wide"]);
  });
  test("charts: both in one figure, or one by name", async () => {
    const at = folder();
    const files = ["a.png", "b.svg", "c.pdf"].map((name) => join(at, name));
    const { status, err } = await runMain(
      ...["rates", "show", "p(n,g)d", "--chart", files[0], "--chart", `rate=${files[1]}`],
      ...["--chart", `uncertainty=${files[2]}`],
    );
    expect([status, err]).toEqual([0, ""]);
    expect(readdirSync(at).sort()).toEqual(["a.png", "b.svg", "c.pdf"]);
    expect(readFileSync(files[1], "utf8")).toContain("<svg");
  });
});

describe("compare", () => {
  const compare = ["compare", "7Be(n,p)7Li", "desouza2020", "damone2018", "--network", "twelve"];
  test("text: changes of the abundances first, then temperatures, then ratios; 80 columns", async () => {
    const { status, out } = await runMain("rates", ...compare);
    expect(status).toBe(0);
    fits(out);
    const heads = ["Change of each abundance", "Where the rate matters", "Ratio to the reference", "Calculation"];
    const places = heads.map((head) => out.indexOf(head));
    expect(places.every((place, i) => place > (places[i - 1] ?? 0))).toBe(true);
  });
  test("json: the change is that of two runs, the table the ratio of the files", async () => {
    const { results, provenance } = await json(...compare);
    expect(results.reference).toBe("desouza2020");
    const value = async (name: string) => {
      const { out } = await runMain(
        ...["--network", "twelve", "--errors", "none", "--evaluation", `be7-n_p-li7=${name}`, "--format", "json"],
      );
      return JSON.parse(out).results.abundances.li7ToH.value;
    };
    const change = (await value("damone2018")) / (await value("desouza2020")) - 1;
    expect(results.swaps.damone2018.li7ToH.change).toBeCloseTo(change, 12);
    expect(results.abundances.li7ToH.range[0]).toBeLessThan(results.abundances.li7ToH.range[1]);
    // The evaluations differ by +20.39, +14.40 and +10.90 per cent at T9 = 0.1, 0.3, 0.5 (independent evaluation of the tables).
    const { columns, rows } = results.table;
    const ratio = (T9: number) => rows.find((row: number[]) => row[0] === T9)[columns.indexOf("ratio_damone2018")];
    for (const [T9, perCent] of [
      [0.1, 20.39],
      [0.3, 14.4],
      [0.5, 10.9],
    ])
      expect(100 * (ratio(T9) - 1)).toBeCloseTo(perCent, 1);
    expect(provenance.rates).toHaveLength(12);
  });
  test("all evaluations if none is named; one is compared with the network's; the chosen one of --evaluation is the reference", async () => {
    const names = async (...args: string[]) =>
      (await json("compare", "t(d,n)he4", ...args, "--network", "twelve")).results.evaluations.map(
        (each: { evaluation: string }) => each.evaluation,
      );
    expect(await names()).toEqual(["desouza2019", "descouvemont2004", "reaclib"]);
    expect(await names("reaclib")).toEqual(["desouza2019", "reaclib"]);
    expect(await names("--evaluation", "t(d,n)he4=reaclib")).toEqual(["reaclib", "descouvemont2004", "desouza2019"]);
  });
  test("charts", async () => {
    const at = folder();
    const files = ["all.png", "ratio.svg", "sensitivity.svg", "bars.pdf"].map((name) => join(at, name));
    const names = ["", "ratio=", "sensitivity=", "abundances="];
    const { status, err } = await runMain(
      "rates",
      ...compare,
      ...files.flatMap((file, i) => ["--chart", names[i] + file]),
    );
    expect([status, err]).toEqual([0, ""]);
    expect(readdirSync(at)).toHaveLength(4);
    expect(readFileSync(files[1], "utf8")).toContain("<svg");
  });
});
