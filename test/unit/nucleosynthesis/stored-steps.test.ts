/** The stored sequence of steps: accurate in its range, noticed and left outside it, and its counts. */
import { describe, expect, test } from "vitest";
import { applyVariations, errorSources, prepareModel } from "../../../src/model/prepare.ts";
import { loadRates } from "../../../src/node/load-rates.ts";
import type { Keys } from "../../../src/parameters/cosmology.ts";

const FOUR = ["Yp", "dToH", "he3ToH", "li7ToH"];

describe("stored sequence of steps", () => {
  for (const network of ["twelve", "extended"]) {
    const model = prepareModel(loadRates(), { network, errors: "none" });
    const worst = (keys: Keys) => {
      const p = model.parameters(keys);
      const context = model.context(p);
      const inputs = { eta10: p.eta10, tauN: p.tauN, tolerance: p.tolerance };
      const fast = model.evaluate(context, inputs);
      const tight = model.evaluate(context, { ...inputs, tolerance: 1e-7, method: "rodas5p" });
      const errors = fast.names.flatMap((name, i) =>
        FOUR.includes(name) ? [Math.abs(fast.values[i] / tight.values[i] - 1)] : [],
      );
      return { stepping: fast.stepping, error: Math.max(...errors) };
    };

    test(`${network}: 1e-5 in Y_p, D/H, 3He/H, 7Li/H at every eta10 from 1 to 20`, () => {
      for (let i = 0; i <= 40; i++) {
        const { stepping, error } = worst({ eta10: Math.min(20, 20 ** (i / 40)) });
        expect(stepping).toBe("stored");
        expect(error, `eta10 = ${20 ** (i / 40)}`).toBeLessThan(1e-5);
      }
    });

    test(`${network}: the same for other N_eff, tau_n, degeneracy and expansion`, () => {
      for (const keys of [{ deltaNEff: -1 }, { deltaNEff: 2 }, { tauN: 840 }, { xiE: 0.2 }, { xiE: -0.2 }])
        expect(worst(keys).error, JSON.stringify(keys)).toBeLessThan(1e-5);
    });

    test(`${network}: outside its range steps are chosen adaptively, and the answer says so`, () => {
      expect(worst({ eta10: 0.5 })).toMatchObject({ stepping: "adaptive" });
      expect(worst({ eta10: 30 })).toMatchObject({ stepping: "adaptive" });
      expect(model.abundances({ tolerance: 1e-4 }).solver.stepping).toBe("adaptive");
      expect(model.abundances({}).solver.stepping).toBe("stored");
    });

    test(`${network}: a rate far from its value is integrated adaptively, one near it to 2e-5`, () => {
      for (const reaction of ["p-n_gamma-d", "d-p_gamma-he3", "d-d_n-he3", "d-d_p-t", "t-d_n-he4", "he3-d_p-he4"]) {
        expect(model.abundances({ scales: { [reaction]: 3 } }).solver.stepping).toBe("adaptive");
        for (const factor of [0.8, 1.25]) {
          const scales = { [reaction]: factor };
          const plain = model.abundances({ scales });
          expect(plain.solver.stepping).toBe("stored");
          const tight = model.abundances({ scales, tolerance: 1e-6 }).abundances;
          for (const name of FOUR as (keyof typeof tight)[])
            expect(
              Math.abs((plain.abundances[name]?.value as number) / (tight[name]?.value as number) - 1),
              `${reaction} x ${factor}, ${name}`,
            ).toBeLessThan(2e-5);
        }
      }
    });
  }
});

test("strong degeneracy and unusual neutron lives keep 2e-5 at the default tolerance, adaptively", () => {
  const model = prepareModel(loadRates(), { network: "twelve", errors: "none" });
  for (const keys of [{ xiE: -3 }, { xiE: -2 }, { xiE: -0.5 }, { xiE: 1 }, { tauN: 500 }, { tauN: 1500 }]) {
    const plain = model.abundances(keys);
    expect(plain.solver.stepping).toBe("adaptive");
    const tight = model.abundances({ ...keys, tolerance: 1e-7 }).abundances;
    for (const name of FOUR as (keyof typeof tight)[])
      expect(
        Math.abs((plain.abundances[name]?.value as number) / (tight[name]?.value as number) - 1),
        `${JSON.stringify(keys)} ${name}`,
      ).toBeLessThan(2e-5);
  }
});

// Counts do not depend on the machine; a margin of 10 % lets constants and rates change a little.
test("steps of a run stay what they are", () => {
  const steps = (keys: Keys) => prepareModel(loadRates(), { errors: "none", ...keys }).abundances().solver.steps;
  const within = (value: number, expected: number) => {
    expect(value).toBeGreaterThan(0.9 * expected);
    expect(value).toBeLessThan(1.1 * expected);
  };
  within(steps({ network: "twelve", eta10: 0.5 }), ADAPTIVE.twelve);
  within(steps({ network: "extended", eta10: 0.5 }), ADAPTIVE.extended);
});

/** Steps counted at eta10 = 0.5, adaptive, when the method was settled. */
const ADAPTIVE = { twelve: 159, extended: 256 };

test("a rate varied by an uncertainty that changes with temperature: stored rows equal adaptive steps to 2e-5", () => {
  const model = prepareModel(loadRates(), { network: "twelve" });
  const p = model.parameters();
  const context = model.context(p);
  const inputs = {
    eta10: p.eta10,
    tauN: p.tauN,
    factors: new Float64Array(context.data.reactions.length + 1).fill(1),
    tolerance: p.tolerance,
  };
  const variations = new Float64Array(errorSources(context, p));
  context.data.reactions.forEach((reaction, r) => {
    if (["be7-n_p-li7", "he3-d_p-he4", "t-d_n-he4"].includes(reaction.id)) variations[r + 1] = 3;
  });
  const varied = applyVariations(context, inputs, p, variations);
  expect(varied.variations).toHaveLength(3);
  const stored = model.evaluate(context, varied);
  expect(stored.stepping).toBe("stored");
  const tight = model.evaluate(context, { ...varied, tolerance: 1e-7 });
  const plain = model.evaluate(context, inputs);
  stored.names.forEach((name, i) => {
    if (!FOUR.includes(name)) return;
    expect(Math.abs(stored.values[i] / tight.values[i] - 1), name).toBeLessThan(2e-5);
  });
  // The variation is felt: 7Be(n,p) up by three standard deviations lowers 7Li by several per cent.
  const li7 = stored.names.indexOf("li7ToH");
  expect(stored.values[li7] / plain.values[li7]).toBeLessThan(0.97);
});
