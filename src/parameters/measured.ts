/** A value with its standard deviation as text: `0.245±0.003`, `0.245+-0.003`, `0.245+/-0.003`. */
import { InputError } from "../numerics/check.ts";
import type { Measured } from "./cosmology.ts";

const NUMBER = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i;
const PLUS_MINUS = /±|\+\/-|\+-/;

/**
 * A number written in full: nothing after it, finite.
 * @param what how it was given, for the message
 * @throws {InputError}
 */
export function parseNumber(text: string, what: string, expected: string): number {
  const trimmed = text.trim();
  const value = NUMBER.test(trimmed) ? Number(trimmed) : Number.NaN;
  if (!Number.isFinite(value))
    throw new InputError("number", `${what}: ${trimmed === "" ? "no number" : `${trimmed} is no number`}; ${expected}`);
  return value;
}

/**
 * `VALUE±SIGMA` with an error that is positive.
 * @param what how it was given, for the message, e.g. `observed D/H=2.5e-5`
 * @throws {InputError} for a missing, zero or negative error, or anything that is not two numbers
 */
export function parseMeasured(text: string, what: string): Measured {
  const parts = text.split(PLUS_MINUS);
  if (parts.length !== 2)
    throw new InputError("number", `${what}: write VALUE±SIGMA (or VALUE+-SIGMA), the error one standard deviation`);
  const value = parseNumber(parts[0], what, "write VALUE±SIGMA");
  const sigma = parseNumber(parts[1], what, "write VALUE±SIGMA");
  if (!(sigma > 0)) throw new InputError("range", `${what}: the error must be positive, one standard deviation`);
  return { value, sigma };
}
