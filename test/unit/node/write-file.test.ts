// Files are written whole or not at all, and a refusal says why in one line.
import { existsSync, mkdirSync, mkdtempSync, readdirSync, readFileSync, symlinkSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { beforeEach, describe, expect, test } from "vitest";
import { requireWritable, writeWhole } from "../../../src/node/write-file.ts";
import { InputError } from "../../../src/numerics/check.ts";

let folder: string;
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), "emberline-write-"));
});

test("writes text and bytes, and replaces what was there", async () => {
  const file = join(folder, "a.txt");
  await writeWhole(file, "first, a longer text");
  await writeWhole(file, "second");
  expect(readFileSync(file, "utf8")).toBe("second");
  await writeWhole(file, new Uint8Array([1, 2, 3]));
  expect([...readFileSync(file)]).toEqual([1, 2, 3]);
  expect(readdirSync(folder)).toEqual(["a.txt"]);
});

test("a link keeps pointing to its file", async () => {
  writeFileSync(join(folder, "target"), "old");
  symlinkSync("target", join(folder, "link"));
  await writeWhole(join(folder, "link"), "new");
  expect(readFileSync(join(folder, "target"), "utf8")).toBe("new");
});

test("a failure in the middle leaves the old file and no temporary one", async () => {
  const file = join(folder, "a.txt");
  writeFileSync(file, "old");
  await expect(writeWhole(file, 42 as unknown as string)).rejects.toThrow(InputError);
  expect(readFileSync(file, "utf8")).toBe("old");
  expect(readdirSync(folder)).toEqual(["a.txt"]);
});

describe("what cannot be written is refused with its reason, before and at writing", () => {
  const cases: readonly (readonly [string, () => string, RegExp])[] = [
    ["a missing folder", () => join(folder, "none", "a.txt"), /no such folder/],
    ["a folder", () => folder, /is a folder/],
    ["a path through a file", () => join(folder, "file", "a.txt"), /not a folder/],
    ["a name that is too long", () => join(folder, "x".repeat(300)), /name is too long/],
    ["an empty name", () => "", /name is empty/],
  ];
  test.each(cases)("%s", async (_, path, reason) => {
    writeFileSync(join(folder, "file"), "");
    mkdirSync(join(folder, "sub"));
    await expect(requireWritable(path())).rejects.toThrow(reason);
    await expect(writeWhole(path(), "text")).rejects.toThrow(reason);
    await expect(writeWhole(path(), "text")).rejects.toThrow(InputError);
    expect(readdirSync(folder).sort()).toEqual(["file", "sub"]);
  });
});

test.runIf(existsSync("/dev/full"))("a full device is reported as such", async () => {
  await expect(writeWhole("/dev/full", "text")).rejects.toThrow("/dev/full: cannot be written: no space left");
});
