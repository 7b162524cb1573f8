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

/** Statements, made of integers only, -> functions of at most MAX_SOURCE characters each, called in order. */
function chunked(parameters: readonly string[], statements: readonly string[]): (...args: unknown[]) => void {
  const functions: ((...args: unknown[]) => void)[] = [];
  let body: string[] = [];
  let size = 0;
  const flush = () => {
    if (body.length === 0) return;
    instances++;
    functions.push(new Function(...parameters, `"use strict";/*${instances}*/let t;\n${body.join("\n")}`) as never);
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
  if (functions.length === 2) {
    const [first, second] = functions;
    return (...args) => {
      first(...args);
      second(...args);
    };
  }
  return (...args) => {
    for (const f of functions) f(...args);
  };
}

function build(network: CompiledNetwork): NetworkKernels {
  const { n, structure, reactions, elimination } = network;
  const { particles, start, nuclide, change } = structure;
  const count = reactions.length;
  const flows = new Float64Array(count);
  const product = (f: number): string | null => {
    const trio = [...particles.subarray(3 * f, 3 * f + 3)];
    if (trio.includes(n + 1)) return null;
    return [`c[${f}]`, ...trio.filter((i) => i < n).map((i) => `Y[${i}]`)].join("*");
  };
  const term = (coefficient: number, what: string) => {
    const size = Math.abs(coefficient);
    return `${coefficient < 0 ? "-" : "+"}${size === 1 ? "" : `${size}*`}${what}`;
  };
  // Net flow of each reaction, then the sum over reactions of each nuclide.
  const rhs: string[] = [];
  for (let k = 0; k < count; k++) {
    const back = product(2 * k + 1);
    rhs.push(`R[${k}]=${product(2 * k)}${back === null ? "" : `-${back}`};`);
  }
  const sums: string[][] = Array.from({ length: n }, () => []);
  for (let k = 0; k < count; k++)
    for (let e = start[k]; e < start[k + 1]; e++) sums[nuclide[e]].push(term(change[e], `R[${k}]`));
  for (let i = 0; i < n; i++) rhs.push(`d[${i}]=${sums[i].join("") || "0"};`);
  const derivatives = chunked(["c", "Y", "d", "R"], rhs);

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

  const factor: string[] = [];
  const { program } = elimination;
  for (let k = 0, at = 0; k < n; k++) {
    const pivot = program[at++];
    const below = program[at++];
    factor.push(`v[${pivot}]=1/v[${pivot}];`);
    for (let b = 0; b < below; b++) {
      const row = program[at++];
      const updates = program[at++];
      let statement = `t=v[${row}]*v[${pivot}];v[${row}]=t;`;
      for (let u = 0; u < updates; u++, at += 2) statement += `v[${program[at]}]-=t*v[${program[at + 1]}];`;
      factor.push(statement);
    }
  }
  const eliminate = chunked(["v"], factor);

  const solution: string[] = [];
  const { forward, backward } = elimination;
  const dots = (list: Int32Array, at: number, entries: number) => {
    let text = "";
    for (let u = 0; u < entries; u++) text += `-v[${list[at + 2 * u]}]*b[${list[at + 2 * u + 1]}]`;
    return text;
  };
  for (let at = 0; at < forward.length; at += 2 + 2 * forward[at + 1])
    solution.push(`b[${forward[at]}]=b[${forward[at]}]${dots(forward, at + 2, forward[at + 1])};`);
  for (let at = 0; at < backward.length; at += 3 + 2 * backward[at + 2])
    solution.push(
      `b[${backward[at]}]=(b[${backward[at]}]${dots(backward, at + 3, backward[at + 2])})*v[${backward[at + 1]}];`,
    );
  const solve = chunked(["v", "b"], solution);
  return {
    kind: "straight-line",
    derivatives: (c, Y, d) => derivatives(c, Y, d, flows),
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
