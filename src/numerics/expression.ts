/** User-written expressions: parsed by mathjs, checked against a whitelist, compiled to plain closures. */
import type { MathNode } from "mathjs";
import { InputError } from "./check.ts";

/** Value of an expression at the given values of its variables, in the order they were declared. */
export type ExpressionFunction = (...values: number[]) => number;

/** Functions that an expression may call, with the number of arguments each takes. */
const FUNCTIONS: Readonly<
  Record<string, { readonly min: number; readonly max: number; readonly f: ExpressionFunction }>
> = {
  exp: { min: 1, max: 1, f: Math.exp },
  log: { min: 1, max: 1, f: Math.log },
  log10: { min: 1, max: 1, f: Math.log10 },
  sqrt: { min: 1, max: 1, f: Math.sqrt },
  abs: { min: 1, max: 1, f: Math.abs },
  min: { min: 1, max: 20, f: Math.min },
  max: { min: 1, max: 20, f: Math.max },
  tanh: { min: 1, max: 1, f: Math.tanh },
  sin: { min: 1, max: 1, f: Math.sin },
  cos: { min: 1, max: 1, f: Math.cos },
  pow: { min: 2, max: 2, f: (a, b) => a ** b },
};

/** Named constants of an expression. */
const CONSTANTS: Readonly<Record<string, number>> = { pi: Math.PI };

const BINARY: Readonly<Record<string, (a: number, b: number) => number>> = {
  "+": (a, b) => a + b,
  "-": (a, b) => a - b,
  "*": (a, b) => a * b,
  "/": (a, b) => a / b,
  "^": (a, b) => a ** b,
  "<": (a, b) => Number(a < b),
  "<=": (a, b) => Number(a <= b),
  ">": (a, b) => Number(a > b),
  ">=": (a, b) => Number(a >= b),
  "==": (a, b) => Number(a === b),
  "!=": (a, b) => Number(a !== b),
};

/** Names that mathjs gives the comparisons of a chain such as 1 < T < 3. */
const COMPARISONS: Readonly<Record<string, string>> = {
  smaller: "<",
  smallerEq: "<=",
  larger: ">",
  largerEq: ">=",
  equal: "==",
  unequal: "!=",
};

const MAX_LENGTH = 1000;

/** What the parser's other kinds of nodes are, in words. */
const REFUSED: Readonly<Record<string, string>> = {
  AccessorNode: "access to a part of a value (a.b, a[1])",
  ArrayNode: "a list in brackets",
  AssignmentNode: "an assignment (=; to compare write ==)",
  BlockNode: "more than one expression",
  FunctionAssignmentNode: "the definition of a function",
  IndexNode: "an index in brackets",
  ObjectNode: "an object in braces",
  RangeNode: "a range (a:b)",
};

/** The fields of mathjs syntax-tree nodes that are read here. */
interface SyntaxNode {
  readonly type: string;
  readonly value?: unknown;
  readonly name?: string;
  readonly op?: string;
  readonly isPercentage?: boolean;
  readonly content?: SyntaxNode;
  readonly args?: readonly SyntaxNode[];
  readonly fn?: SyntaxNode | string;
  readonly condition?: SyntaxNode;
  readonly trueExpr?: SyntaxNode;
  readonly falseExpr?: SyntaxNode;
  readonly conditionals?: readonly string[];
  readonly params?: readonly SyntaxNode[];
}

/** An expression with the variables already bound to their places in one array of values. */
type Bound = (values: readonly number[]) => number;

const has = <T>(table: Readonly<Record<string, T>>, name: string): boolean => Object.hasOwn(table, name);

/** Turns one whitelisted node into a closure; `refuse` throws with the reason. */
function bind(node: SyntaxNode, variables: readonly string[], refuse: (why: string) => never): Bound {
  const recurse = (child: SyntaxNode | undefined) => bind(child as SyntaxNode, variables, refuse);
  switch (node.type) {
    case "ConstantNode": {
      const value = node.value;
      if (typeof value !== "number" || !Number.isFinite(value)) return refuse(`${String(value)} is not a number`);
      return () => value;
    }
    case "SymbolNode": {
      const name = node.name as string;
      const place = variables.indexOf(name);
      if (place >= 0) return (values) => values[place];
      if (!has(CONSTANTS, name)) return refuse(`${name} is unknown; known are ${variables.join(", ")} and pi`);
      const value = CONSTANTS[name];
      return () => value;
    }
    case "ParenthesisNode":
      return recurse(node.content);
    case "OperatorNode": {
      const [a, b] = (node.args ?? []).map(recurse);
      const op = node.op as string;
      if (node.args?.length === 1 && op === "-") return (values) => -a(values);
      if (node.args?.length === 1 && op === "+") return a;
      if (node.args?.length !== 2 || node.isPercentage || !has(BINARY, op))
        return refuse(
          `operator ${node.isPercentage ? "%" : op} is not accepted; accepted are + ${Object.keys(BINARY).slice(1).join(" ")} ?:`,
        );
      const f = BINARY[op];
      return (values) => f(a(values), b(values));
    }
    case "FunctionNode": {
      const callee = node.fn as SyntaxNode;
      const name = callee.type === "SymbolNode" ? (callee.name as string) : "call of an expression";
      if (!has(FUNCTIONS, name))
        return refuse(`function ${name} is not accepted; accepted are ${Object.keys(FUNCTIONS).join(", ")}`);
      const { min, max, f } = FUNCTIONS[name];
      const args = (node.args ?? []).map(recurse);
      if (args.length < min || args.length > max)
        return refuse(`function ${name} takes ${min === max ? min : `${min} to ${max}`} arguments, not ${args.length}`);
      if (args.length === 1) return (values) => f(args[0](values));
      return (values) => f(...args.map((arg) => arg(values)));
    }
    case "ConditionalNode": {
      const [condition, yes, no] = [node.condition, node.trueExpr, node.falseExpr].map(recurse);
      return (values) => (condition(values) ? yes(values) : no(values));
    }
    case "RelationalNode": {
      const params = (node.params ?? []).map(recurse);
      const tests = (node.conditionals ?? []).map((name) => BINARY[COMPARISONS[name]]);
      return (values) => Number(tests.every((test, i) => test(params[i](values), params[i + 1](values))));
    }
    default:
      return refuse(`${REFUSED[node.type] ?? "something"} is not accepted in an expression`);
  }
}

/**
 * The value of an expression that is a plain number, such as "1" or "2.5e-3"; undefined for anything else.
 * @param text the expression
 */
export function trivialExpression(text: string): number | undefined {
  return /^\s*[+-]?(\d+\.?\d*|\.\d+)([eE][+-]?\d+)?\s*$/.test(text) ? Number(text) : undefined;
}

/**
 * Compiles an expression of named variables: numbers, + - * / ^, comparisons (1 or 0), ?:, the constant pi and the
 * functions exp log log10 sqrt abs min max tanh sin cos pow. Nothing else of mathjs can be reached and no code is
 * generated. mathjs is loaded at the first expression that is not a plain number.
 * @param text       the expression, at most 1000 characters
 * @param variables  names in the order of the returned function's arguments
 * @param name       option or key to name in errors
 * @throws {InputError} (as a rejection) if it does not parse or names anything outside the whitelist
 */
export async function compileExpression(
  text: string,
  variables: readonly string[],
  name = "expansion",
): Promise<ExpressionFunction> {
  const constant = trivialExpression(text);
  if (constant !== undefined) return () => constant;
  const blank = text.trim() === "";
  const shown = blank ? JSON.stringify(text) : text.length > 80 ? `${text.slice(0, 77)}...` : text;
  const refuse = (why: string): never => {
    throw new InputError("expression", `${name} = ${shown}: ${why}`);
  };
  if (blank) refuse(`is empty; give an expression in ${variables.join(", ")}`);
  if (text.length > MAX_LENGTH) refuse(`has ${text.length} characters, accepted are ${MAX_LENGTH}`);
  const { parse } = await import("mathjs/number");
  let tree: MathNode;
  try {
    tree = parse(text);
  } catch (error) {
    return refuse(`does not parse, ${error instanceof Error ? error.message : String(error)}`);
  }
  const bound = bind(tree as unknown as SyntaxNode, variables, refuse);
  return (...values) => bound(values);
}
