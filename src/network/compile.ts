/** Turns a list of reactions into flat index arrays: allocation-free derivatives, Jacobian and sparse elimination. */
import { type Elimination, planElimination } from "./elimination.ts";

/** What the compiler needs of a reaction; `n_p`, the weak interchange, is given like any other. */
export interface ReactionStructure {
  readonly id: string;
  readonly reactants: readonly string[];
  readonly products: readonly string[];
}

export interface CompiledReaction {
  readonly id: string;
  /** Nuclide indices, repeated for identical particles. */
  readonly reactants: readonly number[];
  readonly products: readonly number[];
  /** True if the reverse flux is followed (at most three products). */
  readonly reversible: boolean;
}

/**
 * A compiled network. Reaction r has two fluxes, forward 2r and reverse 2r + 1, each a coefficient times the product
 * of its particles' abundances; multiplicities (1/2!, 1/3!) belong to the coefficients.
 */
export interface CompiledNetwork {
  readonly n: number;
  readonly nuclides: readonly string[];
  readonly index: ReadonlyMap<string, number>;
  readonly reactions: readonly CompiledReaction[];
  readonly fluxes: number;
  readonly elimination: Elimination;
  /** dY/ds for coefficients c [1/s-unit of the independent variable] and abundances Y; all caller's arrays. */
  derivatives(c: Float64Array, Y: Float64Array, dYds: Float64Array): void;
  /** Dense row-major Jacobian, for tests and the pivoting fallback. */
  jacobian(c: Float64Array, Y: Float64Array, dfdy: Float64Array): void;
  /** shift I - J into the slots of the elimination. */
  assemble(c: Float64Array, Y: Float64Array, shift: number, values: Float64Array): void;
  /** Structure for code generators and derivative checks. */
  readonly structure: NetworkStructure;
}

export interface NetworkStructure {
  /** Three particles of each flux; n stands for "none" (a factor 1), n + 1 for a flux that is not followed (0). */
  readonly particles: Int32Array;
  /** Net change of each nuclide per reaction: reaction r uses entries start[r] ... start[r+1]. */
  readonly start: Int32Array;
  readonly nuclide: Int32Array;
  readonly change: Float64Array;
}

/** Most particles on a side whose flux is followed. */
const MAX_PARTICLES = 3;

/**
 * Compiles a network.
 * @param nuclides ids in the order of the abundance vector
 * @param reactions with ids of those nuclides only
 * @throws {RangeError} for an unknown nuclide or more than three reactants
 */
export function compileNetwork(nuclides: readonly string[], reactions: readonly ReactionStructure[]): CompiledNetwork {
  const n = nuclides.length;
  const index = new Map(nuclides.map((id, i) => [id, i]));
  const find = (id: string, reaction: string) => {
    const i = index.get(id);
    if (i === undefined) throw new RangeError(`reaction ${reaction}: nuclide ${id} is not in the network`);
    return i;
  };
  const compiled = reactions.map((r): CompiledReaction => {
    if (r.reactants.length > MAX_PARTICLES) throw new RangeError(`reaction ${r.id}: more than three reactants`);
    return {
      id: r.id,
      reactants: r.reactants.map((id) => find(id, r.id)),
      products: r.products.map((id) => find(id, r.id)),
      reversible: r.products.length <= MAX_PARTICLES,
    };
  });
  const count = compiled.length;
  const particles = new Int32Array(6 * count).fill(n);
  const start = new Int32Array(count + 1);
  const nuclide: number[] = [];
  const change: number[] = [];
  const pattern = Array.from({ length: n }, () => new Set<number>());
  compiled.forEach((r, k) => {
    r.reactants.forEach((i, slot) => {
      particles[6 * k + slot] = i;
    });
    if (r.reversible)
      r.products.forEach((i, slot) => {
        particles[6 * k + 3 + slot] = i;
      });
    else particles[6 * k + 3] = n + 1;
    const net = new Map<number, number>();
    for (const i of r.reactants) net.set(i, (net.get(i) ?? 0) - 1);
    for (const i of r.products) net.set(i, (net.get(i) ?? 0) + 1);
    for (const [i, d] of net) {
      if (d === 0) continue;
      nuclide.push(i);
      change.push(d);
      for (const j of r.reactants) pattern[i].add(j);
      if (r.reversible) for (const j of r.products) pattern[i].add(j);
    }
    start[k + 1] = nuclide.length;
  });
  const structure: NetworkStructure = {
    particles,
    start,
    nuclide: Int32Array.from(nuclide),
    change: Float64Array.from(change),
  };
  const elimination = planElimination(pattern);
  const dense = planTargets(structure, count, n, (i, j) => i * n + j);
  const sparse = planTargets(structure, count, n, elimination.slot);
  // Abundances with a trailing 1 and 0, so that every flux is a product of three factors.
  const padded = new Float64Array(n + 2);
  padded[n] = 1;
  const flows = new Float64Array(count);
  const reactionOf = new Int32Array(nuclide.length);
  for (let k = 0; k < count; k++) reactionOf.fill(k, start[k], start[k + 1]);
  return {
    n,
    nuclides,
    index,
    reactions: compiled,
    fluxes: 2 * count,
    elimination,
    structure,
    derivatives(c, Y, dYds) {
      const { nuclide: who, change: by } = structure;
      for (let i = 0; i < n; i++) {
        padded[i] = Y[i];
        dYds[i] = 0;
      }
      for (let k = 0, p = 0; k < count; k++, p += 6)
        flows[k] =
          c[2 * k] * padded[particles[p]] * padded[particles[p + 1]] * padded[particles[p + 2]] -
          c[2 * k + 1] * padded[particles[p + 3]] * padded[particles[p + 4]] * padded[particles[p + 5]];
      for (let e = 0; e < who.length; e++) dYds[who[e]] += by[e] * flows[reactionOf[e]];
    },
    jacobian(c, Y, dfdy) {
      for (let i = 0; i < n; i++) padded[i] = Y[i];
      dfdy.fill(0);
      accumulate(dense, c, padded, dfdy, 1);
    },
    assemble(c, Y, shift, values) {
      for (let i = 0; i < n; i++) padded[i] = Y[i];
      values.fill(0);
      const { diagonal } = elimination;
      for (let i = 0; i < n; i++) values[diagonal[i]] = shift;
      accumulate(sparse, c, padded, values, -1);
    },
  };
}

/** Partial derivatives of the fluxes (flux, two other particles, multiplicity), and every entry they add to. */
interface JacobianPlan {
  readonly flux: Int32Array;
  readonly other1: Int32Array;
  readonly other2: Int32Array;
  readonly multiplicity: Float64Array;
  /** Entry e adds change[e] times partial[source[e]] to target[e]. */
  readonly source: Int32Array;
  readonly target: Int32Array;
  readonly change: Float64Array;
  readonly partial: Float64Array;
}

function planTargets(
  structure: NetworkStructure,
  count: number,
  n: number,
  slot: (i: number, j: number) => number,
): JacobianPlan {
  const flux: number[] = [];
  const other1: number[] = [];
  const other2: number[] = [];
  const multiplicity: number[] = [];
  const source: number[] = [];
  const target: number[] = [];
  const change: number[] = [];
  for (let f = 0; f < 2 * count; f++) {
    const trio = [...structure.particles.subarray(3 * f, 3 * f + 3)];
    const sign = f % 2 === 0 ? 1 : -1;
    for (const j of new Set(trio.filter((i) => i < n))) {
      const rest = [...trio];
      rest.splice(rest.indexOf(j), 1);
      const k = f >> 1;
      for (let e = structure.start[k]; e < structure.start[k + 1]; e++) {
        source.push(flux.length);
        target.push(slot(structure.nuclide[e], j));
        change.push(sign * structure.change[e]);
      }
      flux.push(f);
      other1.push(rest[0]);
      other2.push(rest[1]);
      multiplicity.push(trio.filter((i) => i === j).length);
    }
  }
  return {
    flux: Int32Array.from(flux),
    other1: Int32Array.from(other1),
    other2: Int32Array.from(other2),
    multiplicity: Float64Array.from(multiplicity),
    source: Int32Array.from(source),
    target: Int32Array.from(target),
    change: Float64Array.from(change),
    partial: new Float64Array(flux.length),
  };
}

function accumulate(plan: JacobianPlan, c: Float64Array, padded: Float64Array, out: Float64Array, sign: number): void {
  const { flux, other1, other2, multiplicity, source, target, change, partial } = plan;
  for (let k = 0; k < flux.length; k++)
    partial[k] = sign * multiplicity[k] * c[flux[k]] * padded[other1[k]] * padded[other2[k]];
  for (let e = 0; e < target.length; e++) out[target[e]] += change[e] * partial[source[e]];
}
