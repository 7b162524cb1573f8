/** Logarithmic sensitivities d ln X/d ln p of any results to any parameters, by central differences. */
import { CalculationError } from "../numerics/check.ts";

/** A parameter and the two values between which the difference is taken. */
export interface CentralStep<Name extends string = string> {
  readonly name: Name;
  readonly up: number;
  readonly down: number;
  /** Change of ln p between `down` and `up`. */
  readonly lnDistance: number;
}

/**
 * Step of a positive parameter by a share on either side: value (1 + share) and value (1 - share).
 * @param share 0 < share < 1; the error of the difference is of order share^2
 * @throws {RangeError} unless value > 0 and 0 < share < 1
 */
export function relativeStep<Name extends string>(name: Name, value: number, share: number): CentralStep<Name> {
  if (!(value > 0 && share > 0 && share < 1))
    throw new RangeError(`step of ${name}: value ${value} and share ${share} must be positive, the share below 1`);
  return { name, up: value * (1 + share), down: value * (1 - share), lnDistance: Math.log((1 + share) / (1 - share)) };
}

/**
 * d ln X/d ln p = [ln X(up) - ln X(down)]/(change of ln p) for every step; all other parameters stay.
 * @param steps    one for each parameter
 * @param evaluate results with this parameter at this value; always as many, in the same order
 * @returns rows in the order of the steps; 0 where a result is not positive on both sides (it has no logarithm)
 * @throws {CalculationError} naming the parameter where a result is not finite
 */
export function centralSensitivities<Name extends string>(
  steps: readonly CentralStep<Name>[],
  evaluate: (name: Name, value: number) => ArrayLike<number>,
): Float64Array[] {
  return steps.map(({ name, up, down, lnDistance }) => {
    const above = evaluate(name, up);
    const below = evaluate(name, down);
    return Float64Array.from(above, (x, i) => {
      if (!(Number.isFinite(x) && Number.isFinite(below[i])))
        throw new CalculationError(
          "not-finite",
          `sensitivity to ${name} (${down} to ${up}): result ${i} is not finite`,
        );
      return x > 0 && below[i] > 0 ? Math.log(x / below[i]) / lnDistance : 0;
    });
  });
}
