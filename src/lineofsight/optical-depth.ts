/** Thomson optical depth, drag depth and conformal time along the line of sight, cumulated over the steps of a history. */
import { LIGHT_SPEED } from "../constants/codata.ts";
import { CM_PER_METRE, CM2_PER_M2, METRE_PER_MPC } from "../constants/units.ts";
import { intervalOf } from "../numerics/interpolate.ts";
import { gaussLegendre } from "../numerics/quadrature.ts";
import { findRoot } from "../numerics/roots.ts";
import { RECOMBINATION_VALUES } from "../recombination/atomic.ts";
import { type IonisationHistory, Z_TOP } from "../recombination/history.ts";
import { reionisedElectrons, totalElectrons } from "../recombination/reionisation.ts";
import { conformalTime } from "./distances.ts";
import { baryonLoading } from "./sound-horizon.ts";

/** Everything that is integrated from today to z. Arguments are ln(1 + z) in [0, ln(1 + Z_TOP)]. */
export interface LineOfSight {
  readonly history: IonisationHistory;
  readonly zRe: number | undefined;
  /** Edges of the panels, ascending. */
  readonly edges: Float64Array;
  /** Optical depth of recombination alone and of reionisation alone at the edges. */
  readonly depthAtEdges: Float64Array;
  /** tau from today, residual ionisation included; with reionisation if there is one and `total`. */
  opticalDepth(logZ: number, total?: boolean): number;
  /** The Thomson integrand divided by R = 3 rho_b/(4 rho_gamma), without reionisation. */
  dragDepth(logZ: number): number;
  /** Conformal time since the beginning [Mpc]. */
  conformalTime(logZ: number): number;
  /** d tau/d ln(1 + z). */
  scattering(logZ: number, total?: boolean): number;
  /** x_e, with reionisation if there is one and `total`. */
  xe(logZ: number, total?: boolean): number;
  /** ln(1 + z) at which a depth reaches 1. */
  unitDepth(which: "optical" | "drag"): number;
}

const POINTS = 5;
/** Widest panel in ln(1 + z). */
const WIDEST = 0.1;

/**
 * d tau/d ln(1 + z) per free electron and hydrogen nucleus: c sigma_T n_H/H.
 * @returns function of ln(1 + z)
 */
export function thomsonPerElectron(history: IonisationHistory): (logZ: number) => number {
  const values = history.inputs.values ?? RECOMBINATION_VALUES;
  const scale = LIGHT_SPEED.value * CM_PER_METRE * values.thomson * CM2_PER_M2 * history.nH0;
  const expansion = new Float64Array(2);
  return (logZ) => {
    history.background.hubbleAndSlope(-logZ, expansion);
    return (scale * Math.exp(3 * logZ)) / expansion[0];
  };
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
  const edges = [...solved, ...even(last, top, WIDEST), top];
  if (zRe === undefined) return Float64Array.from(edges);
  const end = Math.log1p(zRe + 8);
  return Float64Array.from([...even(0, end, 0.02), end, ...edges.filter((x) => x > end + 1e-6)]);
}

/**
 * Cumulates, over the panels of a history and by 5-point Gauss rules,
 * tau(z) = int c sigma_T n_e dt, the drag depth int c sigma_T n_e/R dt and conformal time int c dt/a.
 *
 * @param zRe redshift of reionisation, if any
 * @returns accuracy 1e-7 in tau relative to x_e as given, 1e-9 in conformal time
 */
export function lineOfSight(history: IonisationHistory, zRe?: number): LineOfSight {
  const { background, inputs } = history;
  const perElectron = thomsonPerElectron(history);
  const R0 = baryonLoading(background);
  const edges = panelEdges(history, zRe);
  const n = edges.length;
  const { nodes, weights } = gaussLegendre(POINTS);
  const depth = new Float64Array(n);
  const drag = new Float64Array(n);
  const path = new Float64Array(n);
  const extra = new Float64Array(n);
  const expansion = new Float64Array(2);
  const lightMpc = LIGHT_SPEED.value / METRE_PER_MPC;
  // Panels are those of the history where it was integrated: the interval is known without a search.
  const sameGrid = inputs.model !== "saha" && zRe === undefined;
  const solvedPanels = history.logZ.length - 1;
  const sums = new Float64Array(4);

  function panel(from: number, to: number, interval: number | undefined): void {
    const half = (to - from) / 2;
    const middle = (to + from) / 2;
    sums.fill(0);
    for (let k = 0; k < POINTS; k++) {
      const x = middle + half * nodes[k];
      const w = weights[k] * half;
      const onePlusZ = Math.exp(x);
      background.hubbleAndSlope(-x, expansion);
      const thomson = perElectron(x);
      const xe = history.xeAt(x, interval);
      sums[0] += w * thomson * xe;
      sums[1] += (w * thomson * xe * onePlusZ) / R0;
      sums[2] += (w * lightMpc * onePlusZ) / expansion[0];
      if (zRe !== undefined) {
        const z = onePlusZ - 1;
        sums[3] += w * thomson * (totalElectrons(xe, z, zRe, inputs.fHe) - xe);
      }
    }
  }

  for (let i = 1; i < n; i++) {
    panel(edges[i - 1], edges[i], sameGrid && i <= solvedPanels ? i - 1 : undefined);
    depth[i] = depth[i - 1] + sums[0];
    drag[i] = drag[i - 1] + sums[1];
    path[i] = path[i - 1] + sums[2];
    extra[i] = extra[i - 1] + sums[3];
  }
  const etaTop = conformalTime(background, Z_TOP);
  const pathTop = path[n - 1];

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
    opticalDepth: (x, total = true) => upTo(depth, 0, x) + (total && zRe !== undefined ? upTo(extra, 3, x) : 0),
    dragDepth: (x) => upTo(drag, 1, x),
    conformalTime: (x) => etaTop + pathTop - upTo(path, 2, x),
    scattering: (x, total = true) => perElectron(x) * xe(x, total),
    unitDepth(which) {
      const cumulated = which === "optical" ? depth : drag;
      const i = intervalOf(cumulated, 1);
      return findRoot((x) => upTo(cumulated, which === "optical" ? 0 : 1, x) - 1, edges[i], edges[i + 1], 1e-10);
    },
  };
}

/**
 * Optical depth of reionisation, int c sigma_T n_H x_re dt with the electrons of the tanh form alone (the residual of
 * recombination, about 2e-4 per atom, is not counted).
 * @param zRe redshift of reionisation
 */
export function reionisationDepth(history: IonisationHistory, zRe: number): number {
  const perElectron = thomsonPerElectron(history);
  const { fHe } = history.inputs;
  const top = Math.log1p(zRe + 12);
  const { nodes, weights } = gaussLegendre(POINTS);
  const panels = Math.ceil(top / 0.03);
  let sum = 0;
  for (let i = 0; i < panels; i++)
    for (let k = 0; k < POINTS; k++) {
      const x = (top / panels) * (i + 0.5 + nodes[k] / 2);
      sum += (weights[k] / 2) * (top / panels) * perElectron(x) * reionisedElectrons(Math.expm1(x), zRe, fHe);
    }
  return sum;
}
