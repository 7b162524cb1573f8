/** Derivatives by the discrete adjoint against central differences of tight runs. */
import { describe, expect, test } from "vitest";
import { applyVariations, errorSources, prepareModel, reported } from "../../../src/model/prepare.ts";
import { loadRates } from "../../../src/node/load-rates.ts";
import { computeResponses } from "../../../src/nucleosynthesis/responses.ts";
import type { RunInputs } from "../../../src/nucleosynthesis/run.ts";
import { propagateLinearly } from "../../../src/uncertainty/propagation.ts";

const NAMES = ["Yp", "dToH", "he3ToH", "li7ToH"];

describe("discrete adjoint", () => {
  for (const [network, eta10] of [
    ["twelve", 6.1],
    ["twelve", 2],
    ["standard", 6.1],
  ] as const) {
    const model = prepareModel(loadRates(), { network, eta10, errors: "none" });
    const p = model.parameters();
    const context = model.context(p);
    const count = context.data.reactions.length + 1;
    const inputs: RunInputs = {
      eta10,
      tauN: p.tauN,
      factors: new Float64Array(count).fill(1),
      tolerance: p.tolerance,
    };
    const tight = { ...inputs, tolerance: 1e-7 };
    const evaluate = (changed: Partial<RunInputs>) => model.evaluate(context, { ...tight, ...changed });
    const responses = computeResponses(context, inputs, (Y) => reported(context, Y));
    const { names } = evaluate({});
    const picked = NAMES.map((name) => names.indexOf(name as (typeof names)[number]));
    const h = 1e-3;
    const slope = (up: readonly number[], down: readonly number[], x: number) =>
      (Math.log(up[x]) - Math.log(down[x])) / (2 * h);

    test(`${network}, eta10 = ${eta10}: every rate, eta and tau_n agree with differences to 1e-4`, () => {
      for (let k = 0; k < count; k++) {
        const moved = (x: number) => {
          const factors = inputs.factors!.slice();
          factors[k] *= 1 + x;
          return evaluate({ factors }).values;
        };
        const [up, down] = [moved(h), moved(-h)];
        for (const x of picked)
          expect(Math.abs(responses.lnRate[x][k] - slope(up, down, x)), `${names[x]}, reaction ${k}`).toBeLessThan(
            1e-4,
          );
      }
      const eta = [evaluate({ eta10: eta10 * (1 + h) }).values, evaluate({ eta10: eta10 * (1 - h) }).values];
      const tau = [evaluate({ tauN: p.tauN * (1 + h) }).values, evaluate({ tauN: p.tauN * (1 - h) }).values];
      for (const x of picked) {
        expect(Math.abs(responses.lnEta[x] - slope(eta[0], eta[1], x)), `${names[x]}, eta`).toBeLessThan(1e-4);
        expect(Math.abs(responses.lnTau[x] - slope(tau[0], tau[1], x)), `${names[x]}, tau_n`).toBeLessThan(1e-4);
      }
    });

    test(`${network}, eta10 = ${eta10}: scaling n <-> p is shortening the neutron's life`, () => {
      for (const x of picked) expect(responses.lnRate[x][0]).toBeCloseTo(-responses.lnTau[x], 10);
    });
  }

  test("errors by the adjoint equal errors by central differences at p = +-1 to 1 % for twelve, to 2 % for standard", () => {
    for (const [network, tolerance] of [
      ["twelve", 0.01],
      ["standard", 0.02],
    ] as const) {
      const model = prepareModel(loadRates(), { network });
      const p = model.parameters();
      const context = model.context(p);
      const inputs: RunInputs = {
        eta10: p.eta10,
        tauN: p.tauN,
        factors: new Float64Array(context.data.reactions.length + 1).fill(1),
        tolerance: 1e-5,
      };
      const central = model.evaluate(context, inputs);
      const sources = errorSources(context, p);
      const { sigma } = propagateLinearly(central.values, sources, (s, sign) => {
        const variations = new Float64Array(sources);
        variations[s] = sign;
        return model.evaluate(context, applyVariations(context, inputs, p, variations)).values;
      });
      const { abundances } = model.abundances();
      central.names.forEach((name, x) => {
        if (!NAMES.includes(name)) return;
        expect(Math.abs((abundances[name]?.sigma as number) / sigma[x] - 1), `${network} ${name}`).toBeLessThan(
          tolerance,
        );
      });
    }
  });
});
