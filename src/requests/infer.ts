/** The request `infer`: baryon density, N_eff and more from observed abundances. */
import { runInference } from "../inference/infer.ts";
import { DEFAULT_SET, parseObserved } from "../inference/observations.ts";
import { type FreeKey, parseFree, parsePriors } from "../inference/priors.ts";
import type { AskTheory, TheoryQuestion } from "../inference/theory-points.ts";
import { namesOf } from "../model/prepare.ts";
import type { RateLibrary } from "../nuclear/library.ts";
import { addCounts } from "../nucleosynthesis/run.ts";
import { InputError } from "../numerics/check.ts";
import type { SolverCounts } from "../numerics/ode-stiff.ts";
import type { InferResults } from "../output/infer-result.ts";
import type { Keys } from "../parameters/cosmology.ts";
import { singleThread } from "../sweep/engine.ts";
import type { PointAnswer } from "../sweep/point.ts";
import type { Envelope, Progress } from "./envelope.ts";
import { makeEnvelope } from "./envelope.ts";
import { modelFor } from "./model-for.ts";
import { nucleosynthesisProvenance } from "./provenance.ts";
import type { TaskEngine } from "./sweep.ts";
import { taskAnswerer } from "./tasks.ts";

/** Keys of the request besides those of a cosmology, as the options' strings. */
export interface InferKeys extends Keys {
  /** `D/H=2.527e-5±0.030e-5,Yp=...` and names of sets; {@link parseObserved}. */
  readonly observed?: string;
  /** `KEY=VALUE±SIGMA` or `KEY=MIN:MAX`, separated by commas; {@link parsePriors}. */
  readonly prior?: string;
  /** `omegaB,nEff`; omegaB alone if left out. */
  readonly free?: string;
}

/** What the caller may hand in. */
export interface InferOptions {
  readonly progress?: Progress;
  /** Threads that answer; one thread without. */
  readonly engine?: TaskEngine;
}

/** Keys that would fix what is free. */
const FIXED_BY: Readonly<Record<FreeKey, readonly (keyof Keys)[]>> = {
  omegaB: ["omegaB", "eta10"],
  nEff: ["nEff", "deltaNEff"],
  tauN: ["tauN"],
  xiE: ["xiE"],
};

/**
 * Answers `infer`.
 * @throws {InputError | CalculationError}
 */
export async function computeInfer(
  { observed, prior, free, ...keys }: InferKeys,
  library: RateLibrary,
  { progress, engine = singleThread(taskAnswerer(library)) }: InferOptions = {},
): Promise<Envelope<InferResults>> {
  const freeKeys = parseFree(free ?? "omegaB");
  for (const key of freeKeys)
    for (const fixing of FIXED_BY[key])
      if (keys[fixing] !== undefined)
        throw new InputError(
          "conflict",
          `${fixing} = ${text(keys[fixing])}: ${key} is free here; leave it out, or give it as a prior`,
        );
  const model = await modelFor(keys, library);
  const parameters = model.parameters();
  const data = parseObserved(observed ?? DEFAULT_SET, library.files);
  const priors = parsePriors(prior, freeKeys, library.files, parameters.tCmb);
  const names = namesOf(model, parameters);
  const missing = [...data.fitted, ...data.compared].find(({ abundance }) => !names.includes(abundance));
  if (missing !== undefined)
    throw new InputError(
      "observed",
      `observed ${missing.abundance}: network ${parameters.network} does not make it; leave it out, or choose another network`,
    );
  const asking = askEngine(engine, keys);
  const { warnings, ...results } = await runInference(
    { observed: data, priors, tCmb: parameters.tCmb, seed: parameters.seed },
    asking.ask,
    // Source 0 is tau_n: where it is free its error is the posterior's.
    { names, ...(freeKeys.includes("tauN") ? { freeSource: 0 } : {}) },
    (share) => progress?.(share, "theory of the inference"),
  );
  const bestKeys = bestOf(freeKeys, results);
  const best = model.parameters(bestKeys);
  return makeEnvelope(
    "infer",
    best,
    results,
    nucleosynthesisProvenance(model, parameters),
    { ...asking.counts(), tolerance: parameters.tolerance },
    // Among them where linear errors, which the fit is made with, are not to be trusted.
    [...warnings, ...model.abundances({ ...bestKeys, errors: "linear", samples: 0 }).warnings],
  );
}

function text(value: unknown): string {
  return typeof value === "object" ? JSON.stringify(value) : String(value);
}

/** The best point as keys, to the figures that are known of it. */
function bestOf(free: readonly FreeKey[], { parameters }: InferResults): Keys {
  const { tauN, ...others } = Object.fromEntries(free.map((key) => [key, Number(parameters[key].best.toPrecision(6))]));
  return { ...others, ...(tauN === undefined ? {} : { tauN: { value: tauN, sigma: 0 } }) };
}

/** Answers the questions of an inference through an engine, those of one thermal history after the other. */
export function askEngine(engine: TaskEngine, base: Keys): { ask: AskTheory; counts: () => SolverCounts } {
  let counts: SolverCounts = { steps: 0, rejected: 0, rhs: 0, jacobians: 0, factorisations: 0 };
  const history = ({ overrides: { nEff = 0, xiE = 0 } }: TheoryQuestion) => `${nEff} ${xiE}`;
  const ask: AskTheory = async (questions) => {
    const place = new Map<string, number>();
    for (const question of questions) if (!place.has(history(question))) place.set(history(question), place.size);
    const rank = (i: number) => place.get(history(questions[i])) as number;
    const order = questions.map((_, i) => i).sort((a, b) => rank(a) - rank(b) || a - b);
    const tasks = order.map((i) => ({ kind: "point" as const, base, question: questions[i] }));
    const found = (await engine.answerAll(tasks, (_, k) => history(questions[order[k]]))) as PointAnswer[];
    const answers = new Array<PointAnswer>(questions.length);
    order.forEach((i, k) => {
      answers[i] = found[k];
      counts = addCounts(counts, found[k].counts);
    });
    return answers;
  };
  return { ask, counts: () => counts };
}
