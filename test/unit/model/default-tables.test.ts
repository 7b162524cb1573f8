/** The shipped default tables are what the calculation gives, and are unused once their inputs change. */
import { expect, test } from "vitest";
import { computeThermalHistory, HISTORY_COLUMNS } from "../../../src/background/history.ts";
import {
  decodeNumbers,
  defaultTablesHold,
  encodeNumbers,
  storedHistory,
  storedWeakTable,
} from "../../../src/model/default-tables.ts";
import { tabulateOver } from "../../../src/model/prepare.ts";
import { WEAK_DEFAULTS } from "../../../src/weak/inputs.ts";

test("the fingerprint of constants, defaults and grids is that of the stored tables", () => {
  // If this fails, constants or grids have changed: run npx tsx src/scripts/make-default-tables.ts
  expect(defaultTablesHold()).toBe(true);
});

test("stored history and weak rates equal recomputed ones to 1e-11", () => {
  const stored = storedHistory();
  const computed = computeThermalHistory();
  const close = (a: Float64Array, b: Float64Array, name: string) => {
    expect(a.length).toBe(b.length);
    for (let i = 0; i < a.length; i++)
      expect(Math.abs(a[i] - b[i]), `${name}[${i}]`).toBeLessThanOrEqual(1e-11 * Math.max(1e-9, Math.abs(b[i])));
  };
  close(stored!.s, computed.s, "s");
  for (const name of HISTORY_COLUMNS) close(stored![name], computed[name], name);
  expect(stored!.nEffComputed).toBeCloseTo(computed.nEffComputed, 10);
  const weak = tabulateOver(computed, 0, WEAK_DEFAULTS);
  close(storedWeakTable()!.lnNToP, weak.lnNToP, "n -> p");
  close(storedWeakTable()!.lnPToN, weak.lnPToN, "p -> n");
});

test("numbers survive the text form to the last bit", () => {
  const numbers = Float64Array.of(0, -0, 1 / 3, 1e-300, -Number.MAX_VALUE, Math.PI);
  expect([...decodeNumbers(encodeNumbers(numbers))]).toEqual([...numbers]);
});
