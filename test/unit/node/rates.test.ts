// The command `rates` as a function of the library, and as a request of a batch.
import { expect, test } from "vitest";
import { InputError, loadRates, makeRate, rates } from "../../../src/node/index.ts";
import type {
  RatesCheckResults,
  RatesCompareResults,
  RatesListResults,
  RatesShowResults,
} from "../../../src/output/rates-result.ts";

test("list is the default action; filters as keys", async () => {
  const all = (await rates()).results as RatesListResults;
  expect(all).toMatchObject({ action: "list", evaluations: 214 });
  const part = (await rates({ action: "list", network: "twelve", nuclide: "7Be" })).results as RatesListResults;
  expect(part.reactions).toBe(2);
});

test("show takes its evaluation from `evaluations`, in any notation of the reaction", async () => {
  const keys = { action: "show", reaction: "d-p_gamma-he3", t9: [0.8] };
  const chosen = (await rates({ ...keys, evaluations: { "d(p,g)he3": "mossa2020" } })).results as RatesShowResults;
  expect(chosen.evaluation).toBe("mossa2020");
  expect(chosen.table.rows).toHaveLength(1);
  await expect(rates({ ...keys, evaluations: { "t(d,n)he4": "reaclib" } })).rejects.toThrow(
    /another reaction than the d-p_gamma-he3/,
  );
});

test("compare and check", async () => {
  const keys = { action: "compare", reaction: "t(d,n)he4", names: ["desouza2019", "reaclib"], network: "twelve" };
  const { results, warnings } = await rates(keys);
  expect(Object.keys((results as RatesCompareResults).swaps!)).toEqual(["reaclib"]);
  expect(warnings).toEqual([]);
  expect((await rates({ action: "check" })).results as RatesCheckResults).toMatchObject({ errors: 0 });
});

test.each([
  [{ action: "shw" }, /action = shw: accepted are list, show, compare, check; did you mean show\?/],
  [{ action: "show" }, /rates show needs a reaction/],
  [{ action: "compare" }, /rates compare needs a reaction/],
])("%o is refused", async (keys, message) => {
  await expect(rates(keys)).rejects.toThrow(InputError);
  await expect(rates(keys)).rejects.toThrow(message);
});

test("makeRate gives the text of a file that the loader takes, from a text alone", () => {
  const rows = [0, 0.05, 0.1, 0.2, 0.4, 0.7, 1, 2, 3].map(
    (E) => `${E},${2.1e-7 * (1 + 28 * E)},${1e-8 * (1 + 28 * E)}`,
  );
  const { results } = makeRate(
    {
      source: { file: "s.csv", text: ["E_MeV,S_MeV_b,sigma_MeV_b", ...rows].join("\n") },
      reaction: "d(p,g)he3",
      name: "smith2027",
      citation: "Smith 2027",
      entered: "2027-01-31; test",
    },
    loadRates(),
  );
  expect(results.path).toBe("d-p_gamma-he3/smith2027.ecsv");
  expect(results.text).toContain("entered: 2027-01-31; test");
});
