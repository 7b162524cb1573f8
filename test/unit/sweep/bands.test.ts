// Bands: interpolated from nodes to within a per cent of responses known everywhere; a part has the bands of the whole.
import { expect, test } from "vitest";
import { relativeErrors } from "../../../src/sweep/bands.ts";
import { type Plan, planSweep } from "../../../src/sweep/plan.ts";

const id = (name: string) => name;

/** Two sources and two abundances, one of them with a dip where its sources cancel, as lithium has. */
function responses(eta: number): number[][] {
  const u = Math.log10(eta);
  return [
    [0.05 * Math.tanh(3 * (u - 0.5)), 0.01 + 0.002 * u],
    [0.01 * Math.exp(-u), -0.02 * u],
  ];
}

function exact(eta: number): number[] {
  const rows = responses(eta);
  return [0, 1].map((x) => Math.hypot(...rows.map((row) => row[x])));
}

function asker(plan: Plan, asked: number[]) {
  return async (points: readonly number[]) => {
    asked.push(...points);
    return points.map((point) => responses(plan.coordinates(point)[0]));
  };
}

test("bands of a long scan come from few nodes and are right everywhere", async () => {
  const plan = planSweep(["eta10=1:100:200log"], {}, id);
  const asked: number[] = [];
  const found = await relativeErrors(plan, 0, plan.count, 2, asker(plan, asked));
  expect(new Set(asked).size).toBe(asked.length);
  expect(asked.length).toBeLessThan(60);
  for (let i = 0; i < plan.count; i++) {
    const wanted = exact(plan.coordinates(i)[0]);
    wanted.forEach((sigma, x) => {
      expect(Math.abs(found.get(i)![x] / sigma - 1), `point ${i}, abundance ${x}`).toBeLessThan(0.01);
    });
  }
});

test("bands of a short scan are those of its points", async () => {
  const plan = planSweep(["eta10=9,3,6"], {}, id);
  const found = await relativeErrors(plan, 0, 3, 2, asker(plan, []));
  [9, 3, 6].forEach((eta, i) => {
    expect([...found.get(i)!]).toEqual(exact(eta).map((sigma) => expect.closeTo(sigma, 15)));
  });
});

test("a part of a plan has the bands of the whole, to the last bit", async () => {
  const plan = planSweep(["eta10=1:20:30log", "nEff=2,3,4"], {}, id);
  const whole = await relativeErrors(plan, 0, plan.count, 2, asker(plan, []));
  const part = await relativeErrors(plan, 37, 61, 2, asker(plan, []));
  expect(part.size).toBe(24);
  for (const [i, sigma] of part) expect(sigma).toEqual(whole.get(i));
});
