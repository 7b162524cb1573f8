/** Discrete adjoint of the written-out Rosenbrock step: gradients of final quantities with respect to every flux. */
import { RODAS4 } from "../numerics/rosenbrock-coefficients.ts";
import type { CompiledNetwork, NetworkStructure } from "./compile.ts";
import type { Elimination } from "./elimination.ts";

const { a, C, c: C_POINTS, d: D } = RODAS4;
const STAGES = 6;

/** One accepted step as recorded: state, stages, factors and the flux rows of the stages. */
export interface RecordedStep {
  readonly s: number;
  readonly h: number;
  readonly y: Float64Array;
  readonly u: readonly Float64Array[];
  readonly factors: Float64Array;
  /** Flux coefficients at the stages' points (six references, the last two the same) and their slope at the start. */
  readonly rows: readonly Float64Array[];
  readonly slope: Float64Array;
}

/** How a parameter enters the fluxes: d ln c_f/d parameter at s, and the slope of that in s, written for every flux. */
export interface ReactionWeight {
  load(s: number, value: Float64Array, slope: Float64Array): void;
}

/**
 * Solves (LU)^T x = b in place for several right-hand sides at once, b[row * width + x], with the factors of the
 * elimination (inverse diagonal).
 */
export function transposedSolver(plan: Elimination): (values: Float64Array, b: Float64Array, width: number) => void {
  const { forward, backward } = plan;
  const lower: number[] = [];
  for (let at = 0; at < forward.length; at += 2 + 2 * forward[at + 1]) lower.push(at);
  const upper: number[] = [];
  for (let at = 0; at < backward.length; at += 3 + 2 * backward[at + 2]) upper.push(at);
  lower.reverse();
  upper.reverse();
  return (values, b, width) => {
    for (const at of upper) {
      const row = backward[at] * width;
      const inverse = values[backward[at + 1]];
      for (let x = 0; x < width; x++) b[row + x] *= inverse;
      const end = at + 3 + 2 * backward[at + 2];
      for (let e = at + 3; e < end; e += 2) {
        const value = values[backward[e]];
        const target = backward[e + 1] * width;
        for (let x = 0; x < width; x++) b[target + x] -= value * b[row + x];
      }
    }
    for (const at of lower) {
      const row = forward[at] * width;
      const end = at + 2 + 2 * forward[at + 1];
      for (let e = at + 2; e < end; e += 2) {
        const value = values[forward[e]];
        const target = forward[e + 1] * width;
        for (let x = 0; x < width; x++) b[target + x] -= value * b[row + x];
      }
    }
  };
}

/** A flux that is followed: its particles and how many they are. */
interface FollowedFlux {
  readonly f: number;
  readonly sign: 1 | -1;
  readonly p0: number;
  readonly p1: number;
  readonly p2: number;
  readonly bodies: number;
}

function followedFluxes({ particles }: NetworkStructure, count: number, n: number): FollowedFlux[] {
  const list: FollowedFlux[] = [];
  for (let f = 0; f < 2 * count; f++) {
    const trio = [...particles.subarray(3 * f, 3 * f + 3)];
    if (trio.includes(n + 1)) continue;
    // "None" (n) always comes after the particles.
    const bodies = trio.filter((i) => i < n).length;
    list.push({ f, sign: f % 2 === 0 ? 1 : -1, p0: trio[0], p1: trio[1], p2: trio[2], bodies });
  }
  return list;
}

/**
 * Propagates adjoints backward through recorded steps and accumulates gradients.
 *
 * With M = I/(h gamma) - J, stages M u_i = g_i and y1 = y + sum b_i u_i, the adjoint v_i = M^-T ubar_i carries
 * J(w_i)^T v_i to the stage argument, (C_ij/h) v_i to earlier stages, and the second derivative of the fluxes along u_i
 * to y, since M depends on y. The gradient with respect to ln c_f collects v_i . S_f times the flux at w_i, its slope
 * term and its derivative along u_i. Exact for the discrete solution: it agrees with differences of it to their noise.
 *
 * @param steps in the order taken
 * @param lambda lambda[x] = d quantity_x/dY at the end; overwritten by d quantity_x/dY at the start
 * @param weights each weight q turns into one parameter per reaction (both directions together)
 * @returns gradient[x][q * reactions + k] = d quantity_x/d parameter q of reaction k
 * @see Sandu 2011, in Automatic Differentiation (discrete adjoints of Rosenbrock methods); derived here stage by stage
 */
export function adjointGradients(
  network: CompiledNetwork,
  steps: readonly RecordedStep[],
  lambda: readonly Float64Array[],
  weights: readonly ReactionWeight[],
): Float64Array[] {
  const { n, structure, elimination, reactions } = network;
  const { particles, start, nuclide, change } = structure;
  const count = reactions.length;
  const solve = transposedSolver(elimination);
  const parameters = weights.length;
  // Quantities side by side: entry (k, x) of a nuclide or reaction k and quantity x stands at k * width + x.
  const width = lambda.length;
  const size = n * width;
  const sums = new Float64Array(parameters * count * width);
  const padded = (fill: number) => {
    const array = new Float64Array(n + 2);
    array[n] = fill;
    return array;
  };
  const Y = padded(1);
  const W = Array.from({ length: STAGES }, () => padded(1));
  const U = Array.from({ length: STAGES }, () => padded(0));
  const bar = Array.from({ length: STAGES }, () => new Float64Array(size));
  const ybar = new Float64Array(size);
  lambda.forEach((l, x) => {
    for (let k = 0; k < n; k++) ybar[k * width + x] = l[k];
  });
  const wbar = new Float64Array(size);
  const flow = new Float64Array(count * width);
  const followed = followedFluxes(structure, count, n);
  // term[i][q * count + k]: what v_i . S_k multiplies in the gradient of reaction k by parameter q.
  const term = Array.from({ length: STAGES }, () => new Float64Array(parameters * count));
  const fluxes = 2 * count;
  const [atStage, atStart, drift, late, unused] = Array.from({ length: 5 }, () => new Float64Array(fluxes));
  const [earlies, rises] = [0, 1].map(() => weights.map(() => new Float64Array(fluxes)));
  for (let at = steps.length - 1; at >= 0; at--) {
    const step = steps[at];
    const { h, rows, slope, factors } = step;
    Y.set(step.y);
    for (let i = 0; i < STAGES; i++) U[i].set(step.u[i]);
    for (let i = 0; i < STAGES; i++) {
      const w = W[i];
      w.set(step.y);
      const coefficients = i < a.length ? a[i] : a[a.length - 1];
      for (let j = 0; j < coefficients.length; j++) for (let k = 0; k < n; k++) w[k] += coefficients[j] * U[j][k];
      if (i === 5) for (let k = 0; k < n; k++) w[k] += U[4][k];
    }
    weights.forEach((weight, q) => {
      weight.load(step.s, earlies[q], rises[q]);
    });
    // The three parts of every flux at every stage, then their weighted sums for each parameter and reaction.
    for (let i = 0; i < STAGES; i++) {
      const c = rows[i];
      const c0 = rows[0];
      const hd = h * D[i];
      const w = W[i];
      const u = U[i];
      for (let f = 0, p = 0; f < fluxes; f++, p += 3) {
        const p0 = particles[p];
        const p1 = particles[p + 1];
        const p2 = particles[p + 2];
        const sign = f % 2 === 0 ? 1 : -1;
        const product = sign * Y[p0] * Y[p1] * Y[p2];
        const along = u[p0] * Y[p1] * Y[p2] + Y[p0] * u[p1] * Y[p2] + Y[p0] * Y[p1] * u[p2];
        atStage[f] = sign * c[f] * w[p0] * w[p1] * w[p2];
        atStart[f] = hd * slope[f] * product + sign * c0[f] * along;
        drift[f] = hd * c0[f] * product;
      }
      const point = step.s + (i < 4 ? C_POINTS[i] : 1) * h;
      const terms = term[i];
      for (let q = 0; q < parameters; q++) {
        weights[q].load(point, late, unused);
        const early = earlies[q];
        const rise = rises[q];
        for (let f = 0; f < fluxes; f++) {
          const value = atStage[f] * late[f] + atStart[f] * early[f] + drift[f] * rise[f];
          const e = q * count + (f >> 1);
          if (f % 2 === 0) terms[e] = value;
          else terms[e] += value;
        }
      }
    }
    const last = a[a.length - 1];
    for (let i = 0; i < STAGES; i++) {
      const b = i < last.length ? last[i] : 1;
      const bi = bar[i];
      for (let e = 0; e < size; e++) bi[e] = b * ybar[e];
    }
    for (let i = STAGES - 1; i >= 0; i--) {
      const v = bar[i];
      solve(factors, v, width);
      // v . S_k for every reaction.
      for (let k = 0; k < count; k++) {
        const row = k * width;
        for (let x = 0; x < width; x++) flow[row + x] = 0;
        for (let e = start[k]; e < start[k + 1]; e++) {
          const by = change[e];
          const from = nuclide[e] * width;
          for (let x = 0; x < width; x++) flow[row + x] += by * v[from + x];
        }
      }
      const terms = term[i];
      for (let q = 0, e = 0; q < parameters; q++)
        for (let k = 0; k < count; k++, e++) {
          const value = terms[e];
          const row = k * width;
          const into = e * width;
          for (let x = 0; x < width; x++) sums[into + x] += flow[row + x] * value;
        }
      // J(w_i)^T v to the stage argument; slope and second-derivative terms to y alone.
      wbar.fill(0);
      const c = rows[i];
      const c0 = rows[0];
      const hd = h * D[i];
      const w = W[i];
      const u = U[i];
      for (const { f, sign, p0, p1, p2, bodies } of followed) {
        const direct = sign * c[f];
        const sloping = sign * hd * slope[f];
        const along = sign * c0[f];
        const row = (f >> 1) * width;
        const r0 = p0 * width;
        if (bodies === 1) {
          for (let x = 0; x < width; x++) {
            wbar[r0 + x] += flow[row + x] * direct;
            ybar[r0 + x] += flow[row + x] * sloping;
          }
        } else if (bodies === 2) {
          const r1 = p1 * width;
          const w0 = direct * w[p1];
          const w1 = direct * w[p0];
          const y0 = sloping * Y[p1] + along * u[p1];
          const y1 = sloping * Y[p0] + along * u[p0];
          for (let x = 0; x < width; x++) {
            const s = flow[row + x];
            wbar[r0 + x] += s * w0;
            wbar[r1 + x] += s * w1;
            ybar[r0 + x] += s * y0;
            ybar[r1 + x] += s * y1;
          }
        } else {
          const r1 = p1 * width;
          const r2 = p2 * width;
          const w0 = direct * w[p1] * w[p2];
          const w1 = direct * w[p0] * w[p2];
          const w2 = direct * w[p0] * w[p1];
          const y0 = sloping * Y[p1] * Y[p2] + along * (u[p1] * Y[p2] + Y[p1] * u[p2]);
          const y1 = sloping * Y[p0] * Y[p2] + along * (u[p0] * Y[p2] + Y[p0] * u[p2]);
          const y2 = sloping * Y[p0] * Y[p1] + along * (u[p0] * Y[p1] + Y[p0] * u[p1]);
          for (let x = 0; x < width; x++) {
            const s = flow[row + x];
            wbar[r0 + x] += s * w0;
            wbar[r1 + x] += s * w1;
            wbar[r2 + x] += s * w2;
            ybar[r0 + x] += s * y0;
            ybar[r1 + x] += s * y1;
            ybar[r2 + x] += s * y2;
          }
        }
      }
      for (let e = 0; e < size; e++) ybar[e] += wbar[e];
      const coefficients = i < a.length ? a[i] : last;
      for (let j = 0; j < coefficients.length; j++) {
        const aij = coefficients[j];
        const bj = bar[j];
        for (let e = 0; e < size; e++) bj[e] += aij * wbar[e];
      }
      if (i === 5) for (let e = 0; e < size; e++) bar[4][e] += wbar[e];
      for (let j = 0; j < i; j++) {
        const cij = C[i][j] / h;
        const bj = bar[j];
        for (let e = 0; e < size; e++) bj[e] += cij * v[e];
      }
    }
  }
  lambda.forEach((l, x) => {
    for (let k = 0; k < n; k++) l[k] = ybar[k * width + x];
  });
  return lambda.map((_, x) => Float64Array.from({ length: parameters * count }, (__, e) => sums[e * width + x]));
}
