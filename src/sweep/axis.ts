/** One axis of a scan or grid: `KEY=START:STOP:COUNT[log]` or `KEY=a,b,c`, parsed and checked. */
import { WEAK_REACTION } from "../nucleosynthesis/network-data.ts";
import { InputError } from "../numerics/check.ts";
import { RANGES, SCALE_RANGE } from "../parameters/cosmology.ts";

/** A parameter and the values it takes. */
export interface Axis {
  /** Key of {@link RANGES}, or `scale:R` with the reaction's id; name of the column. */
  readonly key: string;
  /** Reaction whose rate is scaled; none for a key. */
  readonly reaction?: string;
  readonly values: readonly number[];
  /** Whether the values are evenly spread in the logarithm. */
  readonly log: boolean;
  /** Unit of the column; "1" for a pure number. */
  readonly unit: string;
}

/** Most values of one axis: what a table could hold if it had this axis alone. */
const MOST_VALUES = 1e7;
const NUMBER = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i;
/** Keys that take whole numbers only. */
const WHOLE = ["samples", "seed"];
const FORM = "write KEY=START:STOP:COUNT, KEY=START:STOP:COUNTlog or KEY=a,b,c";

/**
 * Parses an axis.
 * @param text       as given, e.g. `eta10=1:100:200log`, `nEff=2,3,4`, `scale:d(p,g)he3=0.9:1.1:21`
 * @param reactionId id of a reaction given in any notation; throws for one that is not known
 * @throws {InputError} naming the axis, what is wrong and what is accepted
 */
export function parseAxis(text: string, reactionId: (name: string) => string): Axis {
  const fail = (problem: string) => new InputError("axis", `over ${text === "" ? '""' : text}: ${problem}`);
  const at = text.lastIndexOf("=");
  if (at <= 0 || at === text.length - 1) throw fail(FORM);
  const name = text.slice(0, at).trim();
  const target = axisTarget(name, reactionId, fail);
  const { values, log } = axisValues(text.slice(at + 1).trim(), fail);
  const { min, max, unit } = target.range;
  for (const value of [Math.min(...ends(values)), Math.max(...ends(values))])
    if (!(value >= min && value <= max))
      throw fail(`${value} is out of range; accepted are ${min} to ${max}${unit === "" ? "" : ` ${unit}`}`);
  if (WHOLE.includes(name) && values.some((value) => !Number.isInteger(value)))
    throw fail(`${name} takes whole numbers only`);
  const seen = new Set<number>();
  for (const value of values) {
    if (seen.has(value)) throw fail(`the value ${value} stands there twice; leave one out`);
    seen.add(value);
  }
  const reaction = target.reaction === undefined ? {} : { reaction: target.reaction };
  return { key: target.key, ...reaction, values, log, unit: unit === "" ? "1" : unit };
}

type Fail = (problem: string) => InputError;

interface Target {
  readonly key: string;
  readonly reaction?: string;
  readonly range: { readonly min: number; readonly max: number; readonly unit: string };
}

function axisTarget(name: string, reactionId: (name: string) => string, fail: Fail): Target {
  if (name.startsWith("scale:")) {
    const given = name.slice("scale:".length).trim();
    const reaction = given === WEAK_REACTION ? given : reactionId(given);
    return { key: `scale:${reaction}`, reaction, range: { ...SCALE_RANGE, unit: "" } };
  }
  if (Object.hasOwn(RANGES, name)) return { key: name, range: RANGES[name] };
  throw fail(`unknown key ${name}; accepted are ${Object.keys(RANGES).join(", ")} and scale:REACTION`);
}

function strict(text: string, what: string, fail: Fail): number {
  const value = NUMBER.test(text.trim()) ? Number(text) : Number.NaN;
  if (!Number.isFinite(value)) throw fail(`${what} ${text === "" ? '""' : text}: not a number; ${FORM}`);
  return value;
}

function axisValues(text: string, fail: Fail): { values: number[]; log: boolean } {
  if (!text.includes(":")) {
    const values = text.split(",").map((part) => strict(part, "value", fail));
    return { values, log: false };
  }
  const parts = text.split(":");
  if (parts.length !== 3) throw fail(FORM);
  const log = /log$/i.test(parts[2].trim());
  const start = strict(parts[0], "start", fail);
  const stop = strict(parts[1], "stop", fail);
  const count = strict(parts[2].trim().replace(/\s*log$/i, ""), "count", fail);
  if (!Number.isInteger(count) || count < 2)
    throw fail(`count ${count}: must be a whole number of 2 or more; for one value write KEY=VALUE`);
  if (count > MOST_VALUES) throw fail(`count ${count}: does not fit into memory; at most ${MOST_VALUES} on one axis`);
  if (start === stop) throw fail(`start and stop are both ${start}; for one value write KEY=VALUE`);
  if (log && !(start > 0 && stop > 0))
    throw fail(`a log axis needs start and stop above 0, not ${Math.min(start, stop)}`);
  return { values: spread(start, stop, count, log), log };
}

/** Evenly spread values with exact ends, in the value or in its logarithm, to 15 digits so that 0.021 is 0.021. */
function spread(start: number, stop: number, count: number, log: boolean): number[] {
  const last = count - 1;
  const at = (i: number) => {
    if (i === 0) return start;
    if (i === last) return stop;
    const value = log ? start * (stop / start) ** (i / last) : start + ((stop - start) * i) / last;
    return Number(value.toPrecision(15));
  };
  return Array.from({ length: count }, (_, i) => at(i));
}

function ends(values: readonly number[]): number[] {
  let low = values[0];
  let high = values[0];
  for (const value of values) {
    if (value < low) low = value;
    if (value > high) high = value;
  }
  return [low, high];
}
