/** What `scan` and `grid` share: from axes to a table of abundances with errors at every point. */
import { namesOf } from "../model/prepare.ts";
import type { RateLibrary } from "../nuclear/library.ts";
import type { AbundanceName } from "../nucleosynthesis/abundances.ts";
import { addCounts } from "../nucleosynthesis/run.ts";
import { InputError } from "../numerics/check.ts";
import type { SolverCounts } from "../numerics/ode-stiff.ts";
import type { Table } from "../numerics/table.ts";
import type { CosmologyParameters, Keys } from "../parameters/cosmology.ts";
import { relativeErrors } from "../sweep/bands.ts";
import { type Engine, singleThread } from "../sweep/engine.ts";
import {
  affinity,
  axisWarnings,
  computingOrder,
  type Part,
  type Plan,
  partRange,
  placeOf,
  planSweep,
  requireFits,
} from "../sweep/plan.ts";
import type { PointAnswer, PointQuestion } from "../sweep/point.ts";
import type { Progress, Provenance } from "./envelope.ts";
import { modelFor } from "./model-for.ts";
import { nucleosynthesisProvenance } from "./provenance.ts";
import { type PointTask, pointAnswerer } from "./tasks.ts";

/** Engine for the tasks of a request. */
export type TaskEngine = Engine<PointTask, PointAnswer>;

/** A request with axes. */
export interface SweepKeys extends Keys {
  /** Axes: `KEY=START:STOP:COUNT[log]` or `KEY=a,b,c`. */
  readonly over?: readonly string[] | string;
}

/** What the caller may hand in. */
export interface SweepOptions {
  readonly progress?: Progress;
  /** Threads that answer; one thread without. */
  readonly engine?: TaskEngine;
}

/** A plan with everything that is the same at each of its points. */
export interface PreparedSweep {
  readonly command: string;
  readonly plan: Plan;
  readonly base: Keys;
  readonly parameters: CosmologyParameters;
  readonly provenance: Provenance;
  readonly names: readonly AbundanceName[];
  /** Points to compute: `first` to `end` - 1. */
  readonly first: number;
  readonly end: number;
  readonly engine: TaskEngine;
}

/** Outcome of a sweep. */
export interface SweepTable {
  readonly table: Table;
  readonly counts: SolverCounts;
  readonly warnings: readonly string[];
}

/**
 * Checks a request with axes and prepares what its points share; computes no point.
 * @param axes fewest and most axes accepted
 * @throws {InputError} for axes or keys that cannot be, or a table that does not fit into memory
 */
export async function prepareSweep(
  command: string,
  keys: SweepKeys,
  axes: { readonly fewest: number; readonly most: number },
  library: RateLibrary,
  options: SweepOptions,
  part?: Part,
): Promise<PreparedSweep> {
  const { over, ...base } = keys;
  const texts = over === undefined ? [] : Array.isArray(over) ? (over as string[]) : [over as string];
  if (texts.length < axes.fewest || texts.length > axes.most) {
    const wanted = axes.fewest === axes.most ? `${axes.most}` : `${axes.fewest} to ${axes.most}`;
    throw new InputError(
      "axis",
      `${command}: ${texts.length} axes given, ${wanted} accepted; each is --over KEY=START:STOP:COUNT[log] or KEY=a,b,c`,
    );
  }
  const plan = planSweep(texts, base, (name) => library.reactionId(name));
  const model = await modelFor(base, library);
  const parameters = model.parameters();
  const names = namesOf(model, parameters);
  const { first, end } = part === undefined ? { first: 0, end: plan.count } : partRange(plan.count, part);
  requireFits(command, end - first, plan.axes.length + (base.errors === "none" ? 1 : 2) * names.length);
  model.parameters(plan.overrides(0));
  return {
    command,
    plan,
    base,
    parameters,
    provenance: nucleosynthesisProvenance(model, parameters),
    names,
    first,
    end,
    engine: options.engine ?? singleThread(pointAnswerer(library)),
  };
}

/**
 * Abundances at every point; with linear errors, bands from the sources that carry the variance.
 * @throws {InputError | CalculationError} naming the point
 */
export async function runSweep(sweep: PreparedSweep, progress?: Progress): Promise<SweepTable> {
  const { plan, names, first, end, parameters } = sweep;
  let counts: SolverCounts = { steps: 0, rejected: 0, rhs: 0, jacobians: 0, factorisations: 0 };
  const warnings = new WarningCollector();
  const points = computingOrder(plan, first, end);
  const ask = async (
    questions: readonly (Omit<PointQuestion, "overrides" | "where"> & { point: number })[],
    what: string,
  ) => {
    let done = 0;
    const tasks = questions.map(
      ({ point, ...question }): PointTask => ({
        kind: "point",
        base: sweep.base,
        question: { ...question, overrides: plan.overrides(point), where: placeOf(plan, point) },
      }),
    );
    progress?.(0, what, questions.length);
    const answers = await sweep.engine.answerAll(
      tasks,
      (_, i) => affinity(plan, questions[i].point),
      () => progress?.(++done / questions.length, what, questions.length),
    );
    for (const answer of answers) counts = addCounts(counts, answer.counts);
    return answers;
  };
  const sampled = parameters.errors === "sampled";
  const answers = await ask(
    points.map((point) => ({ point, values: true, ...(sampled ? { sigma: true } : {}) })),
    "points",
  );
  const inOrder = points.map((point, i) => ({ point, i })).sort((a, b) => a.point - b.point);
  for (const { point, i } of inOrder) warnings.add(answers[i].warnings, placeOf(plan, point));
  const relative =
    parameters.errors === "linear"
      ? await relativeErrors(plan, first, end, names.length, async (nodes) => {
          const found = await ask(
            nodes.map((point) => ({ point, values: false, linear: true })),
            "error bands",
          );
          return found.map((answer) => answer.responses as number[][]);
        })
      : undefined;
  const rows = new Array<number[]>(end - first);
  points.forEach((point, i) => {
    const { values, sigma } = answers[i];
    const cells = names.flatMap((_, x) => {
      const value = (values as readonly number[])[x];
      if (sigma !== undefined) return [value, sigma[x]];
      return relative === undefined ? [value] : [value, value * (relative.get(point) as Float64Array)[x]];
    });
    rows[point - first] = [...plan.coordinates(point), ...cells];
  });
  const withErrors = parameters.errors !== "none";
  const columns = [
    ...plan.axes.map((axis) => axis.key),
    ...names.flatMap((name) => (withErrors ? [name, `${name}_sigma`] : [name])),
  ];
  return {
    table: { columns, units: columns.map((_, i) => plan.axes[i]?.unit ?? "1"), rows },
    counts,
    warnings: [...axisWarnings(plan), ...warnings.lines()],
  };
}

/** Warnings of many points: those that differ only in their numbers become one, with the first place. */
class WarningCollector {
  readonly #kinds = new Map<string, string>();

  add(warnings: readonly string[], where: string): void {
    for (const text of warnings) {
      const kind = warningKind(text);
      if (!this.#kinds.has(kind)) this.#kinds.set(kind, `${text}${PLACE}${where})`);
    }
  }

  lines(): string[] {
    return [...this.#kinds.values()];
  }
}

/** What stands between a warning and the first point it holds for. */
const PLACE = " (first at ";

/** A warning without its numbers and place. */
export function warningKind(text: string): string {
  return text.split(PLACE)[0].replace(/[0-9.e+-]+/g, "#");
}
