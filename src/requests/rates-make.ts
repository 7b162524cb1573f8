/** The request `rates make`: an S-factor table to a complete rate file, with what should be known about it. */
import { checkTable } from "../nuclear/check-table.ts";
import type { TextFile } from "../nuclear/csv-rows.ts";
import type { RateLibrary } from "../nuclear/library.ts";
import { LARGEST_OUTSIDE, makeRateFile, type RatePoint } from "../nuclear/make-rate.ts";
import { BASES, parseRateFile, type RateTable, rateUnit } from "../nuclear/parse-rate-file.ts";
import { parseReactionId } from "../nuclear/reaction.ts";
import { parseReactionName } from "../nuclear/reaction-name.ts";
import { parseSFactorFile } from "../nuclear/s-factor-file.ts";
import { InputError } from "../numerics/check.ts";
import type { RatesMakeResults } from "../output/rates-result.ts";
import type { Envelope } from "./envelope.ts";
import { ratesEnvelope } from "./rates-envelope.ts";

/** What a user says about the rate to make. */
export interface MakeRequest {
  /** The S-factor table and how it is named in messages. */
  readonly source: TextFile;
  readonly reaction: string;
  /** Name of the evaluation: firstauthorYEAR. */
  readonly name: string;
  readonly citation: string;
  readonly doi?: string;
  readonly basis?: string;
  readonly note?: string;
  /** Range that is claimed [GK]; if left out, where the table covers the Gamow integral. */
  readonly validT9?: readonly [number, number];
  /** Date and hand. */
  readonly entered: string;
}

/** Relative difference of two ways to interpolate S that is worth a warning. */
const LARGEST_INTERPOLATION = 0.005;

function requireName(name: string): void {
  if (!/^[a-z0-9]+(-[a-z0-9]+)*$/.test(name))
    throw new InputError(
      "choice",
      `name = ${name}: use lower-case letters, digits and single dashes, such as smith2027`,
    );
}

function requireBasis(basis: string | undefined): (typeof BASES)[number] | undefined {
  if (basis !== undefined && !(BASES as readonly string[]).includes(basis))
    throw new InputError("choice", `basis = ${basis}: accepted are ${BASES.join(", ")}`);
  return basis as (typeof BASES)[number] | undefined;
}

function percent(share: number): string {
  return `${(100 * share).toPrecision(2)} per cent`;
}

/** What a user should know before trusting the new file. */
function makeWarnings(table: RateTable, points: readonly RatePoint[], errors: boolean, exists: boolean): string[] {
  const [low, high] = table.validT9;
  const claimed = points.filter(({ T9 }) => T9 >= low && T9 <= high);
  const worst = (key: "outside" | "interpolation") =>
    claimed.reduce((a, b) => (b[key] > a[key] ? b : a), claimed[0] ?? points[0]);
  const [outside, open] = [worst("outside"), worst("interpolation")];
  return [
    ...(outside.outside > LARGEST_OUTSIDE
      ? [
          `${percent(outside.outside)} of the rate at T9 = ${outside.T9}, inside the range claimed, come from energies outside the table, where S is held constant`,
        ]
      : []),
    ...(open.interpolation > LARGEST_INTERPOLATION
      ? [
          `the points of S leave open ${percent(open.interpolation)} of the rate at T9 = ${open.T9}: so much differ a spline of S and one of ln S`,
        ]
      : []),
    ...(errors
      ? []
      : ["the table has no errors: f_u = 1 and uncertainty_basis assumed; write what you know into the file"]),
    ...(exists
      ? [`the library has an evaluation ${table.evaluation} of this reaction: a file of the same path replaces it`]
      : []),
    ...checkTable(table)
      .filter(({ severity }) => severity !== "note")
      .filter(({ key }) => errors || key !== "uncertainty_basis")
      .map(({ problem }) => problem),
  ];
}

/**
 * Answers `rates make`. Errors of S count as fully correlated (a common normalisation).
 * @throws {InputError} file:line for a damaged table; for an unknown reaction, name or basis, an empty citation, a reaction
 *   without two reactants, energies that cover no temperature
 */
export function makeRate(request: MakeRequest, library: RateLibrary): Envelope<RatesMakeResults> {
  const { source, name, citation, validT9 } = request;
  requireName(name);
  if (citation.trim() === "")
    throw new InputError("choice", 'citation = "": must not be empty; name the paper, or yourself and the year');
  const basis = requireBasis(request.basis);
  const reaction = parseReactionId(parseReactionName(request.reaction));
  for (const id of [...reaction.reactants, ...reaction.products]) library.nuclide(id);
  const data = parseSFactorFile(source);
  const { text, points } = makeRateFile(
    data,
    {
      reaction,
      citation,
      ...(request.doi ? { doi: request.doi } : {}),
      from: source.file,
      ...(validT9 ? { validT9 } : {}),
      ...(basis ? { basis } : {}),
      ...(request.note ? { note: request.note } : {}),
      entered: request.entered,
    },
    library.nuclides,
  );
  const path = `${reaction.id}/${name}.ecsv`;
  const table = parseRateFile({ file: path, text }, library.nuclides);
  const exists = library.reactions.includes(reaction.id) && library.evaluations(reaction.id).includes(name);
  const results: RatesMakeResults = {
    action: "make",
    reaction: reaction.id,
    evaluation: name,
    path,
    text,
    table: {
      columns: ["T9", "rate", "f_u", "outside", "interpolation"],
      units: ["GK", rateUnit(reaction.reactants.length), "1", "1", "1"],
      rows: points.map((point) => [point.T9, point.rate, point.factorUncertainty, point.outside, point.interpolation]),
    },
  };
  const { uncertaintyBasis } = table;
  return ratesEnvelope(
    {},
    results,
    [{ reaction: reaction.id, evaluation: name, citation, uncertaintyBasis }],
    makeWarnings(table, points, data.sigma !== undefined, exists),
  );
}
