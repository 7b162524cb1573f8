/** Nuclides: names, charge and mass numbers, masses, spins; parse of rates/nuclides.csv. */
import { ATOMIC_MASS_CONSTANT, ELECTRON_MASS } from "../constants/codata.ts";
import { errorAt, parseCsv } from "./csv-rows.ts";

/** The ground state of one nucleus. */
export interface Nuclide {
  /** Our name: n p d t he3 he4 li6 ... */
  readonly id: string;
  readonly Z: number;
  readonly A: number;
  /** Atomic mass excess, with Z electrons [keV]. */
  readonly massExcess: number;
  /** One standard deviation [keV]. */
  readonly massExcessUncertainty: number;
  /** Total angular momentum J of the ground state. */
  readonly spin: number;
  /** [s]; Infinity if stable. The neutron's is listed but never used: tau_n is a parameter. */
  readonly halfLife: number;
  /** Mass of the bare nucleus, see {@link nuclearMassMeV} [MeV/c2]. */
  readonly nuclearMassMeV: number;
  readonly source: string;
}

export type NuclideTable = ReadonlyMap<string, Nuclide>;

/** Element symbols by charge number; Z = 0 stands for the neutron. */
const SYMBOLS = [
  "n",
  "H",
  "He",
  "Li",
  "Be",
  "B",
  "C",
  "N",
  "O",
  "F",
  "Ne",
  "Na",
  "Mg",
  "Al",
  "Si",
  "P",
  "S",
  "Cl",
  "Ar",
];
const OWN_NAMES: Readonly<Record<string, { Z: number; A: number }>> = {
  n: { Z: 0, A: 1 },
  p: { Z: 1, A: 1 },
  d: { Z: 1, A: 2 },
  t: { Z: 1, A: 3 },
};
const SUPERSCRIPTS = "⁰¹²³⁴⁵⁶⁷⁸⁹";

/**
 * Charge and mass number that a name such as `he3` or `p` stands for.
 * @returns undefined if the name is none of ours (hydrogen isotopes are p, d, t; elements up to argon)
 */
export function nuclideNumbers(id: string): { readonly Z: number; readonly A: number } | undefined {
  if (Object.hasOwn(OWN_NAMES, id)) return OWN_NAMES[id];
  const match = /^([a-z]{1,2})([1-9]\d{0,2})$/.exec(id);
  if (!match) return undefined;
  const Z = SYMBOLS.findIndex((symbol, z) => z > 1 && symbol.toLowerCase() === match[1]);
  const A = Number(match[2]);
  return Z > 1 && A >= Z ? { Z, A } : undefined;
}

/** Our name of the nuclide with charge Z and mass number A: n p d t he3 ... */
export function nuclideId(Z: number, A: number): string {
  const own = Object.entries(OWN_NAMES).find(([, own]) => own.Z === Z && own.A === A);
  return own ? own[0] : `${SYMBOLS[Z].toLowerCase()}${A}`;
}

/**
 * Name of one nuclide as written by a person -> our name: `3He`, `³He`, `He3`, `he3`, `1H`, `a`, `alpha`, `α`.
 * @returns undefined if it is no nuclide's name
 */
export function nuclideFromText(text: string): string | undefined {
  const plain = text
    .trim()
    .replace(/[⁰¹²³⁴⁵⁶⁷⁸⁹]/g, (digit) => String(SUPERSCRIPTS.indexOf(digit)))
    .toLowerCase();
  if (plain === "a" || plain === "alpha" || plain === "α") return "he4";
  if (nuclideNumbers(plain)) return plain;
  const match = /^(\d{1,3})([a-z]{1,2})$/.exec(plain) ?? /^([a-z]{1,2})(\d{1,3})$/.exec(plain);
  if (!match) return undefined;
  const [symbol, mass] = /^\d/.test(match[1]) ? [match[2], match[1]] : [match[1], match[2]];
  if (symbol === "h") return { "1": "p", "2": "d", "3": "t" }[mass];
  return nuclideNumbers(`${symbol}${mass}`) ? `${symbol}${mass}` : undefined;
}

/** A nuclide for display: `³He`, `⁷Li`; n, p, d, t stay as they are. */
export function formatNuclide(id: string): string {
  const numbers = nuclideNumbers(id);
  if (!numbers || Object.hasOwn(OWN_NAMES, id)) return id;
  return [...String(numbers.A)].map((digit) => SUPERSCRIPTS[Number(digit)]).join("") + SYMBOLS[numbers.Z];
}

/**
 * Mass of the bare nucleus from the atomic mass excess: A u + excess - Z m_e. The binding energy of the electrons
 * (14 eV in H, 2 keV in O) is neglected: 1e-7 of kT at T9 = 1 for the light nuclides.
 * @param massExcess atomic mass excess [keV]
 * @returns [MeV/c2]
 * @see Wang et al. 2021, Chin. Phys. C 45, 030003, eq. (1) for what the mass excess includes
 */
export function nuclearMassMeV(Z: number, A: number, massExcess: number): number {
  return A * ATOMIC_MASS_CONSTANT.value + massExcess / 1000 - Z * ELECTRON_MASS.value;
}

/** Columns of rates/nuclides.csv. */
export const NUCLIDE_COLUMNS = [
  "id",
  "Z",
  "A",
  "mass_excess_keV",
  "mass_excess_uncertainty_keV",
  "spin",
  "half_life_s",
  "source",
] as const;

/**
 * Parses rates/nuclides.csv (columns {@link NUCLIDE_COLUMNS}; half_life_s `stable` or seconds).
 * @param file path shown in messages
 * @returns nuclides by id, in the order of the file
 * @throws {InputError} file:line, for a name that does not fit Z and A, a repeated name, or a value that is no number
 */
export function parseNuclides(text: string, file = "rates/nuclides.csv"): NuclideTable {
  const table = new Map<string, Nuclide>();
  for (const { line, cells } of parseCsv({ file, text }, NUCLIDE_COLUMNS)) {
    const number = (column: string, min: number): number => {
      const value = cells[column] === "" ? Number.NaN : Number(cells[column]);
      if (!(value >= min && value < Number.POSITIVE_INFINITY))
        throw errorAt(
          file,
          line,
          `${column} = ${cells[column]}: must be a number${min > -1e9 ? ` of at least ${min}` : ""}`,
        );
      return value;
    };
    const { id, source } = cells;
    const Z = number("Z", 0);
    const A = number("A", 1);
    const named = nuclideNumbers(id);
    if (!named) throw errorAt(file, line, `id = ${id}: not a nuclide's name (n p d t he3 he4 li6 ...)`);
    if (named.Z !== Z || named.A !== A)
      throw errorAt(file, line, `${id} has Z = ${named.Z}, A = ${named.A}, but the row says Z = ${Z}, A = ${A}`);
    if (table.has(id)) throw errorAt(file, line, `${id} is listed twice`);
    if (source === "") throw errorAt(file, line, `${id}: source missing`);
    const spin = number("spin", 0);
    if (!Number.isInteger(2 * spin)) throw errorAt(file, line, `spin = ${spin}: must be a multiple of 1/2`);
    const massExcess = number("mass_excess_keV", -1e9);
    table.set(id, {
      id,
      Z,
      A,
      massExcess,
      massExcessUncertainty: number("mass_excess_uncertainty_keV", 0),
      spin,
      halfLife: cells.half_life_s === "stable" ? Number.POSITIVE_INFINITY : number("half_life_s", 0),
      nuclearMassMeV: nuclearMassMeV(Z, A, massExcess),
      source,
    });
  }
  return table;
}

/**
 * Binding energy Z M(1H) + (A - Z) m_n - M of a nuclide from atomic mass excesses [MeV].
 * @see Wang et al. 2021, Chin. Phys. C 45, 030003
 */
export function bindingEnergyMeV(id: string, nuclides: NuclideTable): number {
  const { Z, A, massExcess } = nuclides.get(id)!;
  return (Z * nuclides.get("p")!.massExcess + (A - Z) * nuclides.get("n")!.massExcess - massExcess) / 1000;
}
