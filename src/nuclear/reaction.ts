/** Reactions: ids, equations, conservation of A and Z, Q-values from masses. */
import { InputError } from "../numerics/check.ts";
import { type NuclideTable, nuclideFromText, nuclideNumbers } from "./nuclide.ts";

/** A reaction or decay in its forward direction. Nuclides repeat as often as they take part; the photon is not listed. */
export interface Reaction {
  /** Target, projectile _ ejectiles, residual, photon as `gamma`: `d-p_gamma-he3`; a decay: `t_he3`. */
  readonly id: string;
  /** Target first: the heaviest, but he4 counts as the projectile on d, t, he3. */
  readonly reactants: readonly string[];
  /** Lightest first. */
  readonly products: readonly string[];
  /** `t + d -> he4 + n`: target first, residual first. */
  readonly equation: string;
  /** One reactant: a beta decay, which changes the charge by one. */
  readonly isDecay: boolean;
}

/** The id of the computed weak rates n <-> p, which no file holds. */
export const NEUTRON_PROTON = "n_p";

function lightFirst(a: string, b: string): number {
  const [x, y] = [nuclideNumbers(a)!, nuclideNumbers(b)!];
  return x.A - y.A || x.Z - y.Z;
}

/** Target before projectile: the heavier first, but an alpha particle is the projectile on d, t and he3. */
function targetFirst(reactants: readonly string[]): string[] {
  const sorted = [...reactants].sort((a, b) => lightFirst(b, a));
  const alphaOnLighter = sorted.length === 2 && sorted[0] === "he4" && ["d", "t", "he3"].includes(sorted[1]);
  return alphaOnLighter ? sorted.reverse() : sorted;
}

/**
 * A reaction from its nuclides in any order.
 * @throws {InputError} for an unknown name, no reactant or no product, or if A (and Z; in a decay Z changes by one) is not conserved
 */
export function makeReaction(reactants: readonly string[], products: readonly string[]): Reaction {
  const shown = `${reactants.join(" + ")} -> ${products.join(" + ")}`;
  if (reactants.length === 0 || products.length === 0)
    throw new InputError("reaction", `${shown}: a reaction needs reactants and products`);
  for (const id of [...reactants, ...products])
    if (!nuclideNumbers(id))
      throw new InputError("reaction", `${shown}: unknown nuclide ${id} (names are n p d t he3 he4 li6 ...)`);
  const total = (ids: readonly string[], q: "A" | "Z") => ids.reduce((sum, id) => sum + nuclideNumbers(id)![q], 0);
  const isDecay = reactants.length === 1;
  for (const q of ["A", "Z"] as const) {
    const [before, after] = [total(reactants, q), total(products, q)];
    const conserved = isDecay && q === "Z" ? Math.abs(after - before) === 1 : before === after;
    if (!conserved) {
      const rule = isDecay && q === "Z" ? "a beta decay changes Z by one, here" : `${q} is not conserved:`;
      throw new InputError("reaction", `${shown}: ${rule} ${before} -> ${after}`);
    }
  }
  const sortedReactants = targetFirst(reactants);
  const sortedProducts = [...products].sort(lightFirst);
  const photon = !isDecay && products.length === 1 ? ["gamma"] : [];
  return {
    id: `${sortedReactants.join("-")}_${[...photon, ...sortedProducts].join("-")}`,
    reactants: sortedReactants,
    products: sortedProducts,
    equation: `${sortedReactants.join(" + ")} -> ${[...sortedProducts].reverse().join(" + ")}`,
    isDecay,
  };
}

/** The id of a reaction given its nuclides in any order. @throws {InputError} as {@link makeReaction} */
export function reactionId(reactants: readonly string[], products: readonly string[]): string {
  return makeReaction(reactants, products).id;
}

/**
 * Parses `t + d -> he4 + n` (nuclides in any order; `gamma` may be written on the right and is dropped).
 * @throws {InputError} if it is no equation, or as {@link makeReaction}
 */
export function parseEquation(text: string): Reaction {
  const sides = text.split(/->|→/);
  if (sides.length !== 2) throw new InputError("reaction", `${text}: not an equation like t + d -> he4 + n`);
  const [left, right] = sides.map((side) =>
    side
      .split("+")
      .map((part) => part.trim())
      .map((part) => nuclideFromText(part) ?? part),
  );
  return makeReaction(
    left,
    right.filter((part) => !["gamma", "γ", "g"].includes(part.toLowerCase())),
  );
}

/**
 * Parses an id such as `d-p_gamma-he3` (in any order of the nuclides on a side).
 * @throws {InputError} if it is no id, or as {@link makeReaction}
 */
export function parseReactionId(id: string): Reaction {
  const sides = id.split("_");
  if (sides.length !== 2) throw new InputError("reaction", `${id}: not a reaction id like d-p_gamma-he3`);
  const [left, right] = sides.map((side) => side.split("-"));
  return makeReaction(
    left,
    right.filter((part) => part !== "gamma"),
  );
}

/** How often each nuclide occurs in a list, in order of first occurrence. */
export function multiplicities(ids: readonly string[]): ReadonlyMap<string, number> {
  const counts = new Map<string, number>();
  for (const id of ids) counts.set(id, (counts.get(id) ?? 0) + 1);
  return counts;
}

/**
 * Q-value from the atomic mass excesses: sum over reactants minus sum over products. In beta+ decays this is the
 * energy of electron capture, as in mass tables.
 * @returns Q [MeV]
 * @throws {InputError} if a nuclide is not in the table
 * @see Wang et al. 2021, Chin. Phys. C 45, 030003
 */
export function qValueMeV(reaction: Pick<Reaction, "reactants" | "products">, nuclides: NuclideTable): number {
  const excess = (ids: readonly string[]) =>
    ids.reduce((sum, id) => {
      const nuclide = nuclides.get(id);
      if (!nuclide) throw new InputError("nuclide", `unknown nuclide ${id}: not in nuclides.csv`);
      return sum + nuclide.massExcess;
    }, 0);
  return (excess(reaction.reactants) - excess(reaction.products)) / 1000;
}
