/** A theory with closed forms for tests of the inference: power laws with constant relative errors. */
import type { Observation, ObservedAbundance } from "../../../src/inference/observations.ts";
import type { FreeKey, Prior } from "../../../src/inference/priors.ts";
import type { Theory } from "../../../src/inference/theory.ts";
import { buildTheory, type Wanted } from "../../../src/inference/theory.ts";
import type { AskTheory } from "../../../src/inference/theory-points.ts";

/** X = value (p_1/reference_1)^exponent_1 ..., with responses d ln X/dp_s to sources of error. */
export interface PowerLaw {
  readonly abundance: ObservedAbundance;
  readonly value: number;
  readonly exponents: readonly number[];
  readonly responses: readonly number[];
}

/** Answers questions by power laws of the free parameters, for {@link buildTheory}. */
export function powerLawAnswers(
  laws: readonly PowerLaw[],
  keys: readonly FreeKey[],
  reference: readonly number[],
): AskTheory {
  return async (questions) =>
    questions.map(({ overrides }) => {
      const p = keys.map((key) => overrides[key] as number);
      return {
        values: laws.map(({ value, exponents }) =>
          p.reduce((product, x, d) => product * (x / reference[d]) ** exponents[d], value),
        ),
        responses: laws[0].responses.map((_, s) => laws.map(({ responses }) => responses[s])),
      };
    });
}

/** The theory of power laws over the ranges of the priors. */
export function powerLawTheory(
  laws: readonly PowerLaw[],
  priors: readonly Prior[],
  reference: readonly number[],
): Promise<Theory> {
  const keys = priors.map(({ key }) => key);
  const wanted: Wanted[] = laws.map(({ abundance }) => ({ abundance, relativeSigma: 0.01 }));
  return buildTheory(
    powerLawAnswers(laws, keys, reference),
    { names: laws.map(({ abundance }) => abundance) },
    priors,
    wanted,
  );
}

/** A measurement as a user gives it. */
export function measured(abundance: ObservedAbundance, value: number, sigma: number): Observation {
  return { abundance, value, sigma, kind: "measurement", source: "given", basis: "given" };
}
