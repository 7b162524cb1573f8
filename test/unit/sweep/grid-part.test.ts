// Headers of grid parts: what belongs together, what is missing, and the header of the whole.
import { expect, test } from "vitest";
import { orderParts, type PartHeader, parsePartHeader, wholeHeader } from "../../../src/sweep/grid-part.ts";

const SUM = "0".repeat(64);

function part(
  k: number,
  n: number,
  from: number,
  to: number,
  points = 9,
  extra: Record<string, string> = {},
): PartHeader {
  const notes: Record<string, string> = {
    command: "emberline 0.1.0 grid",
    over: "omegaB=0.02:0.03:3",
    cosmology: "tauN=878.4",
    part: `${k}/${n}, points ${from} to ${to} of ${points}`,
    ...extra,
    checksum: `sha256 ${SUM}`,
  };
  return parsePartHeader(
    `p${k}`,
    Object.entries(notes).map(([key, value]) => `# ${key}: ${value}`),
  );
}

test("parts are put in order", () => {
  expect(orderParts([part(3, 3, 7, 9), part(1, 3, 1, 3), part(2, 3, 4, 6)]).map((p) => p.k)).toEqual([1, 2, 3]);
});

test.each([
  ["missing", [part(1, 3, 1, 3), part(3, 3, 7, 9)], /missing 1 of 3 parts: 2/],
  ["twice", [part(1, 2, 1, 4), part(1, 2, 1, 4), part(2, 2, 5, 9)], /p1 and p1 are both part 1/],
  ["of another division", [part(1, 2, 1, 4), part(2, 3, 4, 6)], /from different divisions/],
  [
    "of another cosmology",
    [part(1, 2, 1, 4), part(2, 2, 5, 9, 9, { cosmology: "tauN=880" })],
    /p2 and p1 do not belong together: "# cosmology: tauN=880" against "# cosmology: tauN=878.4"/,
  ],
  [
    "of another version",
    [part(1, 2, 1, 4), part(2, 2, 5, 9, 9, { command: "emberline 0.2.0 grid" })],
    /do not belong together.*0\.2\.0/,
  ],
  ["overlapping", [part(1, 2, 1, 5), part(2, 2, 5, 9)], /p2: starts at point 5, but 6 is next/],
  ["too short", [part(1, 2, 1, 4), part(2, 2, 5, 8)], /the parts end at point 8 of 9/],
])("parts that are %s are refused", (_, parts, message) => {
  expect(() => orderParts(parts)).toThrow(message);
});

test("files that are no parts are refused", () => {
  expect(() => parsePartHeader("x", [])).toThrow(/x: not a grid of this program/);
  expect(() => parsePartHeader("x", ["# command: emberline 0.1.0 grid"])).toThrow(/x: not a part but a whole grid/);
  expect(() => parsePartHeader("x", ["# command: emberline 0.1.0 grid", "# part: 1/2, points 1 to 2 of 4"])).toThrow(
    /checksum is missing/,
  );
});

test("the header of the whole has each warning once, in the order of the parts, and its own checksum", () => {
  const parts = [part(1, 2, 1, 4), part(2, 2, 5, 9, 9, { warnings: "eta10 = 25: high (first at eta10 = 25)" })];
  expect(wholeHeader(parts, (text) => text.replace(/\d+/g, "#"), "1".repeat(64))).toEqual([
    "# command: emberline 0.1.0 grid",
    "# over: omegaB=0.02:0.03:3",
    "# cosmology: tauN=878.4",
    "# warnings: eta10 = 25: high (first at eta10 = 25)",
    `# checksum: sha256 ${"1".repeat(64)}`,
  ]);
});
