/** Final abundances by their stated definitions, after all decays of lifetimes below 1e9 s. */
import { heliumMassFraction } from "../parameters/helium.ts";

/** Names of the abundances every network reports, in the order of the output. */
export const ABUNDANCE_NAMES = ["Yp", "YpMass", "dToH", "tToH", "he3ToH", "li6ToH", "li7ToH"] as const;
/** Further abundances of the networks that reach carbon and beyond. */
export const HEAVY_ABUNDANCE_NAMES = ["be9ToH", "b10ToH", "b11ToH", "cnoToH"] as const;

export type AbundanceName = (typeof ABUNDANCE_NAMES)[number] | (typeof HEAVY_ABUNDANCE_NAMES)[number];

/** Networks for which the heavy abundances are reported. */
export const HEAVY_NETWORKS: readonly string[] = ["extended", "wide"];

/**
 * Abundances that are orders of magnitude only. The reactions that make and destroy these nuclides at the energies of the
 * early Universe are measured in part or not at all, and hardly any of their rates has a published uncertainty.
 */
export const ORDER_OF_MAGNITUDE: readonly AbundanceName[] = HEAVY_ABUNDANCE_NAMES;
/** The warning that says so. */
export const ORDER_OF_MAGNITUDE_REASON =
  "9Be, 10B, 11B and CNO are orders of magnitude only: many of their rates are old compilations or estimates, nearly all uncertainties are assumed";

/** What is needed to sum nuclides: id and charge. */
export interface Species {
  readonly id: string;
  readonly Z: number;
}

/** Definition of each abundance, as printed with the results. */
export const DEFINITIONS: Readonly<Record<AbundanceName, string>> = {
  Yp: "4 n_He4/n_b, nucleon fraction",
  YpMass: "helium mass fraction of neutral H + He",
  dToH: "D/H by number",
  tToH: "T/H by number, before its decay",
  he3ToH: "3He/H by number, T included",
  li6ToH: "6Li/H by number",
  li7ToH: "7Li/H by number, 7Be included",
  be9ToH: "9Be/H by number",
  b10ToH: "10B/H by number, 10C included",
  b11ToH: "11B/H by number, 11C included",
  cnoToH: "Z = 6, 7, 8 but 10C, 11C, to H by number",
};

/**
 * Abundances from the final state of a network.
 * @param species nuclides of the network in the order of Y
 * @param Y n_i/n_b at the end of the run
 * @param heavy report 9Be, 10B, 11B and CNO too
 * @returns numbers by the definitions of {@link DEFINITIONS}; free neutrons left count as hydrogen (they decay)
 */
export function finalAbundances(
  species: readonly Species[],
  Y: ArrayLike<number>,
  heavy: boolean,
): Partial<Record<AbundanceName, number>> {
  const of = (...ids: string[]) => {
    let sum = 0;
    for (let i = 0; i < species.length; i++) if (ids.includes(species[i].id)) sum += Y[i];
    return sum;
  };
  const hydrogen = of("p", "n");
  const helium = of("he4");
  const result: Partial<Record<AbundanceName, number>> = {
    Yp: 4 * helium,
    YpMass: heliumMassFraction(helium / hydrogen),
    dToH: of("d") / hydrogen,
    tToH: of("t") / hydrogen,
    he3ToH: of("he3", "t") / hydrogen,
    li6ToH: of("li6", "he6") / hydrogen,
    li7ToH: of("li7", "be7") / hydrogen,
  };
  if (heavy) {
    let cno = 0;
    species.forEach((x, i) => {
      if (x.Z >= 6 && x.Z <= 8 && x.id !== "c10" && x.id !== "c11") cno += Y[i];
    });
    // 17F and 18F decay to oxygen; 12B, 13B, 14B to carbon; 12N and 13N stay within the sum.
    cno += of("f17", "f18", "b12", "b13", "b14");
    result.be9ToH = of("be9", "li9") / hydrogen;
    result.b10ToH = of("b10", "c10") / hydrogen;
    result.b11ToH = of("b11", "c11", "be11") / hydrogen;
    result.cnoToH = cno / hydrogen;
  }
  return result;
}
