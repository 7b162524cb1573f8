/** One line of `batch`: a request as JSON in, its answer as JSON of one line out, errors in place. */
import { CalculationError, EmberlineError, InputError } from "../numerics/check.ts";
import { answerRequest, type Kept } from "./dispatch.ts";
import type { LineAnswer, LineTask } from "./tasks.ts";

/** Longest message of an error. */
const LONGEST_MESSAGE = 600;

/** JSON on one line. @throws {CalculationError} for a number that is not finite, which JSON would turn into null */
function oneLine(value: object): string {
  return JSON.stringify(value, (key, item: unknown) => {
    if (typeof item === "number" && !Number.isFinite(item))
      throw new CalculationError("not-finite", `${key} = ${item}: not a finite number`);
    return item;
  });
}

/** The answer to a line that cannot be answered. */
export function lineError(line: number, error: unknown, id?: unknown): string {
  const code = error instanceof EmberlineError ? error.code : "failed";
  const message = (error instanceof Error ? error.message : String(error)).replace(/\s+/g, " ").trim();
  return JSON.stringify({
    ...(id === undefined ? {} : { id }),
    line,
    error: { code, message: message.slice(0, LONGEST_MESSAGE) },
  });
}

function parse(text: string): Record<string, unknown> {
  let value: unknown;
  try {
    value = JSON.parse(text);
  } catch (error) {
    const reason = (error as Error).message.replace(/[\p{Cc}\p{Cs}\ufffd]/gu, "?").slice(0, 120);
    throw new InputError("json", `not JSON: ${reason}; write one object a line`);
  }
  if (typeof value !== "object" || value === null || Array.isArray(value))
    throw new InputError("json", 'not a JSON object; write {"command": ..., keys} on one line');
  return value as Record<string, unknown>;
}

/** Answers a line; never rejects. The answer is that of the command, with the request's `id` if it has one. */
export async function answerLine({ line, text }: LineTask, kept: Kept): Promise<LineAnswer> {
  let id: unknown;
  try {
    const { id: given, command, ...keys } = parse(text);
    id = given;
    const answer = await answerRequest(command, keys, kept);
    return { text: oneLine({ ...(id === undefined ? {} : { id }), ...answer }) };
  } catch (error) {
    return { text: lineError(line, error, id) };
  }
}
