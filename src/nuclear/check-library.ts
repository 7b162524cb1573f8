/** All checks of a rate library beyond what the loader refuses: jumps, duplicates, dead ends, use outside the claim. */
import { EmberlineError } from "../numerics/check.ts";
import { checkTable, type Severity } from "./check-table.ts";
import type { RateLibrary } from "./library.ts";
import type { RateTable } from "./parse-rate-file.ts";
import { makeReaction, multiplicities, parseReactionId, type Reaction } from "./reaction.ts";
import { MOST_PRODUCTS } from "./reverse.ts";

export interface Finding {
  readonly severity: Severity;
  /** As shown in messages. */
  readonly file: string;
  /** From 1; 0 where the finding has no line of its own. */
  readonly line: number;
  readonly problem: string;
}

/** Result of {@link checkLibrary}: what was looked at, and what was found, in order of the files. */
export interface LibraryCheck {
  readonly files: number;
  readonly networks: number;
  readonly findings: readonly Finding[];
}

const PLACE = /^(.+?):(\d+): ([\s\S]*)$/;

/** A thrown refusal as a finding; anything that was not thrown on purpose goes on. */
function refusal(error: unknown, file: string): Finding {
  if (!(error instanceof EmberlineError)) throw error;
  const place = PLACE.exec(error.message);
  if (place) return { severity: "error", file: place[1], line: Number(place[2]), problem: place[3] };
  const named = /^(\S+\.e?csv): ([\s\S]*)$/.exec(error.message);
  if (named?.[1].endsWith(file)) return { severity: "error", file: named[1], line: 0, problem: named[2] };
  return { severity: "error", file, line: 0, problem: error.message };
}

/** One line as printed: `file:line: severity: problem`. */
export function formatFinding({ severity, file, line, problem }: Finding): string {
  return `${file}${line > 0 ? `:${line}` : ""}: ${severity === "error" ? "" : `${severity}: `}${problem}`;
}

/**
 * Reads and checks every file of a library: format, conservation, Q-values and all else the loader refuses; names of
 * folders; reactions filed in both directions or without net effect; duplicate sets; jumps and kinks of tables
 * ({@link checkTable}); use outside the claimed range; per network: missing files, nuclides that nothing makes or destroys.
 * @param only reactions to check; all if left out (networks are checked in any case)
 */
export function checkLibrary(library: RateLibrary, only?: readonly string[]): LibraryCheck {
  const findings: Finding[] = [];
  let files = 0;
  const wanted = library.reactions.filter((id) => only === undefined || only.includes(id));
  try {
    files += library.nuclides.size > 0 ? 1 : 0;
  } catch (error) {
    return { files: 1, networks: 0, findings: [refusal(error, "nuclides.csv")] };
  }
  for (const id of wanted) {
    const folder = checkFolder(library, id);
    findings.push(...folder.findings);
    files += folder.files;
  }
  for (const name of library.networkNames) {
    files++;
    findings.push(...checkNetwork(library, name));
  }
  return { files, networks: library.networkNames.length, findings };
}

function checkFolder(library: RateLibrary, id: string): { files: number; findings: Finding[] } {
  const findings: Finding[] = [];
  const at = (severity: Severity, problem: string) => findings.push({ severity, file: id, line: 0, problem });
  let reaction: Reaction;
  try {
    reaction = parseReactionId(id);
  } catch (error) {
    return { files: 0, findings: [refusal(error, id)] };
  }
  if (reaction.id !== id) at("error", `folder ${id}: name it ${reaction.id}`);
  const change = (side: readonly string[]) => JSON.stringify([...multiplicities(side)].sort());
  if (change(reaction.reactants) === change(reaction.products))
    at("error", `folder ${id}: this reaction changes nothing`);
  const backward =
    !reaction.isDecay && reaction.products.length > 1 ? makeReaction(reaction.products, reaction.reactants).id : "";
  if (library.reactions.includes(backward))
    at("error", `folder ${id}: ${backward} is filed too; detailed balance makes the reverse, keep one direction`);
  for (const other of library.files.list(id).filter((each) => !each.endsWith(".ecsv")))
    at("warning", `${id}/${other}: not a rate file (.ecsv), ignored`);
  const evaluations = library.evaluations(id);
  if (evaluations.length === 0) at("error", `folder ${id}: no rate file (.ecsv) in it`);
  const tables: RateTable[] = [];
  for (const name of evaluations) {
    try {
      const table = library.table(id, name);
      const lineOf = lineFinder(library.files.read(`${id}/${name}.ecsv`)?.text ?? "");
      tables.push(table);
      for (const { severity, row, key, problem } of checkTable(table))
        findings.push({ severity, file: table.file, line: key ? lineOf.key(key) : lineOf.row(row ?? 0), problem });
    } catch (error) {
      findings.push(refusal(error, `${id}/${name}.ecsv`));
    }
  }
  for (const table of tables)
    for (const other of tables)
      if (table !== other && sameNumbers(table, other))
        findings.push({
          severity: "warning",
          file: table.file,
          line: 0,
          problem: `same numbers as evaluation ${other.evaluation}: one of them is a copy`,
        });
  return { files: evaluations.length, findings };
}

/** Finds the line of a header key or of the k-th row in a file that has been parsed without complaint. */
function lineFinder(text: string) {
  const lines = text.split(/\r\n|\n|\r/);
  const schema = lines.findIndex((line) => line.startsWith("# schema:"));
  const rows = lines.flatMap((line, i) => (i > schema + 1 && line.trim() !== "" ? [i + 1] : []));
  return {
    key: (key: string) => lines.findIndex((line) => line.startsWith(`#   ${key}: `)) + 1,
    row: (k: number) => rows[k] ?? 0,
  };
}

function sameNumbers(a: RateTable, b: RateTable): boolean {
  const numbers = (table: RateTable) =>
    [...table.T9, ...table.rate, ...table.terms.flat(), ...table.factorUncertainty].join(" ");
  return a.kind === b.kind && numbers(a) === numbers(b);
}

/** What a network lists must be there, and no nuclide may be a dead end. */
function checkNetwork(library: RateLibrary, name: string): Finding[] {
  const findings: Finding[] = [];
  const made = new Set<string>();
  const destroyed = new Set<string>();
  const firstUse = new Map<string, { file: string; line: number }>();
  try {
    for (const { reaction: id, evaluation, file, line } of library.network(name)) {
      const { reactants, products, isDecay } = parseReactionId(id);
      for (const each of [...reactants, ...products]) if (!firstUse.has(each)) firstUse.set(each, { file, line });
      const bothWays = !isDecay && products.length <= MOST_PRODUCTS;
      for (const each of reactants) destroyed.add(each);
      for (const each of products) made.add(each);
      if (bothWays) for (const each of [...reactants, ...products]) made.add(each) && destroyed.add(each);
      const found = library.reactions.includes(id) && library.evaluations(id).includes(evaluation);
      if (!found)
        findings.push({ severity: "error", file, line, problem: `no file ${id}/${evaluation}.ecsv in the library` });
    }
  } catch (error) {
    return [refusal(error, `networks/${name}.csv`)];
  }
  for (const [each, { file, line }] of firstUse) {
    if (each === "n" || each === "p") continue;
    const add = (problem: string) => findings.push({ severity: "warning", file, line, problem });
    if (!library.nuclides.has(each))
      findings.push({ severity: "error", file, line, problem: `${each} is not in nuclides.csv` });
    else if (!made.has(each)) add(`network ${name}: no reaction makes ${each}`);
    else if (!destroyed.has(each) && Number.isFinite(library.nuclides.get(each)!.halfLife))
      add(`network ${name}: nothing destroys ${each}, which is unstable`);
  }
  return findings;
}
