/** Result -> JSON text: two-space indent, one line for each row of numbers; NaN, infinities and gaps are refused. */
import { CalculationError } from "../numerics/check.ts";

function isScalar(value: unknown): boolean {
  return value === null || typeof value !== "object";
}

function write(value: unknown, path: string, indent: string): string {
  if (typeof value === "number") {
    if (!Number.isFinite(value)) throw new CalculationError("not-finite", `${path} = ${value}: not a finite number`);
    return JSON.stringify(value);
  }
  if (typeof value === "string" || typeof value === "boolean") return JSON.stringify(value);
  if (typeof value !== "object" || value === null)
    throw new CalculationError("not-finite", `${path} = ${value}: has no value`);
  const deeper = `${indent}  `;
  if (Array.isArray(value)) {
    const items = value.map((item, i) => write(item, `${path}[${i}]`, deeper));
    if (value.every(isScalar)) return `[${items.join(", ")}]`;
    return `[\n${items.map((item) => deeper + item).join(",\n")}\n${indent}]`;
  }
  const items = Object.entries(value)
    .filter(([, item]) => item !== undefined)
    .map(
      ([key, item]) => `${deeper}${JSON.stringify(key)}: ${write(item, path === "" ? key : `${path}.${key}`, deeper)}`,
    );
  return items.length === 0 ? "{}" : `{\n${items.join(",\n")}\n${indent}}`;
}

/**
 * The JSON text of an answer, ending in a newline. What is not set is left out.
 * @throws {CalculationError} naming the place of a number that is not finite, or of a null
 */
export function toJson(value: object): string {
  return `${write(value, "", "")}\n`;
}
