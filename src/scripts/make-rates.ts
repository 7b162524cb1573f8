/** Writes rates/ from a folder of source data: `npx tsx src/scripts/make-rates.ts --from DIR [--to rates]`. */
import { mkdirSync, readdirSync, readFileSync, writeFileSync } from "node:fs";
import { dirname, join } from "node:path";
import { parseArgs } from "node:util";
import { type CsvRow, parseCsv } from "../nuclear/csv-rows.ts";
import { NUCLIDE_COLUMNS, type NuclideTable, parseNuclides } from "../nuclear/nuclide.ts";
import { makeReaction, parseEquation, parseReactionId, qValueMeV, type Reaction } from "../nuclear/reaction.ts";
import { formatRateFile, type RateFileContent } from "../nuclear/write-rate-file.ts";
import { compilationProvenance, LABELS } from "./rate-labels.ts";
import { ASSUMED, EVALUATED } from "./rate-sources.ts";
import { FURTHER_UNCERTAINTIES } from "./rate-uncertainties.ts";

const ENTERED = "2026-12-01; digits copied by src/scripts/make-rates.ts";
const COEFFICIENTS = ["a0", "a1", "a2", "a3", "a4", "a5", "a6"];
/** Nuclides that break up at once: their products stand in their place. */
const BREAK_UP: Readonly<Record<string, readonly string[]>> = {
  be8: ["he4", "he4"],
  li5: ["p", "he4"],
  b9: ["p", "he4", "he4"],
};

const options = parseArgs({ options: { from: { type: "string" }, to: { type: "string", default: "rates" } } }).values;
if (options.from === undefined) throw new Error("--from DIR is missing: the folder with the source data");
const from = options.from;

function source(path: string, required: readonly string[]): CsvRow[] {
  return parseCsv({ file: path, text: readFileSync(join(from, path), "utf8") }, required);
}

function write(path: string, text: string): void {
  const target = join(options.to, path);
  mkdirSync(dirname(target), { recursive: true });
  writeFileSync(target, text);
}

function writeNuclides(): NuclideTable {
  const rows = source("nuclides.csv", [
    "id",
    "Z",
    "A",
    "mass_excess_keV",
    "mass_excess_unc_keV",
    "spin",
    "half_life_s",
  ]);
  const text = [
    "# Ground states of the light nuclides. Masses: AME2020, Wang et al. 2021, Chin. Phys. C 45, 030003.",
    "# Spins and half-lives: NUBASE2020, Kondev et al. 2021, Chin. Phys. C 45, 030001 (year = 365.2422 d).",
    "# The mass excess is that of the neutral atom, Z electrons included. Half-lives are for information: decays are rate files,",
    "# and the neutron's mean life is a parameter.",
    [...NUCLIDE_COLUMNS.slice(0, 6), "parity", ...NUCLIDE_COLUMNS.slice(6)].join(","),
    ...rows.map(({ cells: c }) =>
      [c.id, c.Z, c.A, c.mass_excess_keV, c.mass_excess_unc_keV, c.spin, c.parity, c.half_life_s, c.source].join(","),
    ),
    "",
  ].join("\n");
  write("nuclides.csv", text);
  return parseNuclides(text);
}

interface Sets {
  readonly reaction: Reaction;
  readonly labels: string[];
  readonly origins: string[];
  readonly notes: string[];
  readonly rows: string[][];
}

/** Sets of the compilation by our reaction id; sets of one reaction are terms of one sum, placeholders are left out. */
function readCompilation(): Map<string, Sets> {
  const found = new Map<string, Sets>();
  for (const { cells } of source("reaclib-light.csv", ["reactants", "products", "label", "weak", ...COEFFICIENTS])) {
    const reactants = cells.reactants.split("+");
    if (cells.note.startsWith("placeholder") || (cells.weak === "1" && (reactants.length > 1 || cells.label === "ec")))
      continue;
    const products = cells.products.split("+");
    const stable = products.flatMap((id) => BREAK_UP[id] ?? [id]);
    const reaction = makeReaction(reactants, stable);
    const sets = found.get(reaction.id) ?? { reaction, labels: [], origins: [], notes: [], rows: [] };
    found.set(reaction.id, sets);
    const add = (list: string[], text: string) => (list.includes(text) ? 0 : list.push(text));
    add(sets.labels, cells.label);
    add(
      sets.origins,
      cells.origin.includes("machine")
        ? "a default2 state as redistributed in a public collection"
        : "default2 of 2026-06-22",
    );
    if (stable.length !== products.length)
      add(
        sets.notes,
        `the set for ${products.join(" + ")}, of which the unbound nuclide breaks up at once, is included`,
      );
    sets.rows.push(COEFFICIENTS.map((name) => cells[name]));
  }
  return found;
}

function compilationFile({ reaction, labels, origins, notes, rows }: Sets, nuclides: NuclideTable): string {
  const taken = `from ${origins.join(" and ")}`;
  const common = {
    reaction: reaction.equation,
    qValueKeV: 1000 * qValueMeV(reaction, nuclides),
    entered: ENTERED,
  };
  if (!reaction.isDecay)
    return formatRateFile({
      ...common,
      ...compilationProvenance(labels, `coefficients ${taken}`, notes.join("; ") || undefined),
      kind: "reaclib",
      factorUncertainty: "1.3",
      validT9: ["0.01", "10"],
      rows,
    });
  const rate = rows.reduce((sum, row) => sum + Math.exp(Number(row[0])), 0);
  const formula = rows.map((row) => `exp(${row[0]})`).join(" + ");
  return formatRateFile({
    ...common,
    ...compilationProvenance(labels, `${formula}, constants ${taken}`, notes.join("; ") || undefined),
    kind: "decay",
    factorUncertainty: "1.02",
    validT9: ["0", "10"],
    rows: [[rate.toPrecision(10)]],
  });
}

const TABLE_COLUMNS = ["T9", "rate_cm3_per_mol_s", "factor_uncertainty"];

/** An evaluated table of the source folder as a rate file, and the folder it belongs in. */
function evaluatedContent(name: string, nuclides: NuclideTable): { id: string; content: RateFileContent } {
  const provenance = EVALUATED[name];
  if (!provenance) throw new Error(`evaluated/${name}.csv has no provenance in rate-sources.ts`);
  const path = `evaluated/${name}.csv`;
  const text = readFileSync(join(from, path), "utf8");
  const validity = /validity: ([\d.]+) <= T9 <= ([\d.]+)/.exec(text)!;
  const reaction = parseEquation(/reaction: ([^,\n]*)/.exec(text)![1]);
  const { evaluation: _, ...rest } = provenance;
  const content: RateFileContent = {
    ...rest,
    reaction: reaction.equation,
    kind: "table",
    qValueKeV: 1000 * qValueMeV(reaction, nuclides),
    validT9: [validity[1], validity[2]],
    entered: ENTERED,
    rows: source(path, TABLE_COLUMNS).map(({ cells }) => TABLE_COLUMNS.map((column) => cells[column])),
  };
  return { id: reaction.id, content };
}

function writeEvaluated(nuclides: NuclideTable): void {
  for (const name of readdirSync(join(from, "evaluated")).map((file) => file.replace(/\.csv$/, ""))) {
    const { id, content } = evaluatedContent(name, nuclides);
    write(`${id}/${EVALUATED[name].evaluation}.ecsv`, formatRateFile(content));
  }
}

/** The same rates again with uncertainties found elsewhere, as evaluations of their own. */
function writeFurtherUncertainties(compilation: ReadonlyMap<string, Sets>, nuclides: NuclideTable): void {
  for (const { from: rate, evaluation, factorUncertainty, ...stated } of FURTHER_UNCERTAINTIES) {
    const { uncertaintyBasis, note, citation } = stated;
    const set = compilation.get(rate.replace(/^reaclib /, ""));
    if (set) {
      const { basis, doi, origin } = compilationProvenance(
        set.labels,
        `coefficients from ${set.origins.join(" and ")}`,
      );
      const content: RateFileContent = {
        ...{ reaction: set.reaction.equation, kind: "reaclib", citation: citation!, doi, origin, basis },
        ...{ uncertaintyBasis, factorUncertainty, qValueKeV: 1000 * qValueMeV(set.reaction, nuclides) },
        ...{ validT9: ["0.01", "10"], note, entered: ENTERED, rows: set.rows },
      };
      write(`${set.reaction.id}/${evaluation}.ecsv`, formatRateFile(content));
      continue;
    }
    const { id, content } = evaluatedContent(rate, nuclides);
    const rows = content.rows.map(([T9, value]) => [T9, value, factorUncertainty]);
    write(`${id}/${evaluation}.ecsv`, formatRateFile({ ...content, uncertaintyBasis, note, rows }));
  }
}

/** The d(p,g)he3 fit that the compilation used before 2016. */
function writeOldDeuteronCapture(nuclides: NuclideTable): void {
  const rows = source("reaclib-alternatives.csv", COEFFICIENTS);
  const reaction = parseReactionId("d-p_gamma-he3");
  const { citation, doi, basis } = LABELS[rows[0].cells.label];
  const content: RateFileContent = {
    reaction: reaction.equation,
    kind: "reaclib",
    citation,
    doi,
    basis,
    origin: "seven-parameter fit that JINA REACLIB (Cyburt et al. 2010, ApJS 189, 240) gave before 2016",
    uncertaintyBasis: "assumed",
    factorUncertainty: "1.3",
    qValueKeV: 1000 * qValueMeV(reaction, nuclides),
    validT9: ["0.01", "10"],
    note: `${ASSUMED}; superseded, for comparison`,
    entered: ENTERED,
    rows: rows.map(({ cells }) => COEFFICIENTS.map((name) => cells[name])),
  };
  write(`${reaction.id}/descouvemont2004.ecsv`, formatRateFile(content));
}

/** 13O: the compilation holds only a placeholder, the half-life stands in the nuclide table. */
function writeOxygen13(nuclides: NuclideTable): void {
  const [{ cells }] = source("nuclides.csv", ["half_life_s"]).filter((row) => row.cells.id === "o13");
  const [halfLife, error] = [Number(cells.half_life_s), Number(cells.half_life_unc_s)];
  const reaction = parseReactionId("o13_n13");
  const content: RateFileContent = {
    reaction: reaction.equation,
    kind: "decay",
    citation: "Kondev et al. (NUBASE2020) 2021, Chin. Phys. C 45, 030001",
    doi: "10.1088/1674-1137/abddae",
    origin: `ln 2 / T with the half-life T = ${halfLife} +- ${error} s`,
    basis: "evaluation",
    uncertaintyBasis: "published",
    factorUncertainty: Math.exp(error / halfLife).toFixed(4),
    qValueKeV: 1000 * qValueMeV(reaction, nuclides),
    validT9: ["0", "10"],
    note: "one decay in nine emits a proton on top (10.9 per cent, NUBASE2020); all are counted as going to 13N",
    entered: ENTERED,
    rows: [[(Math.LN2 / halfLife).toPrecision(10)]],
  };
  write("o13_n13/kondev2021.ecsv", formatRateFile(content));
}

const NETWORK_TEXT: Readonly<Record<string, string>> = {
  twelve: "the classic reactions to 7Be",
  standard: "17 nuclides to A = 12",
  extended: "26 nuclides to 16O",
  wide: "44 nuclides to 18F, neutron-rich and proton-rich ones included; 8Be and 5Li break up at once",
};

function writeNetworks(): Set<string> {
  const used = new Set<string>();
  for (const [name, meaning] of Object.entries(NETWORK_TEXT)) {
    const rows = source(`networks/${name}.csv`, ["reaction", "evaluation"]);
    for (const { cells } of rows) used.add(cells.reaction);
    write(
      `networks/${name}.csv`,
      [
        `# Network ${name}: ${meaning}; ${rows.length} reactions and decays besides the computed n <-> p.`,
        "# This list alone decides which evaluation of a reaction is used: rates/<reaction>/<evaluation>.ecsv.",
        "reaction,evaluation",
        ...rows.map(({ cells }) => `${cells.reaction},${cells.evaluation}`),
        "",
      ].join("\n"),
    );
  }
  return used;
}

const nuclides = writeNuclides();
const used = writeNetworks();
const compilation = readCompilation();
for (const id of used) {
  const sets = compilation.get(id);
  if (sets) write(`${id}/reaclib.ecsv`, compilationFile(sets, nuclides));
  else if (id !== "o13_n13") throw new Error(`${id} is in a network, but has no set`);
}
writeEvaluated(nuclides);
writeFurtherUncertainties(compilation, nuclides);
writeOldDeuteronCapture(nuclides);
writeOxygen13(nuclides);
console.log(`${options.to}: ${used.size} reactions`);
