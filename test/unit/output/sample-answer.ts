/** Answers made of round numbers, to test how they are shown: not results of a calculation. */
import type { AbundanceResults, Envelope, HistoryResults, Provenance } from "../../../src/output/result.ts";
import { resolveParameters } from "../../../src/parameters/cosmology.ts";
import { makeEnvelope } from "../../../src/requests/envelope.ts";

const provenance: Provenance = {
  network: "twelve",
  rates: [
    {
      reaction: "t_he3",
      evaluation: "reaclib",
      citation: "Collection 2010, J. 1, 2; label",
      uncertaintyBasis: "assumed",
    },
    {
      reaction: "d-p_gamma-he3",
      evaluation: "someone2016",
      citation: "Someone et al. 2016, J. 3, 4",
      uncertaintyBasis: "published",
      scale: 1.02,
    },
    {
      reaction: "li7-p_he4-he4",
      evaluation: "other2004",
      citation: `Other ${"and Others ".repeat(8)}2004, J. 5, 6`,
      uncertaintyBasis: "from memory",
    },
  ],
  corrections: ["coulomb", "radiative"],
  constants: "CODATA 2022",
};
const solver = { steps: 100, rejected: 1, rhs: 600, jacobians: 100, factorisations: 101, tolerance: 1e-5 };

export function sampleAbundances(): Envelope<AbundanceResults> {
  return makeEnvelope(
    "abundances",
    resolveParameters({ omegaB: { value: 0.0224, sigma: 0.0001 }, xiE: 0.1, scales: { "d-p_gamma-he3": 1.02 } }),
    {
      abundances: {
        Yp: { value: 0.25, sigma: 0.0002 },
        dToH: { value: 2.5e-5, sigma: 3e-7 },
        he3ToH: { value: 1e-5, sigma: 2e-7 },
        li6ToH: { value: 0, sigma: 0 },
        li7ToH: { value: 5e-10, sigma: 4e-11 },
      },
      nEffComputed: 3.04,
      correlation: {
        order: ["Yp", "dToH", "he3ToH", "li7ToH"],
        matrix: [
          [1, -0.1, 0.2, 0.3],
          [-0.1, 1, -0.5, -0.6],
          [0.2, -0.5, 1, 0.4],
          [0.3, -0.6, 0.4, 1],
        ],
      },
      assumedVarianceShare: { Yp: 0, dToH: 0.01, he3ToH: 0.1, li7ToH: 0.7 },
    },
    provenance,
    solver,
    ["a warning that says why", "a warning that says why"],
  );
}

/** A table of five times from 0.01 to 1e6 s: straight lines in the logarithms. */
export function sampleHistory(): Envelope<HistoryResults> {
  const columns = ["t_s", "T_K", "T_MeV", "Tnue_over_T", "Tnumu_over_T", "H_per_s", "n_to_p_per_s", "p_to_n_per_s"];
  const nuclides = ["Y_n", "Y_h1", "Y_d", "Y_t", "Y_he3", "Y_he4", "Y_be7"];
  const rows = [0.01, 1, 100, 1e4, 1e6].map((t, i) => {
    const T = 1 / Math.sqrt(t);
    const Y = [0.4 / 10 ** i, 0.6, 1e-12 * 10 ** (2 * i), 1e-8, 1e-5, 0.06, i === 0 ? 0 : 1e-10];
    return [t, 1.16e10 * T, T, i < 2 ? 1 : 0.72, i < 2 ? 1 : 0.71, 1 / (2 * t), T ** 5 + 0.001, T ** 5, ...Y];
  });
  return makeEnvelope(
    "history",
    resolveParameters({}),
    {
      table: {
        columns: [...columns, ...nuclides],
        units: ["s", "K", "MeV", "1", "1", "1/s", "1/s", "1/s", ...nuclides.map(() => "1")],
        rows,
      },
      milestones: {
        tAt1MeV_s: 1,
        freezeOutTemperature_MeV: 0.7,
        neutronToProtonAtFreezeOut: 0.28,
        tDeuteriumPeak_s: 250,
        T9DeuteriumPeak: 0.8,
        tAt1e9K_s: 170,
        photonToNeutrinoTemperature: 1.4,
      },
    },
    provenance,
    solver,
    [],
  );
}
