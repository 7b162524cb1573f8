/** Error classes and argument checks shared by every layer: one clear line, a code, an exit status. */

/** Base of all errors thrown on purpose. `code` is stable and machine-readable. */
export abstract class EmberlineError extends Error {
  readonly code: string;
  /** Exit status of the command line: 1 calculation failed, 2 bad input. */
  abstract readonly exitCode: 1 | 2;
  constructor(code: string, message: string) {
    super(message);
    this.name = new.target.name;
    this.code = code;
  }
}

/** The request cannot be answered as it stands: names option or file:line, value, unit, accepted range, remedy. */
export class InputError extends EmberlineError {
  readonly exitCode = 2;
}

/** The calculation failed: says where (T, step) and why. */
export class CalculationError extends EmberlineError {
  readonly exitCode = 1;
}

/** @throws {RangeError} unless value is finite and > 0 */
export function requirePositive(name: string, value: number, unit: string): void {
  if (!(value > 0 && value < Number.POSITIVE_INFINITY))
    throw new RangeError(`${name} = ${value} ${unit}: must be positive and finite`);
}

/** @throws {RangeError} unless value is finite */
export function requireFinite(name: string, value: number, unit: string): void {
  if (!Number.isFinite(value)) throw new RangeError(`${name} = ${value} ${unit}: must be finite`);
}

/** @throws {InputError} unless lower <= value <= upper (finite) */
export function requireRange(name: string, value: number, unit: string, lower: number, upper: number): void {
  if (!(value >= lower && value <= upper)) {
    const u = unit === "" || unit === "1" ? "" : ` ${unit}`;
    throw new InputError("range", `${name} = ${value}${u}: accepted are ${lower} to ${upper}${u}`);
  }
}
