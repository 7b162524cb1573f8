/** Points at which the theory is computed for an inference: what is asked there, and what has been answered. */
import type { AbundanceName } from "../nucleosynthesis/abundances.ts";
import { CalculationError } from "../numerics/check.ts";
import type { Keys } from "../parameters/cosmology.ts";
import { FREE_PARAMETERS, type FreeKey, type Prior } from "./priors.ts";

/** What is asked of the calculation at one point of parameter space. */
export interface TheoryQuestion {
  readonly overrides: Keys;
  /** How the point is named if it fails. */
  readonly where: string;
  readonly values: boolean;
  /** Whether the responses d ln X/dp to all sources of error are wanted, with the values. */
  readonly linear?: boolean;
  /** Abundances of which the responses are wanted, in this order. */
  readonly responding?: readonly AbundanceName[];
}

export interface TheoryAnswer {
  readonly values?: readonly number[];
  /** responses[s][m] of all sources. */
  readonly responses?: readonly (readonly number[])[];
}

/** Answers questions in their order; in one thread or many. */
export type AskTheory = (questions: readonly TheoryQuestion[]) => Promise<readonly TheoryAnswer[]>;

/** What does not change from point to point. */
export interface TheoryFrame {
  /** Names of the values of an answer. */
  readonly names: readonly AbundanceName[];
  /** Number of a source of error that does not count, since its parameter is free. */
  readonly freeSource?: number;
}

/** A point in the coordinates of the interpolation, see {@link toCoordinate}. */
export type Coordinates = readonly number[];

/** Value of a parameter -> the variable in which the theory is interpolated. */
export function toCoordinate(key: FreeKey, value: number): number {
  return FREE_PARAMETERS[key].coordinate === "ln" ? Math.log(value) : value;
}

function fromCoordinate({ key, min, max }: Prior, x: number): number {
  const value = FREE_PARAMETERS[key].coordinate === "ln" ? Math.exp(x) : x;
  return Math.min(max, Math.max(min, value));
}

/** Computes points through {@link AskTheory} and keeps them. */
export class TheoryPoints {
  readonly #ask: AskTheory;
  readonly #frame: TheoryFrame;
  readonly #priors: readonly Prior[];
  readonly #abundances: readonly AbundanceName[];
  readonly #values = new Map<string, readonly number[]>();
  readonly #responses = new Map<string, readonly (readonly number[])[]>();

  constructor(ask: AskTheory, frame: TheoryFrame, priors: readonly Prior[], abundances: readonly AbundanceName[]) {
    this.#ask = ask;
    this.#frame = frame;
    this.#priors = priors;
    this.#abundances = abundances;
  }

  /**
   * Computes what is not known yet, all at once.
   * @param values points of which the abundances are wanted
   * @param linear points of which the responses are wanted as well
   * @throws {CalculationError} if an abundance is not positive somewhere, so that it has no logarithm
   */
  async compute(values: readonly Coordinates[], linear: readonly Coordinates[]): Promise<void> {
    const wanted = new Map<string, { readonly x: Coordinates; readonly linear: boolean }>();
    for (const x of linear) if (!this.#responses.has(name(x))) wanted.set(name(x), { x, linear: true });
    for (const x of values)
      if (!this.#values.has(name(x)) && !wanted.has(name(x))) wanted.set(name(x), { x, linear: false });
    const list = [...wanted.values()];
    const questions = list.map(({ x, linear: full }) => ({
      ...this.#question(x),
      values: true,
      ...(full ? { linear: true, responding: this.#abundances } : {}),
    }));
    const answers = await this.#ask(questions);
    list.forEach(({ x }, i) => {
      this.#values.set(name(x), this.#lnValues(answers[i], questions[i].where));
      const { responses } = answers[i];
      const counted = responses?.map((row, s) => (s === this.#frame.freeSource ? row.map(() => 0) : row));
      if (counted) this.#responses.set(name(x), counted);
    });
  }

  /** ln X of each abundance at a computed point. */
  lnValues(x: Coordinates): readonly number[] {
    return this.#values.get(name(x)) as readonly number[];
  }

  /** responses[s][m] of ln X_m to source s at a computed point. */
  responses(x: Coordinates): readonly (readonly number[])[] {
    return this.#responses.get(name(x)) as readonly (readonly number[])[];
  }

  #question(x: Coordinates): Pick<TheoryQuestion, "overrides" | "where"> {
    const parameters = this.#priors.map((prior, d) => ({ key: prior.key, value: fromCoordinate(prior, x[d]) }));
    return {
      overrides: Object.fromEntries(parameters.map(({ key, value }) => [key, value])),
      where: parameters.map(({ key, value }) => `${key} = ${value.toPrecision(6)}`).join(", "),
    };
  }

  #lnValues({ values = [] }: TheoryAnswer, where: string): number[] {
    return this.#abundances.map((abundance) => {
      const x = values[this.#frame.names.indexOf(abundance)] ?? Number.NaN;
      if (!(x > 0))
        throw new CalculationError("abundance", `${abundance} = ${x} at ${where}: it has no logarithm to compare`);
      return Math.log(x);
    });
  }
}

function name(x: Coordinates): string {
  return x.join(" ");
}
