/** The request `rates show`: all fields of one rate, and rate, reverse rate and uncertainty against temperature. */
import { networksOf, typicalFactor } from "../nuclear/catalogue.ts";
import type { RateLibrary } from "../nuclear/library.ts";
import type { NuclideTable } from "../nuclear/nuclide.ts";
import { type RateTable, rateUnit } from "../nuclear/parse-rate-file.ts";
import { evaluateRate } from "../nuclear/rate.ts";
import { NEUTRON_PROTON, qValueMeV } from "../nuclear/reaction.ts";
import { type ReverseRatio, reverseRatio } from "../nuclear/reverse.ts";
import { InputError, requirePositive } from "../numerics/check.ts";
import type { Table } from "../numerics/table.ts";
import type { RatesShowResults } from "../output/rates-result.ts";
import { DEFAULTS, type Keys } from "../parameters/cosmology.ts";
import type { Envelope } from "./envelope.ts";
import { ratesEnvelope } from "./rates-envelope.ts";

/** Temperatures of the table if none are asked for [GK]. */
export const SHOWN_T9: readonly number[] = [
  ...[0.01, 0.02, 0.03, 0.05, 0.07, 0.1, 0.15, 0.2, 0.3, 0.4, 0.5, 0.6, 0.8],
  ...[1, 1.25, 1.5, 2, 3, 5, 7, 10],
];

/** What a rate is asked for with. */
export interface ShowRequest {
  readonly reaction: string;
  /** Name of the evaluation; without it the one that the network uses. */
  readonly evaluation?: string;
  readonly network?: string;
  /** Temperatures of the table [GK]. */
  readonly T9?: readonly number[];
}

/** Temperatures of a chart [GK]: evenly spread over the logarithm, from the end of a run to the top of the tables. */
export const CHART_T9: readonly number[] = Array.from({ length: 241 }, (_, i) => 0.01 * 1000 ** (i / 240));

/** Where a temperature lies in the range that the source claims. */
function claim(T9: number, [low, high]: readonly [number, number]): string {
  return T9 < low ? "below" : T9 > high ? "above" : "inside";
}

/**
 * Rate, f_u and reverse rate at chosen temperatures; `claim` says whether the source vouches for them.
 * @throws {RangeError} if a temperature is not positive
 */
export function rateRows(table: RateTable, ratio: ReverseRatio | null, T9: readonly number[]): Table {
  const { reactants, products } = table.reaction;
  const rate = evaluateRate(table);
  const columns = ["T9", "rate", "f_u", ...(ratio ? ["reverse_rate", "ln_reverse_over_forward"] : []), "claim"];
  const units = ["GK", rateUnit(reactants.length), "1", ...(ratio ? [rateUnit(products.length), "1"] : []), ""];
  const rows = T9.map((each) => {
    requirePositive("T9", each, "GK");
    const ln = rate.lnRate(each);
    const back = ratio ? [Math.exp(ln + ratio.lnRatio(each)), ratio.lnRatio(each)] : [];
    return [each, Math.exp(ln), Math.exp(rate.lnFactorUncertainty(each)), ...back, claim(each, table.validT9)];
  });
  return { columns, units, rows };
}

/** Standard deviation of Q from the mass uncertainties, each nuclide's counted as often as it changes [keV]. */
function qSigma({ reaction }: RateTable, nuclides: NuclideTable): number {
  const net = new Map<string, number>();
  for (const id of reaction.reactants) net.set(id, (net.get(id) ?? 0) + 1);
  for (const id of reaction.products) net.set(id, (net.get(id) ?? 0) - 1);
  let sum = 0;
  for (const [id, count] of net) sum += (count * nuclides.get(id)!.massExcessUncertainty) ** 2;
  return Math.sqrt(sum);
}

/**
 * The evaluation that is meant: the one named, else the one of the network, else the one of the smallest network that
 * holds the reaction, else the only one there is.
 * @throws {InputError} if the choice is not clear
 */
export function chooseEvaluation(library: RateLibrary, id: string, name?: string, network?: string): string {
  if (name !== undefined) return library.table(id, name).evaluation;
  const choices = networksOf(library, id);
  if (network !== undefined) {
    library.network(network);
    const chosen = choices.get(network);
    if (chosen !== undefined) return chosen;
    throw new InputError("reaction", `network = ${network}: does not hold ${id}; ${placesOf(choices)}`);
  }
  const chosen = choices.get(DEFAULTS.network) ?? [...choices.values()][0];
  if (chosen !== undefined) return chosen;
  const all = library.evaluations(id);
  if (all.length === 1) return all[0];
  throw new InputError("evaluation", `${id} is in no network: say which evaluation, of ${all.join(", ")}`);
}

function placesOf(choices: ReadonlyMap<string, string>): string {
  return choices.size > 0 ? `it is in ${[...choices.keys()].join(", ")}` : "it is in no network";
}

/**
 * Answers `rates show`.
 * @throws {InputError} for an unknown reaction, evaluation or network (nearest named), {RateFileError} for a damaged file
 */
export function showRate(request: ShowRequest, library: RateLibrary): Envelope<RatesShowResults> {
  if (request.reaction === NEUTRON_PROTON)
    throw new InputError("reaction", "reaction n_p: the weak rates are computed, there is no file; see history");
  const id = library.reactionId(request.reaction);
  const table = library.table(id, chooseEvaluation(library, id, request.evaluation, request.network));
  const ratio = reverseRatio(table.reaction, library.nuclides);
  const networks = networksOf(library, id);
  const results: RatesShowResults = {
    action: "show",
    reaction: id,
    equation: table.reaction.equation,
    evaluation: table.evaluation,
    evaluations: library.evaluations(id),
    networks: [...networks.keys()],
    usedBy: [...networks].filter(([, name]) => name === table.evaluation).map(([network]) => network),
    file: table.file,
    kind: table.kind,
    citation: table.citation,
    ...(table.doi ? { doi: table.doi } : {}),
    origin: table.origin,
    ...(table.basis ? { basis: table.basis } : {}),
    uncertaintyBasis: table.uncertaintyBasis,
    factorUncertainty: typicalFactor(table),
    qValue_keV: table.qValueKeV,
    qValueFromMasses_keV: 1000 * qValueMeV(table.reaction, library.nuclides),
    qValueSigma_keV: qSigma(table, library.nuclides),
    ...(table.tableT9 ? { tableT9: table.tableT9, tableRows: table.T9.length } : {}),
    validT9: table.validT9,
    ...(table.note ? { note: table.note } : {}),
    ...(table.entered ? { entered: table.entered } : {}),
    ...(table.terms.length > 0 ? { terms: table.terms } : {}),
    ...(table.kind === "decay" ? { halfLife_s: Math.LN2 / table.rate[0] } : {}),
    ...(ratio ? { detailedBalance: { lnConstant: ratio.constant, power: ratio.power, qOverK_GK: ratio.qOverK } } : {}),
    table: rateRows(table, ratio, request.T9 ?? SHOWN_T9),
  };
  const keys: Keys = request.network === undefined ? {} : { network: request.network };
  const { evaluation, citation, uncertaintyBasis } = table;
  return ratesEnvelope(keys, results, [{ reaction: id, evaluation, citation, uncertaintyBasis }]);
}
