/** Reading rates from disk: our folder, a user's over it, only what is needed, refusals. */
import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeEach, expect, test } from "vitest";
import { findRatesFolder, folderFiles, loadRates } from "../../../src/node/load-rates.ts";
import { buildLibrary, type LibraryFiles, selectNetwork } from "../../../src/nuclear/library.ts";
import { InputError } from "../../../src/numerics/check.ts";

const root = mkdtempSync(join(tmpdir(), "emberline-rates-"));
let folder = "";
let count = 0;
beforeEach(() => {
  folder = join(root, `user${count++}`);
  mkdirSync(folder);
});
afterAll(() => rmSync(root, { recursive: true }));

test("a run with twelve reactions reads the masses, one list and twelve rate files", () => {
  const disk = folderFiles(findRatesFolder(), "rates");
  const read = new Set<string>();
  const counted: LibraryFiles = {
    list: disk.list,
    read(path) {
      read.add(path);
      return disk.read(path);
    },
  };
  selectNetwork(buildLibrary(counted), "twelve");
  expect(read.size).toBe(14);
});

test("a user's folder with one file is laid over ours; messages name its file", () => {
  mkdirSync(join(folder, "d-d_p-t"));
  const file = join(folder, "d-d_p-t", "gomezinesta2017.ecsv");
  const text = folderFiles(findRatesFolder(), "rates").read("d-d_p-t/gomezinesta2017.ecsv")!.text;
  writeFileSync(file, text.replace("1.35591e-08", "2.35591e-08"));
  const selected = selectNetwork(loadRates(folder), "twelve");
  expect(selected.find((each) => each.reaction.id === "d-d_p-t")!.rateTable.rate[0]).toBe(2.35591e-8);
  writeFileSync(file, text.replace("1.35591e-08", "-1"));
  expect(() => selectNetwork(loadRates(folder), "twelve")).toThrow(`${file}:22: rate = -1: must be positive`);
});

test("refused: no folder, a file, nothing in it, a folder named otherwise, text that is not UTF-8", () => {
  expect(() => loadRates(join(folder, "none"))).toThrow(InputError);
  expect(() => loadRates(join(folder, "none"))).toThrow(/none: no such folder/);
  const file = join(folder, "x");
  writeFileSync(file, "");
  expect(() => loadRates(file)).toThrow(/is a file, not a folder/);
  expect(() => loadRates(folder)).toThrow(/holds no reaction folder, networks\/ or nuclides\.csv/);
  mkdirSync(join(folder, "p-d_gamma-he3"));
  expect(() => loadRates(folder)).toThrow(/name this folder d-p_gamma-he3/);
  rmSync(join(folder, "p-d_gamma-he3"), { recursive: true });
  mkdirSync(join(folder, "d-p_gamma-he3"));
  writeFileSync(join(folder, "d-p_gamma-he3", "iliadis2016.ecsv"), new Uint8Array([0xff, 0xfe, 0x80]));
  expect(() => selectNetwork(loadRates(folder), "twelve")).toThrow(
    /iliadis2016\.ecsv: cannot be read \(not UTF-8 text\)/,
  );
});
