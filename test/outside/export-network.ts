/** A network and its thermal history as data for an independent integration in Python. */
import { prepareModel } from "../../src/model/prepare.ts";
import { loadRates } from "../../src/node/load-rates.ts";
import { initialAbundances } from "../../src/nucleosynthesis/run.ts";
import type { Keys } from "../../src/parameters/cosmology.ts";

/**
 * Everything Python receives: data, no formula of ours but the thermal history and the weak rates.
 * @param keys what to choose besides the network, e.g. evaluations
 */
export function exportNetwork(network: string, eta10: number, tauN: number, keys: Keys = {}) {
  const model = prepareModel(loadRates(), { ...keys, network, errors: "none" });
  const context = model.context(model.parameters());
  const { data, table } = context;
  const inputs = { eta10, tauN, tolerance: 1e-8 };
  // Nodes of the table: the clock with the baryons' gravity, density and weak rates of the run.
  const stride = 2 * table.fluxes;
  const s: number[] = [];
  const lnDtds: number[] = [];
  const lnRhoN: number[] = [];
  const lnNToP: number[] = [];
  const lnPToN: number[] = [];
  for (let i = 0; i <= table.intervals; i++) {
    const share = eta10 * table.rows[i * stride + table.fluxes - 1];
    s.push(table.node(i));
    lnDtds.push(context.clock.lnDtds.value[i] - 0.5 * Math.log1p(share));
    lnRhoN.push(context.clock.lnRhoN.value[i] + Math.log(eta10));
    lnNToP.push(context.weakOnClock.lnNToP[i]);
    lnPToN.push(context.weakOnClock.lnPToN[i]);
  }
  const start = initialAbundances(context, inputs).Y;
  const free = (id: string) => start[data.compiled.index.get(id) as number];
  return {
    context,
    inputs,
    input: {
      nuclides: data.nuclides.map((x) => ({ id: x.id, Z: x.Z, A: x.A, spin: x.spin, mass_MeV: x.nuclearMassMeV })),
      reactions: data.reactions.map(({ selected }) => {
        const { reaction, rateTable } = selected;
        const common = { reactants: reaction.reactants, products: reaction.products, kind: rateTable.kind };
        if (rateTable.kind === "table") return { ...common, T9: [...rateTable.T9], rate: [...rateTable.rate] };
        if (rateTable.kind === "reaclib") return { ...common, terms: rateTable.terms };
        return { ...common, rate: rateTable.rate[0] };
      }),
      history: { s, lnDtds, lnRhoN },
      weak: { s, lnNToP, lnPToN },
      tauN,
      freeNeutrons: free("n") / (free("n") + free("p")),
      start: table.start,
      end: table.node(table.intervals),
    },
  };
}
