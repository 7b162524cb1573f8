/** Sensitivity by temperature: windows, integrals, differences of runs with one window raised; swaps to second order. */
import { describe, expect, test } from "vitest";
import { prepareModel } from "../../../src/model/prepare.ts";
import { rateResponses, WINDOW, windowAt } from "../../../src/model/rate-response.ts";
import { loadRates } from "../../../src/node/load-rates.ts";
import { evaluateRate } from "../../../src/nuclear/rate.ts";
import type { AbundanceName } from "../../../src/nucleosynthesis/abundances.ts";

const library = loadRates();
const model = prepareModel(library, { network: "twelve", errors: "none" });
const p = model.parameters();
const NAMES = ["Yp", "dToH", "he3ToH", "li7ToH"] as const;

test("the windows add up to 1 at every temperature, their slopes to 0", () => {
  for (let lnT9 = -6; lnT9 < 4; lnT9 += 0.0137) {
    let [sum, slopes] = [0, 0];
    for (let k = 0; k < 93; k++) {
      const { value, slope } = windowAt(k, lnT9);
      sum += value;
      slopes += slope;
      const h = 1e-6;
      const difference = (windowAt(k, lnT9 + h).value - windowAt(k, lnT9 - h).value) / (2 * h);
      expect(Math.abs(difference - slope)).toBeLessThan(2e-4); // jump of the second derivative times h at the edges
    }
    expect(sum).toBeCloseTo(1, 12);
    expect(slopes).toBeCloseTo(0, 9);
  }
});

test.each(["p-n_gamma-d", "d-p_gamma-he3", "d-d_n-he3", "be7-n_p-li7"])(
  "%s: the density integrates to the sensitivity, and a middle range holds 90 per cent of it",
  (id) => {
    const { abundances, T9 } = rateResponses(model, p, id);
    for (const name of NAMES) {
      const { density, sensitivity, range } = abundances[name]!;
      expect(density).toHaveLength(T9.length);
      const integral = density.reduce((sum, each) => sum + each * WINDOW, 0);
      expect(Math.abs(integral - sensitivity)).toBeLessThan(1e-9 + 1e-9 * Math.abs(sensitivity));
      if (range === undefined) {
        expect(Math.abs(sensitivity)).toBeLessThan(1e-6);
        continue;
      }
      const size = (from: number, to: number) =>
        density.reduce((sum, each, k) => sum + (T9[k] >= from && T9[k] <= to ? Math.abs(each) : 0), 0);
      const share = size(...range) / size(0, 100);
      const largest = Math.max(...density.map(Math.abs)) / size(0, 100);
      expect(Math.abs(share - 0.9)).toBeLessThanOrEqual(largest); // whole windows are counted here
    }
  },
);

// Independent of the adjoint: the columns of the flux table are raised in one window, and the run is repeated.
test("the density agrees with differences of runs whose rate is raised in one window", () => {
  const id = "d-p_gamma-he3";
  const context = model.context(p);
  const r = context.data.reactions.findIndex((reaction) => reaction.id === id);
  const { abundances, T9 } = rateResponses(model, { ...p, tolerance: 1e-7 }, id);
  const raised = (k: number, amount: number) => {
    const table = context.table.copy();
    const nodes = Array.from({ length: table.intervals + 1 }, (_, i) => windowAt(k, -table.node(i)));
    const factor = Float64Array.from(nodes, ({ value }) => Math.exp(amount * value));
    const slope = Float64Array.from(nodes, (each) => -amount * each.slope);
    for (const side of [0, 1]) table.multiplyColumn(2 * (r + 1) + side, factor, slope);
    const { names, values } = model.evaluate(context, { eta10: p.eta10, tauN: p.tauN, tolerance: 1e-8, table });
    return new Map(names.map((name, i) => [name, values[i]]));
  };
  const step = 0.02;
  for (const wanted of [0.3, 0.5, 0.6]) {
    const k = T9.reduce((best, each, i) => (Math.abs(each - wanted) < Math.abs(T9[best] - wanted) ? i : best), 0);
    const [up, down] = [raised(k, step), raised(k, -step)];
    for (const name of NAMES) {
      const difference = Math.log(up.get(name)! / down.get(name)!) / (2 * step * WINDOW);
      const { density, sensitivity } = abundances[name]!;
      // Error of the differences: 1e-8 of the integration over 2 step WINDOW, and step^2 of the response.
      expect(Math.abs(difference - density[k]), `${name} at T9 = ${T9[k]}`).toBeLessThan(
        1e-5 + 1e-3 * Math.abs(density[k]) + 1e-4 * Math.abs(sensitivity),
      );
    }
  }
});

describe("a swap moves the abundances by the integral of sensitivity times ln ratio", () => {
  // Mean of the first orders at both ends: the trapezoid rule in the strength of the change, error of third order.
  test.each([
    ["d-p_gamma-he3", "iliadis2016", "mossa2020"],
    ["d-p_gamma-he3", "iliadis2016", "marcucci2016"],
    ["be7-n_p-li7", "desouza2020", "damone2018"],
    ["he3-d_p-he4", "desouza2019", "descouvemont2004"],
    ["t-d_n-he4", "desouza2019", "descouvemont2004"],
  ])("%s from %s to %s", (id, first, second) => {
    const rates = [first, second].map((name) => evaluateRate(library.table(id, name)));
    const change = (from: number, to: number) => (lnT9: number) => {
      const T9 = Math.exp(lnT9);
      return {
        value: rates[to].lnRate(T9) - rates[from].lnRate(T9),
        slope: rates[to].dLnRatedLnT9(T9) - rates[from].dLnRatedLnT9(T9),
      };
    };
    const at = (name: string) => model.parameters({ evaluations: { [id]: name } });
    const there = rateResponses(model, at(first), id, [change(0, 1)]).abundances;
    const back = rateResponses(model, at(second), id, [change(1, 0)]).abundances;
    const run = (name: string) => model.abundances({ evaluations: { [id]: name } }).abundances;
    const [before, after] = [run(first), run(second)];
    // Largest ln ratio where the rate matters for any of the abundances.
    let largest = 0;
    for (let T9 = 0.05; T9 < 1.5; T9 *= 1.05) largest = Math.max(largest, Math.abs(change(0, 1)(Math.log(T9)).value));
    for (const name of NAMES) {
      const moved = Math.log(after[name]!.value / before[name]!.value);
      const trapezoid = (there[name]!.firstOrder[0] - back[name]!.firstOrder[0]) / 2;
      // Responses are of order one or below in the strength, so the error is about largest^3/12.
      expect(Math.abs(moved - trapezoid), `${name}: ${moved} against ${trapezoid}`).toBeLessThan(largest ** 3 + 1e-6);
    }
  });
});

test("a reaction that the network does not hold is refused", () => {
  expect(() => rateResponses(model, p, "b11-p_gamma-c12")).toThrow(/b11-p_gamma-c12: not in network twelve/);
});

test("a rate multiplied by a constant: first order is sensitivity times ln factor", () => {
  const ln = Math.log(1.02);
  const { abundances } = rateResponses(model, p, "d-d_p-t", [() => ({ value: ln, slope: 0 })]);
  for (const name of NAMES as readonly AbundanceName[]) {
    const { sensitivity, firstOrder } = abundances[name]!;
    expect(firstOrder[0]).toBeCloseTo(sensitivity * ln, 10);
  }
});
