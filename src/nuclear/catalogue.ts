/** What a library holds, evaluation by evaluation: which networks use it, how uncertain it is, where it is valid. */
import { InputError } from "../numerics/check.ts";
import type { RateLibrary } from "./library.ts";
import { nuclideFromText } from "./nuclide.ts";
import type { RateTable } from "./parse-rate-file.ts";
import { evaluateRate } from "./rate.ts";
import { parseReactionId } from "./reaction.ts";
import { suggestNearest } from "./reaction-name.ts";

/** One evaluation of one reaction. */
export interface CatalogueEntry {
  readonly table: RateTable;
  /** Networks that hold the reaction. */
  readonly networks: readonly string[];
  /** Those of them that use this evaluation. */
  readonly usedBy: readonly string[];
  /** Typical f_u, see {@link typicalFactor}. */
  readonly factor: number;
}

/** Which part of a library is wanted; all of it where nothing is set. */
export interface CatalogueFilter {
  /** Reactions of this network. */
  readonly network?: string;
  /** Reactions that hold this nuclide, on either side. */
  readonly nuclide?: string;
  /** One reaction, in any notation. */
  readonly reaction?: string;
}

/** Temperatures over which a typical uncertainty is the mean [GK]: all light elements are made there. */
export const TYPICAL_T9 = [0.1, 1] as const;
const TYPICAL_POINTS = 16;

/** exp of the mean of ln f_u over ln T9 from 0.1 to 1. */
export function typicalFactor(table: RateTable): number {
  if (table.kind !== "table") return table.factorUncertainty[0];
  const { lnFactorUncertainty } = evaluateRate(table);
  const [low, high] = TYPICAL_T9;
  let sum = 0;
  for (let i = 0; i < TYPICAL_POINTS; i++)
    sum += lnFactorUncertainty(low * (high / low) ** ((i + 0.5) / TYPICAL_POINTS));
  return Math.exp(sum / TYPICAL_POINTS);
}

/** Network -> evaluation that it uses, for the networks that hold a reaction; small networks first. */
export function networksOf(library: RateLibrary, reaction: string): ReadonlyMap<string, string> {
  const bySize = [...library.networkNames].sort((a, b) => library.network(a).length - library.network(b).length);
  return new Map(
    bySize.flatMap((name) =>
      library
        .network(name)
        .filter((entry) => entry.reaction === reaction)
        .map((entry) => [name, entry.evaluation] as const),
    ),
  );
}

/** @throws {InputError} naming the nearest nuclide of the table */
function resolveNuclide(library: RateLibrary, name: string): string {
  const id = nuclideFromText(name) ?? name;
  if (library.nuclides.has(id)) return id;
  const nearest = suggestNearest(name, library.nuclides.keys());
  throw new InputError(
    "nuclide",
    `nuclide = ${name}: not in nuclides.csv; ${nearest ? `did you mean ${nearest}?` : "write be7 or 7Be"}`,
  );
}

/**
 * The evaluations of a library: decays first, then by the mass of the target and of what hits it; alternatives by name.
 * @throws {InputError} for an unknown network, nuclide or reaction (nearest named), {RateFileError} for a damaged file
 */
export function catalogue(library: RateLibrary, filter: CatalogueFilter = {}): CatalogueEntry[] {
  const nuclide = filter.nuclide === undefined ? undefined : resolveNuclide(library, filter.nuclide);
  const wanted = filter.reaction === undefined ? library.reactions : [library.reactionId(filter.reaction)];
  const ofNetwork =
    filter.network === undefined ? undefined : new Set(library.network(filter.network).map((entry) => entry.reaction));
  const weight = (id: string) => {
    const { A, Z } = library.nuclide(id);
    return 100 * A + Z;
  };
  const chosen = wanted
    .map(parseReactionId)
    .filter(({ id }) => ofNetwork === undefined || ofNetwork.has(id))
    .filter(({ reactants, products }) => nuclide === undefined || [...reactants, ...products].includes(nuclide))
    .map((reaction) => ({ id: reaction.id, key: [reaction.isDecay ? 0 : 1, ...reaction.reactants.map(weight)] }))
    .sort((a, b) => compareKeys(a.key, b.key) || a.id.localeCompare(b.id));
  return chosen.flatMap(({ id }) => {
    const networks = networksOf(library, id);
    return library.evaluations(id).map((name): CatalogueEntry => {
      const table = library.table(id, name);
      return {
        table,
        networks: [...networks.keys()],
        usedBy: [...networks].filter(([, evaluation]) => evaluation === name).map(([network]) => network),
        factor: typicalFactor(table),
      };
    });
  });
}

function compareKeys(a: readonly number[], b: readonly number[]): number {
  for (let i = 0; i < Math.min(a.length, b.length); i++) if (a[i] !== b[i]) return a[i] - b[i];
  return a.length - b.length;
}
