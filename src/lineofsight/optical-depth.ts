/** Thomson optical depth, drag depth, conformal time and photon diffusion along the line of sight, cumulated over the steps of a history. */
import { LIGHT_SPEED } from "../constants/codata.ts";
import { CM_PER_METRE, CM2_PER_M2, METRE_PER_MPC } from "../constants/units.ts";
import { CalculationError } from "../numerics/check.ts";
import { intervalOf } from "../numerics/interpolate.ts";
import { gaussLegendre } from "../numerics/quadrature.ts";
import { findRoot } from "../numerics/roots.ts";
import { RECOMBINATION_VALUES } from "../recombination/atomic.ts";
import { type IonisationHistory, Z_TOP } from "../recombination/history.ts";
import { totalElectrons } from "../recombination/reionisation.ts";
import { conformalTime } from "./distances.ts";
import { baryonLoading } from "./sound-horizon.ts";

/** Everything that is integrated from today to z. Arguments are ln(1 + z), from 0 to ln(1 + 1e7). */
export interface LineOfSight {
  readonly history: IonisationHistory;
  readonly zRe: number | undefined;
  /** Edges of the panels, ascending. */
  readonly edges: Float64Array;
  /** Optical depth of recombination alone at the edges. */
  readonly depthAtEdges: Float64Array;
  /** tau from today, residual ionisation included; with reionisation if there is one and `total`. */
  opticalDepth(logZ: number, total?: boolean): number;
  /** The Thomson integrand divided by R = 3 rho_b/(4 rho_gamma), without reionisation. */
  dragDepth(logZ: number): number;
  /** Conformal time since the beginning [Mpc]. */
  conformalTime(logZ: number): number;
  /** int_z^(1e7) c dz/H [R^2 + (16/15)(1 + R)]/[6 (1 + R)^2 a n_e sigma_T], without reionisation [Mpc^2]. */
  diffusion(logZ: number): number;
  /** d tau/d ln(1 + z). */
  scattering(logZ: number, total?: boolean): number;
  /** x_e, with reionisation if there is one and `total`. */
  xe(logZ: number, total?: boolean): number;
  /** ln(1 + z) at which a depth reaches 1. */
  unitDepth(which: "optical" | "drag"): number;
}

const POINTS = 3;
/** Widest panels in ln(1 + z), below and above the highest redshift of the tables. */
const WIDEST = 0.1;
const WIDEST_ABOVE = 0.35;
/** Redshift up to which everything is integrated; what is left out of the diffusion is 1e-9 of it. */
const Z_FAR = 1e7;

/**
 * d tau/d ln(1 + z) per free electron and hydrogen nucleus: c sigma_T n_H/H.
 * @returns function of ln(1 + z)
 */
export function thomsonPerElectron(history: IonisationHistory): (logZ: number) => number {
  const scale = thomsonScale(history);
  const expansion = new Float64Array(2);
  return (logZ) => {
    const onePlusZ = Math.exp(logZ);
    history.background.hubbleAndSlope(-logZ, expansion, 1 / onePlusZ);
    return (scale * onePlusZ * onePlusZ * onePlusZ) / expansion[0];
  };
}

/** c sigma_T n_H today [1/s]. */
function thomsonScale(history: IonisationHistory): number {
  const values = history.inputs.values ?? RECOMBINATION_VALUES;
  return LIGHT_SPEED.value * CM_PER_METRE * values.thomson * CM2_PER_M2 * history.nH0;
}

/**
 * Weight of photon diffusion, [R^2 + (16/15)(1 + R)]/[6 (1 + R)^2].
 * @see Kaiser 1983, MNRAS 202, 1169; Zaldarriaga & Harari 1995, PRD 52, 3276
 */
export function diffusionWeight(R: number): number {
  return (R * R + (16 / 15) * (1 + R)) / (6 * (1 + R) * (1 + R));
}

/** Panel edges: the steps of the integration below its start, then even panels; finer where reionisation happens. */
function panelEdges(history: IonisationHistory, zRe: number | undefined): Float64Array {
  const top = Math.log1p(Z_TOP);
  const even = (from: number, to: number, widest: number) => {
    const n = Math.max(1, Math.ceil((to - from) / widest - 1e-9));
    return Array.from({ length: n }, (_, i) => from + ((to - from) * i) / n);
  };
  const solved = history.inputs.model !== "saha" ? [...history.logZ] : even(0, Math.log1p(history.zStart), 0.01);
  const last = history.inputs.model !== "saha" ? (solved.pop() as number) : Math.log1p(history.zStart);
  const far = Math.log1p(Z_FAR);
  const edges = [...solved, ...even(last, top, WIDEST), ...even(top, far, WIDEST_ABOVE), far];
  if (zRe === undefined) return Float64Array.from(edges);
  const end = Math.log1p(zRe + 8);
  return Float64Array.from([...even(0, end, 0.02), end, ...edges.filter((x) => x > end + 1e-6)]);
}

/** Where each integral stands in the sums of a panel. */
const SUM = { depth: 0, drag: 1, path: 2, diffusion: 3, reionised: 4, size: 5 } as const;

/**
 * Cumulates, over the panels of a history and by 4-point Gauss rules,
 * tau(z) = int c sigma_T n_e dt, the drag depth int c sigma_T n_e/R dt, conformal time int c dt/a, and diffusion.
 *
 * @param zRe redshift of reionisation, if any
 * @returns accuracy 1e-7 in tau relative to x_e as given, 1e-9 in conformal time
 */
export function lineOfSight(history: IonisationHistory, zRe?: number): LineOfSight {
  const { background, inputs } = history;
  const scale = thomsonScale(history);
  const perElectron = thomsonPerElectron(history);
  const R0 = baryonLoading(background);
  const edges = panelEdges(history, zRe);
  const n = edges.length;
  const { nodes, weights } = gaussLegendre(POINTS);
  const depth = new Float64Array(n);
  const drag = new Float64Array(n);
  const path = new Float64Array(n);
  const diffusion = new Float64Array(n);
  const reionised = new Float64Array(n);
  const expansion = new Float64Array(2);
  const lightMpc = LIGHT_SPEED.value / METRE_PER_MPC;
  // Panels are those of the history where it was integrated: the interval is known without a search.
  const sameGrid = inputs.model !== "saha" && zRe === undefined;
  const solvedPanels = history.logZ.length - 1;
  const sums = new Float64Array(SUM.size);

  function panel(from: number, to: number, interval: number | undefined): void {
    const half = (to - from) / 2;
    const middle = (to + from) / 2;
    sums.fill(0);
    for (let k = 0; k < POINTS; k++) {
      const x = middle + half * nodes[k];
      const w = weights[k] * half;
      const onePlusZ = Math.exp(x);
      background.hubbleAndSlope(-x, expansion, 1 / onePlusZ);
      const thomson = (scale * onePlusZ * onePlusZ * onePlusZ) / expansion[0];
      const xe = history.xeAt(x, interval);
      const R = R0 / onePlusZ;
      // c (1+z)/H: comoving distance per ln(1 + z); its square over d tau/d ln(1 + z) is that of the diffusion.
      const step = (lightMpc * onePlusZ) / expansion[0];
      sums[SUM.depth] += w * thomson * xe;
      sums[SUM.drag] += (w * thomson * xe) / R;
      sums[SUM.path] += w * step;
      sums[SUM.diffusion] += (w * diffusionWeight(R) * step * step) / (thomson * xe);
      if (zRe !== undefined) {
        const z = onePlusZ - 1;
        sums[SUM.reionised] += w * thomson * (totalElectrons(xe, z, zRe, inputs.fHe) - xe);
      }
    }
  }

  for (let i = 1; i < n; i++) {
    panel(edges[i - 1], edges[i], sameGrid && i <= solvedPanels ? i - 1 : undefined);
    depth[i] = depth[i - 1] + sums[SUM.depth];
    drag[i] = drag[i - 1] + sums[SUM.drag];
    path[i] = path[i - 1] + sums[SUM.path];
    diffusion[i - 1] = sums[SUM.diffusion];
    reionised[i] = reionised[i - 1] + sums[SUM.reionised];
  }
  // Summed from the top, where it is small, down: from today up its first terms would drown the rest.
  for (let i = n - 2; i >= 0; i--) diffusion[i] += diffusion[i + 1];
  const etaFar = conformalTime(background, Z_FAR);
  const pathFar = path[n - 1];

  /** Integral from today: the panels before, then a part of one. */
  function upTo(cumulated: Float64Array, which: number, x: number): number {
    const i = intervalOf(edges, x);
    if (x === edges[i]) return cumulated[i];
    if (x === edges[i + 1]) return cumulated[i + 1];
    panel(edges[i], x, undefined);
    return cumulated[i] + sums[which];
  }

  const xe = (x: number, total = true) => {
    const residual = history.xeAt(x);
    return total && zRe !== undefined ? totalElectrons(residual, Math.expm1(x), zRe, inputs.fHe) : residual;
  };
  return {
    history,
    zRe,
    edges,
    depthAtEdges: depth,
    xe,
    opticalDepth: (x, total = true) =>
      upTo(depth, SUM.depth, x) + (total && zRe !== undefined ? upTo(reionised, SUM.reionised, x) : 0),
    dragDepth: (x) => upTo(drag, SUM.drag, x),
    conformalTime: (x) => etaFar + pathFar - upTo(path, SUM.path, x),
    diffusion(x) {
      const i = intervalOf(edges, x);
      panel(x, edges[i + 1], undefined);
      return diffusion[i + 1] + sums[SUM.diffusion];
    },
    scattering: (x, total = true) => perElectron(x) * xe(x, total),
    unitDepth(which) {
      const [cumulated, sum] = which === "optical" ? [depth, SUM.depth] : [drag, SUM.drag];
      if (!(cumulated[n - 1] > 1))
        throw new CalculationError(
          "transparent",
          `the ${which} depth of recombination does not reach 1 below z = ${Z_FAR}`,
        );
      const i = intervalOf(cumulated, 1);
      return findRoot((x) => upTo(cumulated, sum, x) - 1, edges[i], edges[i + 1], 1e-10);
    },
  };
}
