/** Forward and reverse rates bring isolated nuclides to statistical equilibrium, against equilibria computed by hand. */
import { describe, expect, test } from "vitest";
import { loadRates } from "../../src/node/load-rates.ts";
import { parseReactionId, type Reaction } from "../../src/nuclear/reaction.ts";
import { type Clock, nuclearFluxes } from "../../src/nucleosynthesis/coefficients.ts";
import { assembleNetwork } from "../../src/nucleosynthesis/network-data.ts";
import { StiffStepper } from "../../src/numerics/ode-stiff.ts";

const library = loadRates();
const ids = library.reactions.filter((id) => {
  const { isDecay, products } = parseReactionId(id);
  return !isDecay && products.length <= 3;
});
const TEMPERATURES = [2, 4, 10];

// By hand: k, hbar c, N_A, u, m_e of CODATA 2022; atomic mass excesses and spins of AME2020 and NUBASE2020 from the file of masses.
const K_MEV = 8.617333262e-11; // MeV/K
const HBARC = 197.3269804e-13; // MeV cm
const AVOGADRO = 6.02214076e23;
const mass = (id: string) => {
  const { A, Z, massExcess } = library.nuclide(id);
  return A * 931.49410372 + massExcess / 1000 - Z * 0.51099895069;
};
/** ln of the states per volume, g (m kT/2 pi hbar^2)^(3/2) [cm^-3], in moles. */
const lnStates = (id: string, kT: number) =>
  Math.log(2 * library.nuclide(id).spin + 1) +
  1.5 * Math.log((mass(id) * kT) / (2 * Math.PI * HBARC ** 2)) -
  Math.log(AVOGADRO);
/** ln of (product of reactants' densities/product of products') in equilibrium, densities in mol cm^-3 (Saha). */
function lnSaha({ reactants, products }: Reaction, T9: number): number {
  const kT = K_MEV * T9 * 1e9;
  const excess = (side: readonly string[]) => side.reduce((sum, id) => sum + library.nuclide(id).massExcess / 1000, 0);
  const states = (side: readonly string[]) => side.reduce((sum, id) => sum + lnStates(id, kT), 0);
  return states(reactants) - states(products) - (excess(reactants) - excess(products)) / kT;
}

/** Net change of each nuclide by one reaction. */
function netChange({ reactants, products }: Reaction): Map<string, number> {
  const net = new Map<string, number>();
  for (const id of reactants) net.set(id, (net.get(id) ?? 0) - 1);
  for (const id of products) net.set(id, (net.get(id) ?? 0) + 1);
  return net;
}

/**
 * Equilibrium of one reaction from given abundances, by bisection in the logarithm of the distance to the end that it
 * lies closer to, so that the scarcest nuclide has all its digits.
 */
function equilibrium(
  reaction: Reaction,
  start: ReadonlyMap<string, number>,
  T9: number,
  rhoN: number,
): Map<string, number> {
  const net = [...netChange(reaction)].filter(([, change]) => change !== 0);
  const { reactants, products } = reaction;
  const wanted = lnSaha(reaction, T9) - (reactants.length - products.length) * Math.log(rhoN);
  const end = (sign: 1 | -1) => {
    const extent = Math.min(...net.filter(([, c]) => sign * c < 0).map(([id, c]) => start.get(id)! / Math.abs(c)));
    const limiting = net.find(([id, c]) => sign * c < 0 && start.get(id)! / Math.abs(c) === extent)![0];
    return new Map(
      [...start].map(([id, y]) => {
        const change = net.find(([each]) => each === id)?.[1] ?? 0;
        return [id, id === limiting ? 0 : y + sign * change * extent] as const;
      }),
    );
  };
  const state = (from: ReadonlyMap<string, number>, sign: 1 | -1, distance: number) =>
    new Map(
      [...from].map(([id, y]) => [id, y - sign * (net.find(([each]) => each === id)?.[1] ?? 0) * distance] as const),
    );
  const excess = (Y: ReadonlyMap<string, number>) => {
    const lnProduct = (side: readonly string[]) => side.reduce((sum, id) => sum + Math.log(Y.get(id)!), 0);
    return lnProduct(reactants) - lnProduct(products) - wanted;
  };
  // More of the products than in equilibrium at the start: the end without products is the closer one.
  const sign = excess(start) > 0 ? 1 : -1;
  const from = end(sign);
  const whole = Math.max(...net.map(([id, c]) => Math.abs((start.get(id)! - from.get(id)!) / c)));
  let [low, high] = [Math.log(whole) - 300, Math.log(whole)];
  for (let i = 0; i < 200; i++) {
    const middle = (low + high) / 2;
    if (sign * excess(state(from, sign, Math.exp(middle))) < 0) low = middle;
    else high = middle;
  }
  return state(from, sign, Math.exp(low));
}

/** A clock that stands still at one temperature and density. */
const frozen = (T9: number, rhoN: number): Clock => {
  const constant = (value: number) => ({ value: Float64Array.of(value), slope: Float64Array.of(0) });
  return {
    start: 0,
    step: 1,
    count: 1,
    T9: Float64Array.of(T9),
    lnDtds: constant(0),
    lnRhoN: constant(Math.log(rhoN)),
    lnBaryonShare: constant(-30),
  };
};

/** Flux coefficients of the program for given reactions at one temperature and density, n <-> p switched off. */
function coefficients(names: readonly (readonly [string, string])[], T9: number, rhoN: number) {
  const selected = names.map(([id, evaluationName]) => {
    const rateTable = library.table(id, evaluationName);
    return { reaction: rateTable.reaction, rateTable, evaluationName };
  });
  const data = assembleNetwork("test", selected, (id) => library.nuclide(id));
  const c = new Float64Array(data.compiled.fluxes + 1);
  data.reactions.forEach((reaction, r) => {
    nuclearFluxes(frozen(T9, rhoN), reaction).forEach((flux, side) => {
      c[2 * (r + 1) + side] = Math.exp(flux.at(0, -Math.log(T9)).ln);
    });
  });
  return { data, c };
}

function integrate(
  { data, c }: ReturnType<typeof coefficients>,
  start: ReadonlyMap<string, number>,
  end: number,
): Map<string, number> {
  const { compiled, nuclides } = data;
  const y0 = nuclides.map(({ id }) => start.get(id) ?? 0);
  const stepper = new StiffStepper(
    {
      n: compiled.n,
      rhs: (_, Y, out) => compiled.derivatives(c, Y, out),
      jacobian: (_, Y, out) => compiled.jacobian(c, Y, out),
      timeDerivative: (_, __, out) => out.fill(0),
    },
    0,
    y0,
    end,
    { rtol: 1e-9, atol: 1e-60, firstStep: 1e-8 * end, method: "rodas5p" },
  );
  while (!stepper.done) stepper.step();
  return new Map(nuclides.map(({ id }, i) => [id, stepper.y[i]]));
}

describe("reverse_rates_reach_equilibrium: every reversible reaction alone, from either side, to 1e-6", () => {
  test("there are 143 of them", () => {
    expect(ids).toHaveLength(143);
  });
  test.each(ids)("%s", (id) => {
    const reaction = parseReactionId(id);
    const surplus = reaction.reactants.length - reaction.products.length;
    const involved = [...new Set([...reaction.reactants, ...reaction.products])];
    for (const T9 of TEMPERATURES) {
      // Where density matters, one at which reactants and products are about equally common.
      const rhoN = surplus === 0 ? 1 : 10 * Math.exp(lnSaha(reaction, T9) / surplus);
      const program = coefficients([[id, library.evaluations(id)[0]]], T9, rhoN);
      for (const rich of [reaction.reactants, reaction.products]) {
        const start = new Map(involved.map((each, k) => [each, (rich.includes(each) ? 0.1 : 1e-3) * (1 + 0.3 * k)]));
        const expected = equilibrium(reaction, start, T9, rhoN);
        // Near equilibrium the extent relaxes at flow * sum of change^2/Y; wait for 300 of these times, so that 0.1 has faded below 1e-130.
        const flow = reaction.reactants.reduce((product, each) => product * expected.get(each)!, program.c[2]);
        const rate = [...netChange(reaction)].reduce((sum, [each, c]) => sum + (flow * c * c) / expected.get(each)!, 0);
        const found = integrate(program, start, 300 / rate);
        for (const each of involved)
          expect(
            Math.abs(found.get(each)! / expected.get(each)! - 1),
            `${each} at T9 = ${T9}: found ${found.get(each)}, expected ${expected.get(each)}`,
          ).toBeLessThan(1e-6);
      }
    }
  });
});

describe("a whole network without weak reactions reaches statistical equilibrium", () => {
  const strong = library.network("twelve").filter(({ reaction }) => reaction !== "t_he3");
  test.each([6, 10])("the classic reactions at T9 = %d, to 1e-6", (T9) => {
    const rhoN = 1;
    const kT = K_MEV * T9 * 1e9;
    const program = coefficients(
      strong.map(({ reaction, evaluation }) => [reaction, evaluation]),
      T9,
      rhoN,
    );
    const found = integrate(
      program,
      new Map([
        ["n", 0.3],
        ["p", 0.5],
        ["d", 0.05],
        ["he3", 0.1 / 3],
      ]),
      1e30,
    );
    // mu_i = Z mu_p + N mu_n: Y_i rho_N/G_i = (Y_p rho_N/G_p)^Z (Y_n rho_N/G_n)^N exp(B/kT)
    const lnFugacity = (id: string) => Math.log(found.get(id)! * rhoN) - lnStates(id, kT);
    let nucleons = 0;
    for (const [id, Y] of found) {
      const { A, Z, massExcess } = library.nuclide(id);
      const excess = Z * library.nuclide("p").massExcess + (A - Z) * library.nuclide("n").massExcess - massExcess;
      const expected = Z * lnFugacity("p") + (A - Z) * lnFugacity("n") + excess / 1000 / kT;
      expect(Math.abs(Math.expm1(lnFugacity(id) - expected)), `${id}: Y = ${Y}`).toBeLessThan(1e-6);
      nucleons += A * Y;
    }
    expect(nucleons).toBeCloseTo(1, 10);
  });
});
