/** The request `rates list`: every evaluation of a library, or of a part of it. */
import { type CatalogueEntry, type CatalogueFilter, catalogue } from "../nuclear/catalogue.ts";
import type { RateLibrary } from "../nuclear/library.ts";
import type { Table } from "../numerics/table.ts";
import type { ListedRate, RatesListResults } from "../output/rates-result.ts";
import type { Envelope } from "./envelope.ts";
import { ratesEnvelope } from "./rates-envelope.ts";

function listed({ table, networks, usedBy, factor }: CatalogueEntry): ListedRate {
  return {
    reaction: table.reaction.id,
    evaluation: table.evaluation,
    networks,
    usedBy,
    factorUncertainty: factor,
    uncertaintyBasis: table.uncertaintyBasis,
    ...(table.basis ? { basis: table.basis } : {}),
    kind: table.kind,
    validT9: table.validT9,
    qValue_keV: table.qValueKeV,
    citation: table.citation,
  };
}

/** One row an evaluation; f_u is the typical one. */
function listTable(rates: readonly ListedRate[]): Table {
  return {
    columns: [
      ...["reaction", "evaluation", "used_by", "kind", "basis", "f_u", "uncertainty_basis"],
      ...["valid_T9_from", "valid_T9_to", "q_value_keV", "citation"],
    ],
    units: ["", "", "", "", "", "1", "", "GK", "GK", "keV", ""],
    rows: rates.map((rate) => [
      rate.reaction,
      rate.evaluation,
      rate.usedBy.join(" "),
      rate.kind,
      rate.basis ?? "",
      rate.factorUncertainty,
      rate.uncertaintyBasis,
      ...rate.validT9,
      rate.qValue_keV,
      rate.citation,
    ]),
  };
}

/**
 * Answers `rates list`.
 * @throws {InputError} for an unknown network, nuclide or reaction; {RateFileError} for a damaged file
 */
export function listRates(filter: CatalogueFilter, library: RateLibrary): Envelope<RatesListResults> {
  const rates = catalogue(library, filter).map(listed);
  const results: RatesListResults = {
    action: "list",
    reactions: new Set(rates.map((rate) => rate.reaction)).size,
    evaluations: rates.length,
    rates,
    table: listTable(rates),
  };
  return ratesEnvelope(filter.network === undefined ? {} : { network: filter.network }, results);
}
