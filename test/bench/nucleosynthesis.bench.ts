/** Benchmarks of nucleosynthesis: kernels, warm runs, background, Monte Carlo; counts are printed, answers checked. */
import { bench, describe } from "vitest";
import { prepareModel } from "../../src/model/prepare.ts";
import { generateKernels } from "../../src/network/generate.ts";
import { loadRates } from "../../src/node/load-rates.ts";

const library = loadRates();

function check(Yp: number | undefined): void {
  if (!(Yp !== undefined && Yp > 0.2 && Yp < 0.3)) throw new Error(`benchmark computed nonsense: Y_p = ${Yp}`);
}

for (const network of ["twelve", "standard", "extended", "wide"]) {
  const model = prepareModel(library, { network, errors: "none" });
  const { steps, rejected, factorisations } = model.abundances().solver;
  for (let i = 0; i < 60; i++) model.abundances({ omegaB: 0.022 + 1e-6 * i });
  describe(`${network}: ${steps} steps, ${rejected} rejected, ${factorisations} factorisations`, () => {
    let k = 0;
    bench("warm run of a prepared model, a new omega_b each time", () => {
      check(model.abundances({ omegaB: 0.02 + 1e-6 * (k++ % 4000) }).abundances.Yp?.value);
    });
    const context = model.context(model.parameters());
    const { compiled } = context.data;
    const kernels = generateKernels(compiled);
    if (!kernels) return;
    const c = new Float64Array(compiled.fluxes + 1);
    context.table.values(0.3, c);
    const Y = new Float64Array(compiled.n).fill(1e-3);
    const d = new Float64Array(compiled.n);
    const values = new Float64Array(compiled.elimination.slots);
    bench("one derivative, Jacobian and factorisation", () => {
      kernels.derivatives(c, Y, d);
      kernels.assemble(c, Y, 1e3, values);
      if (!kernels.factor(values)) throw new Error("benchmark: singular matrix");
    });
  });
}

describe("what a changed key costs (twelve, errors none)", () => {
  const model = prepareModel(library, { network: "twelve", errors: "none" });
  let k = 0;
  bench("a new N_eff: background, weak table, flux table and run", () => {
    check(model.abundances({ deltaNEff: 1e-5 * (k++ % 1000) }).abundances.Yp?.value);
  });
  bench("a new xi_e", () => {
    check(model.abundances({ xiE: 1e-6 * (k++ % 1000) }).abundances.Yp?.value);
  });
});

describe("errors", () => {
  const model = prepareModel(library, { network: "twelve" });
  bench("linear errors, twelve", () => {
    check(model.abundances().abundances.Yp?.value);
  });
  const standard = prepareModel(library, { network: "standard" });
  bench("linear errors, standard", () => {
    check(standard.abundances().abundances.Yp?.value);
  });
  bench("Monte Carlo, 1000 samples of twelve", () => {
    check(model.abundances({ samples: 1000, seed: 1 }).abundances.Yp?.value);
  });
});
