// The library as a user of the package calls it.
import { expect, test } from "vitest";
import * as browser from "../../../src/index.ts";
import { abundances, grid, InputError, loadRates, prepare, report, scan } from "../../../src/node/index.ts";

const keys = { network: "twelve", errors: "none" } as const;

test("a prepared model answers at once, with keys replaced, and agrees with the command's request", async () => {
  const model = await prepare({ ...keys, tauN: 879.4 });
  const run = model.abundances({ omegaB: 0.0223 });
  const answer = await abundances({ ...keys, tauN: 879.4, omegaB: 0.0223 });
  expect(run.abundances).toEqual(answer.results.abundances);
  expect(run.nEffComputed).toBe(answer.results.nEffComputed);
  expect(run.solver.steps).toBeGreaterThan(0);
  expect(run.warnings).toEqual([]);
  const other = model.abundances({ eta10: 6 });
  expect(other.abundances.dToH?.value).toBeGreaterThan(run.abundances.dToH?.value as number);
});

test("the browser library gives the same from rates handed in", async () => {
  const model = await browser.prepare(keys, loadRates());
  expect(model.abundances()).toEqual((await prepare(keys)).abundances());
});

test("a bad key is an InputError with a code", async () => {
  await expect(prepare({ ...keys, omegaB: -1 }).then((model) => model.abundances())).rejects.toThrow(InputError);
  await expect(prepare({ ...keys, network: "nosuch" }).then((model) => model.abundances())).rejects.toMatchObject({
    code: expect.stringMatching(/\w/),
  });
});

test("scan, grid and report have a function each", async () => {
  const table = (await scan({ ...keys, over: ["eta10=5,6"] })).results.table;
  const single = await abundances({ ...keys, eta10: 6 });
  expect(table.rows[1][1]).toBe(single.results.abundances.Yp?.value);
  expect((await grid({ ...keys, over: ["omegaB=0.02,0.03", "nEff=3,4"] })).results.table.rows.length).toBe(4);
  expect(await report(keys, { command: "made <here>" })).toContain("<code>made &lt;here&gt;</code>");
});
