/** Straight-line code for one network: derivatives, matrix assembly, elimination and solution without index look-ups. */
import type { CompiledNetwork } from "./compile.ts";
import { factorInPlace, solveInPlace } from "./elimination.ts";

/** The four operations of an integration step on one network. */
export interface NetworkKernels {
  /** "straight-line" generated code or "loops" over the index arrays; both give the same numbers to the last bit. */
  readonly kind: "straight-line" | "loops";
  derivatives(c: Float64Array, Y: Float64Array, dYds: Float64Array): void;
  assemble(c: Float64Array, Y: Float64Array, shift: number, values: Float64Array): void;
  /** False if a pivot fails. */
  factor(values: Float64Array): boolean;
  solve(values: Float64Array, b: Float64Array): void;
}

/** Kernels that walk the index arrays: no set-up cost, allowed where code generation is not. */
export function loopKernels(network: CompiledNetwork): NetworkKernels {
  const { elimination } = network;
  return {
    kind: "loops",
    derivatives: network.derivatives,
    assemble: network.assemble,
    factor: (values) => factorInPlace(elimination, values),
    solve: (values, b) => solveInPlace(elimination, values, b),
  };
}

/** Longest source of one generated function [characters]: engines give up optimising longer ones. */
const MAX_SOURCE = 14000;

/** Serial number that gives every instance its own source, so that it gets its own type feedback in the engine. */
let instances = 0;

/**
 * Generates kernels for a network.
 * @returns null where code generation is forbidden (a page without `unsafe-eval`)
 */
export function generateKernels(network: CompiledNetwork): NetworkKernels | null {
  try {
    return build(network);
  } catch (error) {
    if (error instanceof EvalError) return null;
    throw error;
  }
}

/** An array held in local variables inside each function: loaded at its head, stored at its end. */
interface Locals {
  readonly load: string;
  readonly clear: string;
  readonly store: string;
}

function locals(n: number, name: string, array: string): Locals {
  const list = (make: (i: number) => string) => Array.from({ length: n }, (_, i) => make(i));
  return {
    load: `let ${list((i) => `${name}${i}=${array}[${i}]`).join(",")};`,
    clear: `let ${list((i) => `${name}${i}=0`).join(",")};`,
    store: list((i) => `${array}[${i}]=${name}${i};`).join(""),
  };
}

/**
 * Statements, made of integers only, -> functions of at most MAX_SOURCE characters each, called in order.
 * @param held an array kept in local variables
 * @param first "0" if that array starts from zeros instead of its contents
 */
function chunked(
  parameters: readonly string[],
  statements: readonly string[],
  held?: Locals,
  first?: "0",
): (...args: unknown[]) => void {
  const functions: ((...args: unknown[]) => void)[] = [];
  let body: string[] = [];
  let size = 0;
  const flush = () => {
    if (body.length === 0) return;
    instances++;
    const head = held === undefined ? "" : functions.length === 0 && first === "0" ? held.clear : held.load;
    const text = `"use strict";/*${instances}*/let t=0;${head}\n${body.join("\n")}\n${held?.store ?? ""}`;
    functions.push(new Function(...parameters, text) as never);
    body = [];
    size = 0;
  };
  for (const statement of statements) {
    if (size + statement.length > MAX_SOURCE) flush();
    body.push(statement);
    size += statement.length;
  }
  flush();
  if (functions.length === 1) return functions[0];
  const call = parameters.join(",");
  const names = functions.map((_, i) => `f${i}`);
  return new Function(...names, `return (${call})=>{${names.map((f) => `${f}(${call});`).join("")}};`)(...functions);
}

function build(network: CompiledNetwork): NetworkKernels {
  const { n, structure, reactions, elimination } = network;
  const { particles, start, nuclide, change } = structure;
  const count = reactions.length;
  const product = (f: number): string | null => {
    const trio = [...particles.subarray(3 * f, 3 * f + 3)];
    if (trio.includes(n + 1)) return null;
    return [`c[${f}]`, ...trio.filter((i) => i < n).map((i) => `Y[${i}]`)].join("*");
  };
  const term = (coefficient: number, what: string) => {
    const size = Math.abs(coefficient);
    return `${coefficient < 0 ? "-" : "+"}${size === 1 ? "" : `${size}*`}${what}`;
  };
  // Net flow of each reaction, added to the sums of its nuclides, which stay in local variables.
  const rhs: string[] = [];
  for (let k = 0; k < count; k++) {
    const back = product(2 * k + 1);
    let statement = `t=${product(2 * k)}${back === null ? "" : `-${back}`};`;
    for (let e = start[k]; e < start[k + 1]; e++) {
      const size = Math.abs(change[e]);
      statement += `d${nuclide[e]}${change[e] < 0 ? "-" : "+"}=${size === 1 ? "" : `${size}*`}t;`;
    }
    rhs.push(statement);
  }
  const derivatives = chunked(["c", "Y", "d"], rhs, locals(n, "d", "d"), "0");

  // Partial derivatives of each flux, then shift I - J slot by slot.
  const partials: string[] = [];
  const slots: string[][] = Array.from({ length: elimination.slots }, () => []);
  for (let f = 0; f < 2 * count; f++) {
    const trio = [...particles.subarray(3 * f, 3 * f + 3)];
    if (trio.includes(n + 1)) continue;
    const real = trio.filter((i) => i < n);
    const sign = f % 2 === 0 ? -1 : 1;
    for (const j of new Set(real)) {
      const multiplicity = real.filter((i) => i === j).length;
      const rest = [...real];
      rest.splice(rest.indexOf(j), 1);
      const id = partials.length;
      partials.push(
        `P[${id}]=${multiplicity > 1 ? `${multiplicity}*` : ""}${[`c[${f}]`, ...rest.map((i) => `Y[${i}]`)].join("*")};`,
      );
      const k = f >> 1;
      for (let e = start[k]; e < start[k + 1]; e++)
        slots[elimination.slot(nuclide[e], j)].push(term(sign * change[e], `P[${id}]`));
    }
  }
  const diagonal = new Set(elimination.diagonal);
  const matrix = slots.map(
    (terms, s) => `v[${s}]=${diagonal.has(s) ? "h" : ""}${terms.join("") || (diagonal.has(s) ? "" : "0")};`,
  );
  const work = new Float64Array(partials.length);
  const assemble = chunked(["c", "Y", "h", "v", "P"], [...partials, ...matrix]);

  // Elimination, the pivot row of each step in local constants.
  const factor: string[] = [];
  const { program } = elimination;
  for (let k = 0, at = 0; k < n; k++) {
    const pivot = program[at++];
    const below = program[at++];
    const columns = Array.from({ length: below > 0 ? program[at + 1] : 0 }, (_, u) => program[at + 3 + 2 * u]);
    let statement = `{const p=1/v[${pivot}];v[${pivot}]=p;`;
    columns.forEach((source, u) => {
      statement += `const r${u}=v[${source}];`;
    });
    for (let b = 0; b < below; b++) {
      const row = program[at++];
      const updates = program[at++];
      statement += `t=v[${row}]*p;v[${row}]=t;`;
      for (let u = 0; u < updates; u++, at += 2) statement += `v[${program[at]}]-=t*r${u};`;
    }
    factor.push(`${statement}}`);
  }
  const eliminate = chunked(["v"], factor);

  // Substitution column by column, the unknowns in local variables.
  const solution: string[] = [];
  const { order, slot } = elimination;
  for (let k = 0; k < n; k++) {
    let statement = "";
    for (let l = k + 1; l < n; l++) {
      const s = slot(order[l], order[k]);
      if (s >= 0) statement += `b${order[l]}-=v[${s}]*b${order[k]};`;
    }
    if (statement) solution.push(statement);
  }
  for (let k = n - 1; k >= 0; k--) {
    const j = order[k];
    let statement = `b${j}*=v[${slot(j, j)}];`;
    for (let l = k - 1; l >= 0; l--) {
      const s = slot(order[l], j);
      if (s >= 0) statement += `b${order[l]}-=v[${s}]*b${j};`;
    }
    solution.push(statement);
  }
  const solve = chunked(["v", "b"], solution, locals(n, "b", "b"));
  return {
    kind: "straight-line",
    derivatives: derivatives as NetworkKernels["derivatives"],
    assemble: (c, Y, shift, values) => assemble(c, Y, shift, values, work),
    factor(values) {
      eliminate(values);
      // Inverse pivots: a zero, denormal or non-finite pivot shows as a huge or non-finite sum.
      let sum = 0;
      for (let i = 0; i < n; i++) sum += Math.abs(values[elimination.diagonal[i]]);
      return sum < 1e290;
    },
    solve: solve as NetworkKernels["solve"],
  };
}
