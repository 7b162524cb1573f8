// Sampled errors: blocks that add up the same anywhere, agreement with linear errors, and where they part.
import { describe, expect, test } from "vitest";
import { prepareModel } from "../../../src/model/prepare.ts";
import { BLOCK, sampleBlocks } from "../../../src/model/sampling.ts";
import { loadRates } from "../../../src/node/load-rates.ts";
import { InputError } from "../../../src/numerics/check.ts";
import type { Keys } from "../../../src/parameters/cosmology.ts";

const model = (keys: Keys) => prepareModel(loadRates(), { network: "twelve", ...keys });

test("blocks cover all samples once", () => {
  const blocks = sampleBlocks(3 * BLOCK + 5);
  expect(blocks.map(({ from }) => from)).toEqual([0, BLOCK, 2 * BLOCK, 3 * BLOCK]);
  expect(blocks.at(-1)?.to).toBe(3 * BLOCK + 5);
  for (const samples of [0, 1, 3e7]) expect(() => sampleBlocks(samples)).toThrow(InputError);
});

test("the same seed gives the same numbers, bit for bit, in blocks of any size and order", () => {
  const keys: Keys = { samples: 48, seed: 9 };
  const whole = model(keys).abundances();
  const other = model(keys);
  const plan = other.samplePlan();
  const parts = [
    [40, 48],
    [0, 17],
    [17, 40],
  ].map(([from, to]) => ({ from, block: other.sampleBlock({}, plan, from, to) }));
  const blocks = parts.sort((a, b) => a.from - b.from).map(({ block }) => block);
  const again = other.abundances({}, undefined, blocks);
  expect(again.abundances).toEqual(whole.abundances);
  expect(again.quantiles).toEqual(whole.quantiles);
  expect(again.sampling).toEqual(whole.sampling);
  expect(model({ ...keys, seed: 10 }).abundances().abundances).not.toEqual(whole.abundances);
});

describe("linear and sampled errors of the default cosmology agree to 10 %", () => {
  const samples = 512;
  const compare = (keys: Keys, names: readonly string[]) => {
    const linear = model({ ...keys, errors: "linear" }).abundances();
    const sampled = model({ ...keys, samples }).abundances();
    return names.map((name) => {
      const key = name as keyof typeof linear.abundances;
      return { name, ratio: sampled.abundances[key]!.sigma! / linear.abundances[key]!.sigma! };
    });
  };

  test("twelve reactions: every abundance", () => {
    for (const { name, ratio } of compare({}, ["Yp", "dToH", "tToH", "he3ToH", "li7ToH"]))
      expect(Math.abs(ratio - 1), name).toBeLessThan(0.1);
  });

  test("standard network: all but lithium, whose error has a tail that linear propagation misses, as it warns", () => {
    const keys: Keys = { network: "standard" };
    for (const { name, ratio } of compare(keys, ["Yp", "dToH", "tToH", "he3ToH"]))
      expect(Math.abs(ratio - 1), name).toBeLessThan(0.1);
    const linear = model({ ...keys, errors: "linear" }).abundances();
    const [lithium] = compare(keys, ["li7ToH"]);
    if (Math.abs(lithium.ratio - 1) > 0.1) expect(linear.warnings.join()).toMatch(/li7ToH: .*--samples/);
  });

  test("an error of omega_b is sampled as well", () => {
    const keys: Keys = { omegaB: { value: 0.02237, sigma: 0.0005 } };
    const [{ ratio }] = compare(keys, ["dToH"]);
    expect(Math.abs(ratio - 1)).toBeLessThan(0.1);
    const { sigma } = model({ ...keys, samples }).abundances().abundances.dToH!;
    expect(sigma! / 2.44e-5).toBeGreaterThan((1.6 * 0.0005) / 0.02237);
  });
});
