// Plans: order of the points, what each overrides, parts, conflicts, and tables that would not fit.
import { expect, test } from "vitest";
import { InputError } from "../../../src/numerics/check.ts";
import {
  affinity,
  axisWarnings,
  computingOrder,
  MOST_CELLS,
  parsePart,
  partRange,
  planSweep,
  requireFits,
} from "../../../src/sweep/plan.ts";

const id = (name: string) => name;

test("the first axis varies slowest", () => {
  const plan = planSweep(["omegaB=0.02,0.03", "nEff=2,3,4"], {}, id);
  expect(plan.count).toBe(6);
  expect(Array.from({ length: 6 }, (_, i) => plan.coordinates(i))).toEqual([
    [0.02, 2],
    [0.02, 3],
    [0.02, 4],
    [0.03, 2],
    [0.03, 3],
    [0.03, 4],
  ]);
  expect(plan.overrides(4)).toEqual({ omegaB: 0.03, nEff: 3 });
});

test("scaled rates join those of the request", () => {
  const plan = planSweep(["scale:d-d_p-t=0.9,1.1"], { scales: { "d-d_n-he3": 2 } }, id);
  expect(plan.overrides(1)).toEqual({ scales: { "d-d_n-he3": 2, "d-d_p-t": 1.1 } });
});

test("points of one thermal history are computed together, in the order of the rows otherwise", () => {
  const plan = planSweep(["omegaB=0.02,0.03", "nEff=2,3"], {}, id);
  expect(computingOrder(plan, 0, 4)).toEqual([0, 2, 1, 3]);
  expect(affinity(plan, 1)).toBe(affinity(plan, 3));
  expect(computingOrder(planSweep(["tauN=870,880,890"], {}, id), 0, 3)).toEqual([0, 1, 2]);
});

test("what sets the same thing twice is refused", () => {
  for (const [axes, base] of [
    [["eta10=1,2"], { omegaB: 0.02 }],
    [["omegaB=0.02,0.03", "eta10=1,2"], {}],
    [["nEff=2,3"], { deltaNEff: 1 }],
    [["tauN=870,880", "tauN=1000,1001"], {}],
    [["scale:d-d_p-t=0.9,1.1"], { scales: { "d-d_p-t": 2 } }],
  ] as const)
    expect(() => planSweep(axes, base, id), axes.join(" ")).toThrow(/keep one of them/);
});

test("every point is in exactly one part", () => {
  for (const [count, n] of [
    [10, 3],
    [7, 7],
    [1000, 13],
  ]) {
    const seen: number[] = [];
    for (let k = 1; k <= n; k++) {
      const { first, end } = partRange(count, { k, n });
      for (let i = first; i < end; i++) seen.push(i);
    }
    expect(seen).toEqual(Array.from({ length: count }, (_, i) => i));
  }
});

test("parts that cannot be are refused", () => {
  for (const text of ["5/4", "0/4", "1", "a/b", "1/0", "-1/2", "1.5/2", ""])
    expect(() => parsePart(text), text).toThrow(/write K\/N/);
  expect(parsePart("3/8")).toEqual({ k: 3, n: 8 });
  expect(() => partRange(4, { k: 1, n: 5 })).toThrow(/there are only 4 points/);
});

test("a table that does not fit into memory is refused before anything is computed", () => {
  expect(() => requireFits("grid", 1e8, 16)).toThrow(InputError);
  expect(() => requireFits("grid", 1e8, 16)).toThrow(/100000000 points need about 96 GB; at most 625000 fit.*--part/);
  expect(() => requireFits("scan", MOST_CELLS / 10, 10)).not.toThrow();
});

test("an axis that nucleosynthesis does not depend on is told", () => {
  expect(axisWarnings(planSweep(["h0=60,70"], {}, id))).toEqual([expect.stringContaining("does not depend on it")]);
  expect(axisWarnings(planSweep(["tauN=870,880"], {}, id))).toEqual([]);
});
