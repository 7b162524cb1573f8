/** Symbolic sparse LU without pivoting: an elimination order, the fill-in, and flat programs that factor and solve. */

/** A sparse matrix of fixed pattern, stored as one value a slot, with everything needed to factor it in place. */
export interface Elimination {
  readonly n: number;
  /** Slots of the matrix including fill-in. */
  readonly slots: number;
  /** order[k] = row and column eliminated at step k. */
  readonly order: Int32Array;
  /** slot of entry (i, j), or -1. */
  slot(i: number, j: number): number;
  readonly diagonal: Int32Array;
  /**
   * The factorisation as a flat program. For each step k: pivot slot, number of rows below; for each row: the slot of
   * its entry in column k, number of updates; for each update: target slot, source slot.
   */
  readonly program: Int32Array;
  /** Strictly lower entries in elimination order, per row: row, count, then (slot, column) pairs. */
  readonly forward: Int32Array;
  /** Strictly upper entries in reverse elimination order, per row: row, diagonal slot, count, then (slot, column) pairs. */
  readonly backward: Int32Array;
  /** Multiply-add operations of one factorisation and of one solve. */
  readonly factorOperations: number;
  readonly solveOperations: number;
}

/**
 * Chooses an elimination order by the least product of row and column counts (Markowitz 1957, Management Science 3,
 * 255) on the structure alone, and writes the programs. Nuclides that react with everything (n, p, he4) end up last.
 * @param pattern pattern[i] = set of columns of row i; the diagonal is added
 */
export function planElimination(pattern: readonly ReadonlySet<number>[]): Elimination {
  const n = pattern.length;
  const rows = pattern.map((set, i) => new Set([...set, i]));
  const columns = rows.map(() => new Set<number>());
  rows.forEach((set, i) => {
    for (const j of set) columns[j].add(i);
  });
  const alive = new Set(rows.keys());
  const active = (set: Set<number>) => [...set].filter((j) => alive.has(j)).length - 1;
  const order: number[] = [];
  while (alive.size > 0) {
    let best = -1;
    let cost = Number.POSITIVE_INFINITY;
    for (const k of alive) {
      const c = active(rows[k]) * active(columns[k]);
      if (c < cost) {
        cost = c;
        best = k;
      }
    }
    alive.delete(best);
    order.push(best);
    for (const i of columns[best]) {
      if (!alive.has(i)) continue;
      for (const j of rows[best]) {
        if (!alive.has(j)) continue;
        rows[i].add(j);
        columns[j].add(i);
      }
    }
  }
  const position = new Int32Array(n);
  for (let k = 0; k < n; k++) position[order[k]] = k;
  const table = new Int32Array(n * n).fill(-1);
  let slots = 0;
  for (const i of order)
    for (const j of [...rows[i]].sort((a, b) => position[a] - position[b])) table[i * n + j] = slots++;
  const slot = (i: number, j: number) => table[i * n + j];

  const program: number[] = [];
  let factorOperations = 0;
  for (let k = 0; k < n; k++) {
    const pivot = order[k];
    const below = order.slice(k + 1).filter((i) => slot(i, pivot) >= 0);
    const right = order.slice(k + 1).filter((j) => slot(pivot, j) >= 0);
    program.push(slot(pivot, pivot), below.length);
    for (const i of below) {
      program.push(slot(i, pivot), right.length);
      for (const j of right) program.push(slot(i, j), slot(pivot, j));
      factorOperations += 1 + right.length;
    }
  }
  const forward: number[] = [];
  const backward: number[] = [];
  let solveOperations = n;
  for (let k = 0; k < n; k++) {
    const i = order[k];
    const left = order.slice(0, k).filter((j) => slot(i, j) >= 0);
    if (left.length > 0) {
      forward.push(i, left.length);
      for (const j of left) forward.push(slot(i, j), j);
    }
    solveOperations += left.length;
  }
  for (let k = n - 1; k >= 0; k--) {
    const i = order[k];
    // From the last column back: the order in which a column-wise substitution subtracts them.
    const right = order
      .slice(k + 1)
      .filter((j) => slot(i, j) >= 0)
      .reverse();
    backward.push(i, slot(i, i), right.length);
    for (const j of right) backward.push(slot(i, j), j);
    solveOperations += right.length;
  }
  return {
    n,
    slots,
    order: Int32Array.from(order),
    slot,
    diagonal: Int32Array.from({ length: n }, (_, i) => slot(i, i)),
    program: Int32Array.from(program),
    forward: Int32Array.from(forward),
    backward: Int32Array.from(backward),
    factorOperations,
    solveOperations,
  };
}

/**
 * Factors the matrix held in `values` in place: L (unit diagonal) below, U on and above; the diagonal of U is replaced
 * by its inverse.
 * @returns false if a pivot is zero, denormal or not finite: solve with pivoting instead
 */
export function factorInPlace(plan: Elimination, values: Float64Array): boolean {
  const { program, n } = plan;
  let at = 0;
  for (let k = 0; k < n; k++) {
    const pivotSlot = program[at++];
    const pivot = values[pivotSlot];
    if (!(Math.abs(pivot) > 1e-290 && Math.abs(pivot) < 1e290)) return false;
    const inverse = 1 / pivot;
    values[pivotSlot] = inverse;
    const below = program[at++];
    for (let b = 0; b < below; b++) {
      const rowSlot = program[at++];
      const count = program[at++];
      const factor = values[rowSlot] * inverse;
      values[rowSlot] = factor;
      for (let u = 0; u < count; u++) {
        values[program[at]] -= factor * values[program[at + 1]];
        at += 2;
      }
    }
  }
  return true;
}

/** Solves with the output of {@link factorInPlace}; b (natural order of rows) is overwritten by the solution. */
export function solveInPlace(plan: Elimination, values: Float64Array, b: Float64Array): void {
  const { forward, backward } = plan;
  let at = 0;
  while (at < forward.length) {
    const i = forward[at];
    const count = forward[at + 1];
    at += 2;
    let sum = b[i];
    for (let u = 0; u < count; u++) {
      sum -= values[forward[at]] * b[forward[at + 1]];
      at += 2;
    }
    b[i] = sum;
  }
  at = 0;
  while (at < backward.length) {
    const i = backward[at];
    const diagonal = backward[at + 1];
    const count = backward[at + 2];
    at += 3;
    let sum = b[i];
    for (let u = 0; u < count; u++) {
      sum -= values[backward[at]] * b[backward[at + 1]];
      at += 2;
    }
    b[i] = sum * values[diagonal];
  }
}
