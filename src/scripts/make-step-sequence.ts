/**
 * Writes src/nucleosynthesis/steps.generated.ts: one sequence of steps for eta10 1 to 20, and the largest error
 * estimates it shows there. Takes some minutes. Run: npx tsx src/scripts/make-step-sequence.ts [--steps 120] [--trials N]
 */
import { writeFileSync } from "node:fs";
import { parseArgs } from "node:util";
import { prepareModel } from "../model/prepare.ts";
import { generateKernels } from "../network/generate.ts";
import { loadRates } from "../node/load-rates.ts";
import { finalAbundances } from "../nucleosynthesis/abundances.ts";
import { absoluteTolerances } from "../nucleosynthesis/error-scale.ts";
import { FluxTable } from "../nucleosynthesis/flux-table.ts";
import { marchAdaptively } from "../nucleosynthesis/march-run.ts";
import { fluxScale, initialAbundances, runNetwork } from "../nucleosynthesis/run.ts";
import { STEP_SEQUENCE } from "../nucleosynthesis/steps.generated.ts";
import { marchStored } from "../nucleosynthesis/stored-steps.ts";
import { DEFAULTS } from "../parameters/cosmology.ts";
import { densityOf, placeNodes, searchNodes, smoothed } from "./step-search.ts";

const { values } = parseArgs({ options: { steps: { type: "string" }, trials: { type: "string" } } });
const STEPS = Number(values.steps ?? 120);
const TRIALS = Number(values.trials ?? 8000);
const ETAS = [0, 0.1, 0.2, 0.3, 0.38, 0.46, 0.54, 0.62, 0.7, 0.8, 0.9, 1].map((u) => 20 ** u);
/** Weight of each abundance's relative error in the score. */
const WEIGHTS = {
  Yp: 1,
  dToH: 1,
  tToH: 1,
  he3ToH: 1,
  li6ToH: 1,
  li7ToH: 1,
  be9ToH: 0.8,
  b10ToH: 0.8,
  b11ToH: 0.8,
  cnoToH: 0.8,
} as const;
/** Room above the largest estimate seen, before a run is taken to have left the checked range. */
const MARGIN = 4;
const RTOL = DEFAULTS.tolerance;
const writable = STEP_SEQUENCE as { nodes: number[]; limits: number[] };

function setting(network: string) {
  const model = prepareModel(loadRates(), { network, errors: "none" });
  const p = model.parameters();
  const context = model.context(p);
  const kernels = generateKernels(context.data.compiled);
  if (!kernels) throw new Error("code generation is not available");
  const ids = context.data.nuclides.map((x) => x.id);
  const cases = ETAS.map((eta10) => ({
    eta10,
    start: initialAbundances(context, { eta10, tauN: p.tauN, tolerance: 1e-7 }).Y,
    exact: finalAbundances(
      context.data.nuclides,
      runNetwork(context, { eta10, tauN: p.tauN, tolerance: 1e-8 }).Y,
      true,
    ),
    scale: fluxScale(context.data.compiled, context.table, { eta10, tauN: p.tauN, tolerance: RTOL }),
    atol: absoluteTolerances(ids, eta10, RTOL),
  }));
  return { context, kernels, cases, slots: context.data.compiled.elimination.slots };
}

type Setting = ReturnType<typeof setting>;

/** Worst weighted error of a sequence over all eta, and the estimates of its steps. */
function assess({ context, kernels, cases, slots }: Setting, nodes: number[], estimates?: Float64Array): number {
  writable.nodes = nodes;
  // A new table object: rows are kept by table.
  const table = Object.assign(Object.create(FluxTable.prototype), context.table) as FluxTable;
  let worst = 0;
  let sum = 0;
  for (const { eta10, start, exact, scale, atol } of cases) {
    const y = start.slice();
    const unlimited = nodes.map(() => Number.MAX_VALUE);
    const done = marchStored(kernels, slots, table, y, scale, eta10, RTOL, atol, undefined, unlimited, (k, e) => {
      if (estimates) estimates[k] = Math.max(estimates[k], e);
    });
    if (!done) return 1e9;
    const found = finalAbundances(context.data.nuclides, y, true);
    for (const [name, weight] of Object.entries(WEIGHTS)) {
      const reference = exact[name as keyof typeof WEIGHTS] as number;
      if (!(reference > 0)) continue;
      const error = weight * Math.abs((found[name as keyof typeof WEIGHTS] as number) / reference - 1);
      if (!(error < 1e9)) return 1e9;
      worst = Math.max(worst, error);
      sum += error / cases.length;
    }
  }
  return worst + 0.05 * sum;
}

/** Steps that the adaptive method takes at a looser tolerance. */
function adaptiveNodes({ context, kernels, cases, slots }: Setting, i: number): number[] {
  const { eta10, start, scale, atol } = cases[i];
  const nodes: number[] = [];
  const { table } = context;
  marchAdaptively(
    kernels,
    slots,
    table,
    start.slice(),
    scale,
    eta10,
    1e-3,
    atol.map((x) => 5 * x),
    (s) => nodes.push(s),
  );
  return [...nodes, table.start + table.step * table.intervals];
}

const twelve = setting("twelve");
const { table } = twelve.context;
const end = table.start + table.step * table.intervals;
const grid = Float64Array.from({ length: 2001 }, (_, i) => table.start + ((end - table.start) * i) / 2000);
const densities = ETAS.map((_, i) => smoothed(densityOf(adaptiveNodes(twelve, i), grid), grid, 0.1));
const mean = grid.map((_, i) => (densities.reduce((sum, d) => sum + d[i] ** 4, 0) / densities.length) ** 0.25);
const base = smoothed(mean, grid, 0.1);
process.stderr.write(`start: ${assess(twelve, placeNodes(base, grid, STEPS)).toExponential(2)}\n`);
const light = searchNodes(base, grid, STEPS, (nodes) => assess(twelve, nodes), {
  knots: 44,
  trials: TRIALS,
  seed: 20261201,
});
process.stderr.write(`twelve: ${light.score.toExponential(2)} with ${STEPS} steps\n`);
// The heavier nuclides of standard need steps elsewhere too: go on from there with all of them in the score.
const standard = setting("standard");
const shape = smoothed(densityOf(light.nodes, grid), grid, 0.01);
const found = searchNodes(shape, grid, STEPS, (nodes) => assess(standard, nodes), {
  knots: 56,
  trials: Math.ceil(TRIALS / 2),
  seed: 20261202,
});
process.stderr.write(`standard: ${found.score.toExponential(2)}\n`);
const nodes = found.nodes.map((x) => Number(x.toFixed(6)));
const limits = new Float64Array(nodes.length - 1);
for (const network of ["twelve", "standard", "extended", "wide"])
  process.stderr.write(`${network}: ${assess(setting(network), nodes, limits).toExponential(2)}\n`);
writeFileSync(
  new URL("../nucleosynthesis/steps.generated.ts", import.meta.url),
  `/** Generated by src/scripts/make-step-sequence.ts: do not edit. Nodes in s = -ln T9; limits of the error estimates. */
export const STEP_SEQUENCE: { readonly nodes: readonly number[]; readonly limits: readonly number[] } = {
  nodes: ${JSON.stringify(nodes)},
  limits: ${JSON.stringify([...limits].map((x) => Number((MARGIN * Math.max(x, 0.25)).toPrecision(2))))},
};
`,
);
