/** The request `rates compare`: evaluations of one rate side by side, and what swapping them does to every abundance. */
import { type LnChange, rateResponses } from "../model/rate-response.ts";
import { networksOf, typicalFactor } from "../nuclear/catalogue.ts";
import type { RateLibrary } from "../nuclear/library.ts";
import type { RateTable } from "../nuclear/parse-rate-file.ts";
import { evaluateRate, type RateEvaluator } from "../nuclear/rate.ts";
import { NEUTRON_PROTON } from "../nuclear/reaction.ts";
import { parseReactionName } from "../nuclear/reaction-name.ts";
import { addCounts } from "../nucleosynthesis/run.ts";
import { CalculationError, InputError } from "../numerics/check.ts";
import type { Table } from "../numerics/table.ts";
import type {
  ComparedAbundance,
  ComparedEvaluation,
  RatesCompareResults,
  SwappedAbundance,
} from "../output/rates-result.ts";
import { DEFAULTS, type Keys } from "../parameters/cosmology.ts";
import type { Envelope, Progress } from "./envelope.ts";
import { makeEnvelope } from "./envelope.ts";
import { modelFor } from "./model-for.ts";
import { nucleosynthesisProvenance } from "./provenance.ts";
import { ratesEnvelope } from "./rates-envelope.ts";

/** What is compared. */
export interface CompareRequest {
  readonly reaction: string;
  /** The first is the reference; one name alone is compared with the network's choice, none means all there are. */
  readonly evaluations?: readonly string[];
}

/** Temperatures of the table of ratios [GK]. */
export const COMPARED_T9: readonly number[] = [
  ...[0.01, 0.02, 0.03, 0.05, 0.07, 0.1, 0.15, 0.2, 0.25, 0.3, 0.4, 0.5, 0.6, 0.7, 0.8, 0.9],
  ...[1, 1.25, 1.5, 2, 3, 5, 7, 10],
];

/**
 * Names of the evaluations, reference first.
 * @throws {InputError} for an unknown or repeated evaluation, or if there is nothing to compare
 */
function chosenEvaluations(
  { evaluations = [] }: CompareRequest,
  id: string,
  current: string | undefined,
  library: RateLibrary,
): string[] {
  const all = library.evaluations(id);
  const named = evaluations.map((name) => library.table(id, name).evaluation);
  const twice = named.find((name, i) => named.indexOf(name) !== i);
  if (twice !== undefined) throw new InputError("conflict", `evaluation ${twice} is given twice; keep one of them`);
  const reference = named.length > 1 ? [] : [current ?? all[0]];
  const chosen = [...new Set([...reference, ...(named.length > 0 ? named : all)])];
  if (chosen.length < 2)
    throw new InputError(
      "choice",
      all.length === 1
        ? `reaction ${id} has one evaluation only, ${all[0]}: nothing to compare; lay a folder with yours over the library (--rates DIR)`
        : `evaluation ${chosen[0]} of ${id} is the one in use: name another to compare it with, of ${all.join(", ")}`,
    );
  return chosen;
}

/** Ratios to the first table and the factor uncertainties of all, at chosen temperatures. */
export function ratioTable(tables: readonly RateTable[], T9: readonly number[]): Table {
  const rates = tables.map(evaluateRate);
  const columns = [
    "T9",
    ...tables.flatMap(({ evaluation }, i) =>
      i === 0 ? [`f_u_${evaluation}`] : [`ratio_${evaluation}`, `f_u_${evaluation}`],
    ),
  ];
  const rows = T9.flatMap((each) => {
    const ln = rates.map((rate) => rate.lnRate(each));
    if (!ln.every(Number.isFinite)) return [];
    const factor = (rate: RateEvaluator) => Math.exp(rate.lnFactorUncertainty(each));
    return [
      [each, ...rates.flatMap((rate, i) => (i === 0 ? [factor(rate)] : [Math.exp(ln[i] - ln[0]), factor(rate)]))],
    ];
  });
  return { columns, units: columns.map((_, i) => (i === 0 ? "GK" : "1")), rows };
}

/** ln(rate of b/rate of a); 0 where either is zero, below the first row of a table. */
function lnRatio(a: RateEvaluator, b: RateEvaluator): LnChange {
  return (lnT9) => {
    const T9 = Math.exp(lnT9);
    const value = b.lnRate(T9) - a.lnRate(T9);
    return Number.isFinite(value) ? { value, slope: b.dLnRatedLnT9(T9) - a.dLnRatedLnT9(T9) } : { value: 0, slope: 0 };
  };
}

function described(table: RateTable): ComparedEvaluation {
  const { evaluation, citation, uncertaintyBasis, validT9 } = table;
  return { evaluation, citation, uncertaintyBasis, factorUncertainty: typicalFactor(table), validT9 };
}

/** The keys with one evaluation chosen for a reaction, whatever it was chosen by before. */
function withEvaluation(keys: Keys, id: string, name: string): Readonly<Record<string, string>> {
  const others = Object.entries(keys.evaluations ?? {}).filter(([given]) => parseReactionName(given) !== id);
  return { ...Object.fromEntries(others), [id]: name };
}

/**
 * Answers `rates compare`: ratios, sensitivities by temperature (from the adjoint of one run with the reference), and one
 * run per evaluation.
 * @throws {InputError} for an unknown reaction or evaluation (nearest named), nothing to compare, a network without the
 *   reaction where others hold it
 * @throws {CalculationError} if an integration fails
 */
export async function compareRates(
  keys: Keys,
  request: CompareRequest,
  library: RateLibrary,
  progress?: Progress,
): Promise<Envelope<RatesCompareResults>> {
  if (request.reaction.trim() === NEUTRON_PROTON)
    throw new InputError("reaction", "reaction n_p: the weak rates are computed, there are no files to compare");
  const id = library.reactionId(request.reaction);
  const networks = networksOf(library, id);
  const network = keys.network ?? DEFAULTS.network;
  library.network(network);
  const asked = Object.entries(keys.evaluations ?? {}).find(([given]) => parseReactionName(given) === id)?.[1];
  const names = chosenEvaluations(request, id, asked ?? networks.get(network), library);
  const tables = names.map((name) => library.table(id, name));
  const [reference] = names;
  const ratios: RatesCompareResults = {
    action: "compare",
    reaction: id,
    reference,
    evaluations: tables.map(described),
    table: ratioTable(tables, COMPARED_T9),
  };
  if (networks.size === 0) {
    const used = tables.map(({ evaluation, citation, uncertaintyBasis }) => ({
      reaction: id,
      evaluation,
      citation,
      uncertaintyBasis,
    }));
    return ratesEnvelope(keys, ratios, used, [`${id} is in no network: it moves no abundance`]);
  }
  if (!networks.has(network))
    throw new InputError(
      "reaction",
      `network = ${network}: does not hold ${id}; choose ${[...networks.keys()].join(", ")}`,
    );

  const rates = tables.map(evaluateRate);
  const model = await modelFor(
    { ...keys, errors: "none", samples: 0, evaluations: withEvaluation(keys, id, reference) },
    library,
  );
  const p = model.parameters();
  const responses = rateResponses(
    model,
    p,
    id,
    rates.slice(1).map((rate) => lnRatio(rates[0], rate)),
  );
  let { counts } = responses;
  const run = (name: string) => {
    const answer = model.abundances({ evaluations: withEvaluation(keys, id, name) });
    counts = addCounts(counts, answer.solver);
    return answer;
  };
  const central = run(reference);
  const swaps = Object.fromEntries(
    names.slice(1).map((name, a) => {
      progress?.((a + 1) / names.length, "evaluations");
      const { abundances } = run(name);
      const moved = Object.entries(responses.abundances).map(([abundance, response]): [string, SwappedAbundance] => {
        const [before, after] = [central.abundances, abundances].map((of) => of[abundance as keyof typeof of]?.value);
        if (!(before !== undefined && after !== undefined && before > 0))
          throw new CalculationError("not-finite", `${abundance} with ${name}: no value`);
        return [
          abundance,
          { value: after, change: after / before - 1, firstOrder: Math.expm1(response.firstOrder[a]) },
        ];
      });
      return [name, Object.fromEntries(moved)];
    }),
  );
  const abundances = Object.fromEntries(
    Object.entries(responses.abundances).map(([name, response]): [string, ComparedAbundance] => {
      const { firstOrder: _, value: __, ...rest } = response;
      return [name, { value: central.abundances[name as keyof typeof central.abundances]!.value, ...rest }];
    }),
  );
  return makeEnvelope(
    "rates",
    p,
    { ...ratios, abundances, sensitivityT9: responses.T9, swaps },
    nucleosynthesisProvenance(model, p),
    { ...counts, tolerance: p.tolerance },
    central.warnings,
  );
}
