// Requests by name: lines of a batch answered like the commands themselves, errors in place and to the point.
import { describe, expect, test } from "vitest";
import { loadRates } from "../../../src/node/load-rates.ts";
import { computeAbundances } from "../../../src/requests/abundances.ts";
import { computeScan } from "../../../src/requests/scan.ts";
import { taskAnswerer } from "../../../src/requests/tasks.ts";

const library = loadRates();
const answer = taskAnswerer(library);
const ask = async (text: string, line = 1) => JSON.parse((await answer({ kind: "line", line, text })).text);
const twelve = { network: "twelve", errors: "none" } as const;

test("an answer is that of the command, with the id of the request", async () => {
  const keys = { ...twelve, omegaB: 0.0224, tauN: { value: 879, sigma: 1 }, scales: { "d(p,g)he3": 1.02 } };
  const found = await ask(JSON.stringify({ id: "a", command: "abundances", ...keys }));
  expect(found).toEqual({ id: "a", ...JSON.parse(JSON.stringify(await computeAbundances(keys, library))) });
});

test("what a thread keeps from request to request changes no answer", async () => {
  const lines = [
    { command: "abundances", ...twelve, nEff: 4 },
    { command: "abundances", ...twelve },
    { command: "abundances", ...twelve, without: ["coulomb"] },
    { command: "abundances", ...twelve, expansion: "1.01" },
    { command: "abundances", ...twelve, deltaNEff: 0.5, eta10: 6 },
    { command: "abundances", network: "twelve", xiE: 0.01 },
    { command: "abundances", ...twelve },
  ].map((line) => JSON.stringify(line));
  const kept = [];
  for (const line of lines) kept.push(await ask(line));
  for (const [i, line] of lines.entries()) {
    const fresh = taskAnswerer(library);
    expect(JSON.parse((await fresh({ kind: "line", line: 1, text: line })).text), line).toEqual(kept[i]);
  }
});

test.each([
  [{ command: "report" }, "report is not offered in batch"],
  [{ command: "abundances", ...twelve, samples: 10 }, "errors = none and samples = 10"],
  [
    { command: "abundances", ...twelve, scales: { "d(p,g)he3": 1.1, "d-p_gamma-he3": 1.2 } },
    "scale d-p_gamma-he3: d-p_gamma-he3 is given twice",
  ],
])("%j is refused", async (request, message) => {
  const { error } = await ask(JSON.stringify(request));
  expect(error.message).toContain(message);
});

test("a scan may be asked for", async () => {
  const keys = { ...twelve, over: ["eta10=4,5"] };
  const found = await ask(JSON.stringify({ command: "scan", ...keys }));
  expect(found.results.table).toEqual((await computeScan(keys, library)).results.table);
});

describe("errors stand in place of the answer", () => {
  test.each([
    ["{broken", "json", /not JSON/],
    ["", "json", /not JSON/],
    ["[1,2]", "json", /not a JSON object/],
    ["null", "json", /not a JSON object/],
    ["12", "json", /not a JSON object/],
    ["\u0000\u0001binary", "json", /not JSON/],
    ["{}", "command", /no command; commands are abundances/],
    ['{"command": 5}', "command", /unknown command 5/],
    ['{"command": "abundance"}', "command", /did you mean abundances\?/],
    ['{"command": "__proto__"}', "command", /unknown command/],
    [
      '{"command": "abundances", "omegab": 0.02}',
      "unknown-key",
      /unknown key omegab of abundances; did you mean omegaB\?/,
    ],
    ['{"command": "abundances", "over": ["nEff=2,3"]}', "unknown-key", /unknown key over/],
    ['{"command": "abundances", "__proto__": 1}', "unknown-key", /unknown key __proto__/],
    ['{"command": "abundances", "omegaB": "0.02"}', "type", /omegaB = "0.02": must be a number or/],
    ['{"command": "abundances", "omegaB": null}', "type", /omegaB = null/],
    ['{"command": "abundances", "omegaB": {"value": 1}}', "type", /omegaB/],
    ['{"command": "abundances", "nEff": [3]}', "type", /nEff = \[3\]: must be a number/],
    ['{"command": "abundances", "without": "coulomb"}', "type", /must be an array of strings/],
    ['{"command": "abundances", "scales": {"n_p": "2"}}', "type", /must be an object/],
    ['{"command": "abundances", "omegaB": -1}', "range", /omegaB = -1: accepted are/],
    ['{"command": "abundances", "omegaB": 1e999}', "type", /omegaB/],
    ['{"command": "abundances", "network": "nosuch"}', /./, /nosuch/],
    ['{"command": "scan", "over": ["eta10=1:2"]}', "axis", /write KEY=/],
    ['{"command": "scan"}', "axis", /0 axes given/],
  ])("%s", async (text, code, message) => {
    const found = await ask(text, 7);
    expect(found).toEqual({
      line: 7,
      error: {
        code: code instanceof RegExp ? expect.stringMatching(code) : code,
        message: expect.stringMatching(message),
      },
    });
    expect(found.error.message).not.toMatch(/\n/);
  });

  test("with the id where the request has one", async () => {
    expect(await ask('{"id": [1, "x"], "command": "nosuch"}', 3)).toMatchObject({ id: [1, "x"], line: 3 });
  });
});
