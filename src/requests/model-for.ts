/** A prepared model for the keys of one request; the expression parser is loaded only if an expression needs it. */
import { EXPANSION_VARIABLES, type Model, prepareModel } from "../model/prepare.ts";
import type { RateLibrary } from "../nuclear/library.ts";
import { InputError } from "../numerics/check.ts";
import { compileExpression, trivialExpression } from "../numerics/expression.ts";
import type { Keys } from "../parameters/cosmology.ts";

/** @throws {InputError} for keys out of range or an expansion that does not compile */
export async function modelFor(keys: Keys, library: RateLibrary): Promise<Model> {
  const text = keys.expansion ?? "1";
  if (trivialExpression(text) !== undefined) return prepareModel(library, keys);
  const compiled = await compileExpression(text, EXPANSION_VARIABLES);
  return prepareModel(library, keys, (asked) => {
    if (asked === text) return compiled;
    throw new InputError("expansion", `expansion = ${asked}: give it to prepare(), where expressions are compiled`);
  });
}
