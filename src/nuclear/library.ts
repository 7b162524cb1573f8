/** The rate library: reactions, their evaluations, the networks that select among them; overlay of a second library. */
import { InputError } from "../numerics/check.ts";
import { errorAt, parseCsv, type TextFile } from "./csv-rows.ts";
import { type Nuclide, type NuclideTable, parseNuclides } from "./nuclide.ts";
import { parseRateFile, type RateTable } from "./parse-rate-file.ts";
import { NEUTRON_PROTON, parseReactionId, type Reaction } from "./reaction.ts";
import { resolveReaction, suggestNearest } from "./reaction-name.ts";

/** Where the texts of a library come from: a folder, a bundle, or one laid over another. */
export interface LibraryFiles {
  /** Names in a folder (`""` for the top); empty if there is none. */
  list(folder: string): readonly string[];
  /** A file by its path from the top, e.g. `t-d_n-he4/desouza2019.ecsv`; undefined if there is none. */
  read(path: string): TextFile | undefined;
}

/** One line of a network: which evaluation it uses for a reaction. */
export interface NetworkEntry {
  readonly reaction: string;
  readonly evaluation: string;
  /** Shown path and line of the network file. */
  readonly file: string;
  readonly line: number;
}

/** What the network solver needs for one reaction. */
export interface SelectedReaction {
  readonly reaction: Reaction;
  readonly rateTable: RateTable;
  readonly evaluationName: string;
}

/** Rates as data. Every file is read and parsed when first asked for, and once. */
export interface RateLibrary {
  readonly files: LibraryFiles;
  readonly nuclides: NuclideTable;
  /** One nuclide. @throws {InputError} if the table has none of this name */
  nuclide(id: string): Nuclide;
  /** Id of a reaction given as id, equation or in trade notation. @throws {InputError} for an unknown one (nearest named) */
  reactionId(name: string): string;
  /** Names of the networks. */
  readonly networkNames: readonly string[];
  /** Ids of the reactions that have a folder. */
  readonly reactions: readonly string[];
  /** @throws {InputError} for an unknown network (nearest named), a damaged list */
  network(name: string): readonly NetworkEntry[];
  /** Names of a reaction's evaluations. @throws {InputError} for an unknown reaction (nearest named) */
  evaluations(reaction: string): readonly string[];
  /** One rate file. @throws {InputError} for an unknown reaction or evaluation (nearest named), {RateFileError} if damaged */
  table(reaction: string, evaluation: string): RateTable;
}

const RATE_ENDING = ".ecsv";

/** Texts by path -> files of a library. @param shownRoot how the top is named in messages */
export function filesFromTexts(texts: ReadonlyMap<string, string>, shownRoot = "rates"): LibraryFiles {
  return {
    list(folder) {
      const prefix = folder === "" ? "" : `${folder}/`;
      const names = [...texts.keys()].filter((path) => path.startsWith(prefix));
      return [...new Set(names.map((path) => path.slice(prefix.length).split("/")[0]))].sort();
    },
    read(path) {
      const text = texts.get(path);
      return text === undefined ? undefined : { file: `${shownRoot}/${path}`, text };
    },
  };
}

function once<T>(make: () => T): () => T {
  let value: { readonly made: T } | undefined;
  return () => {
    value ??= { made: make() };
    return value.made;
  };
}

function readNetwork(source: TextFile): readonly NetworkEntry[] {
  const seen = new Set<string>();
  return parseCsv(source, ["reaction", "evaluation"]).map(({ line, cells: { reaction, evaluation } }) => {
    let id: string;
    try {
      id = parseReactionId(reaction).id;
    } catch (error) {
      throw error instanceof InputError ? errorAt(source.file, line, error.message) : error;
    }
    if (id !== reaction) throw errorAt(source.file, line, `reaction ${reaction}: write ${id}`);
    if (seen.has(id))
      throw errorAt(source.file, line, `reaction ${id} is listed twice; sets of one reaction belong in one file`);
    seen.add(id);
    return { reaction, evaluation, file: source.file, line };
  });
}

/**
 * A library from its files: a map path -> text (pages, tests), or a reader (node). Nothing is parsed until it is used.
 * @throws {InputError} from its members, when they are used
 */
export function buildLibrary(source: ReadonlyMap<string, string> | LibraryFiles): RateLibrary {
  const files = source instanceof Map ? filesFromTexts(source) : (source as LibraryFiles);
  const nuclides = once(() => {
    const found = files.read("nuclides.csv");
    if (!found) throw new InputError("library", "nuclides.csv is missing from the rate library");
    return parseNuclides(found.text, found.file);
  });
  const reactions = once(() => files.list("").filter((name) => name.includes("_") && !name.includes(".")));
  const networkNames = once(() =>
    files
      .list("networks")
      .filter((name) => name.endsWith(".csv"))
      .map((name) => name.slice(0, -".csv".length)),
  );
  const networks = new Map<string, readonly NetworkEntry[]>();
  const tables = new Map<string, RateTable>();
  const known = (reaction: string) => {
    if (!reactions().includes(reaction)) resolveReaction(reaction, reactions());
    return files
      .list(reaction)
      .filter((name) => name.endsWith(RATE_ENDING))
      .map((name) => name.slice(0, -RATE_ENDING.length))
      .sort();
  };
  return {
    files,
    get nuclides() {
      return nuclides();
    },
    nuclide(id) {
      const found = nuclides().get(id);
      if (!found) throw new InputError("nuclide", `nuclide ${id}: not in nuclides.csv`);
      return found;
    },
    reactionId: (name) => resolveReaction(name, reactions()),
    get networkNames() {
      return networkNames();
    },
    get reactions() {
      return reactions();
    },
    network(name) {
      const parsed = networks.get(name);
      if (parsed) return parsed;
      const found = /^[\w-]+$/.test(name) ? files.read(`networks/${name}.csv`) : undefined;
      if (!found) throw unknown("network", name, networkNames());
      const entries = readNetwork(found);
      networks.set(name, entries);
      return entries;
    },
    evaluations: known,
    table(reaction, evaluation) {
      const path = `${reaction}/${evaluation}${RATE_ENDING}`;
      const parsed = tables.get(path);
      if (parsed) return parsed;
      const found = /^[\w-]+$/.test(evaluation) ? files.read(path) : undefined;
      if (!found) throw unknown(`evaluation of ${reaction}`, evaluation, known(reaction));
      const table = parseRateFile(found, nuclides());
      tables.set(path, table);
      return table;
    },
  };
}

function unknown(what: string, name: string, accepted: readonly string[]): InputError {
  const nearest = suggestNearest(name, accepted);
  return new InputError(
    "choice",
    `${what} = ${name.trim() === "" ? JSON.stringify(name) : name}: unknown; accepted are ${accepted.join(", ")}${nearest ? `; did you mean ${nearest}?` : ""}`,
  );
}

/**
 * A library laid over another: a file of `second` replaces the file of the same path, everything else stays. A new
 * evaluation is there to be selected; only a network file (or the evaluations asked for) selects it.
 */
export function overlay(base: RateLibrary, second: RateLibrary): RateLibrary {
  return buildLibrary({
    list: (folder) => [...new Set([...base.files.list(folder), ...second.files.list(folder)])].sort(),
    read: (path) => second.files.read(path) ?? base.files.read(path),
  });
}

/**
 * The reactions of a network with the evaluation of each, as its file says or as asked for.
 * @param evaluations reaction (id or trade notation) -> evaluation, instead of the network's choice
 * @throws {InputError} for an unknown network, reaction or evaluation (nearest named), {RateFileError} for a damaged file
 */
export function selectNetwork(
  library: RateLibrary,
  networkName: string,
  evaluations: Readonly<Record<string, string>> = {},
): readonly SelectedReaction[] {
  const entries = library.network(networkName);
  const ids = entries.map((entry) => entry.reaction);
  const asked = new Map<string, string>();
  for (const [name, evaluation] of Object.entries(evaluations)) {
    if (name === NEUTRON_PROTON)
      throw new InputError(
        "evaluation",
        `evaluation ${name}: the weak rates n <-> p are computed, there is no file to choose`,
      );
    const id = resolveReaction(name, ids, `network ${networkName}, evaluation of`);
    if (asked.has(id)) throw new InputError("evaluation", `evaluation ${name}: ${id} is given twice`);
    asked.set(id, evaluation);
  }
  return entries.map((entry) => {
    const wanted = asked.get(entry.reaction);
    const evaluationName = wanted ?? entry.evaluation;
    if (wanted === undefined && !library.files.read(`${entry.reaction}/${entry.evaluation}${RATE_ENDING}`))
      throw errorAt(
        entry.file,
        entry.line,
        `no file ${entry.reaction}/${entry.evaluation}${RATE_ENDING} in the library`,
      );
    const rateTable = library.table(entry.reaction, evaluationName);
    return { reaction: rateTable.reaction, rateTable, evaluationName };
  });
}
