/** The answer of `rates compare` as text: what a swap does to the abundances first, then where the rate matters, then ratios. */
import { formatReaction } from "../nuclear/reaction-name.ts";
import { abundanceLabel } from "../nucleosynthesis/labels.ts";
import { numericColumn } from "../numerics/table.ts";
import { ASSUMED_MARK, provenanceLines, titleLine } from "./provenance-text.ts";
import { rangeText } from "./rates-list-output.ts";
import type { RatesCompareResults } from "./rates-result.ts";
import type { Envelope } from "./result.ts";
import { alignColumns, formatNumber, wrap } from "./text.ts";

/** Evaluations beside each other in a table; more go into a further table. */
const MOST_COLUMNS = 5;
/** Changes of all abundances below this many per cent are printed as 0. */
const LEAST_PERCENT = 5e-5;
/** Left out of the text beside Y_p. */
const HIDDEN = "YpMass";

/** Letters by which the tables name the evaluations. */
function letter(i: number): string {
  return String.fromCharCode("a".charCodeAt(0) + i);
}

/** Per cent with three to four digits that mean something. @param sign written before what is not negative */
function percentText(share: number, sign = "+"): string {
  const value = 100 * share;
  if (Math.abs(value) < LEAST_PERCENT) return "0";
  const digits = Math.abs(value) >= 1 ? 2 : Math.abs(value) >= 0.1 ? 3 : 4;
  return `${value > 0 ? sign : ""}${value.toFixed(digits)}`;
}

function chunks<T>(items: readonly T[], size: number): T[][] {
  return Array.from({ length: Math.ceil(items.length / size) }, (_, k) => items.slice(k * size, (k + 1) * size));
}

/** The evaluations with their letters. */
function evaluationLines({ evaluations }: RatesCompareResults): string[] {
  const heads = alignColumns(
    evaluations.map((each, i) => [
      `  ${i === 0 ? "ref" : letter(i - 1)}`,
      each.evaluation,
      `${each.factorUncertainty.toFixed(3)}${each.uncertaintyBasis === "published" ? "" : ASSUMED_MARK}`,
      rangeText(each.validT9),
    ]),
  );
  const room = Math.max(...heads.map((head) => head.length)) + 2;
  return evaluations.flatMap((each, i) => wrap(each.citation, heads[i].padEnd(room), " ".repeat(room)));
}

function swapLines(results: RatesCompareResults): string[] {
  const { abundances, swaps, reference } = results;
  if (abundances === undefined || swaps === undefined) return [];
  const names = Object.keys(abundances).filter((name) => name !== HIDDEN);
  const others = Object.keys(swaps);
  const tables = chunks(others, MOST_COLUMNS).flatMap((part, k) => [
    ...(k > 0 ? [""] : []),
    ...alignColumns(
      [
        ["", "ref", "f_u alone", ...part.map((_, i) => letter(k * MOST_COLUMNS + i))],
        ...names.map((name) => [
          `  ${abundanceLabel(name)}`,
          formatNumber(abundances[name].value),
          percentText(Math.abs(abundances[name].standardDeviation), "±"),
          ...part.map((other) => percentText(swaps[other][name].change)),
        ]),
      ],
      Array.from({ length: part.length + 2 }, (_, i) => i + 1),
    ),
  ]);
  const worst = Math.max(
    ...others.flatMap((other) =>
      names.map((name) => Math.abs(swaps[other][name].change - swaps[other][name].firstOrder)),
    ),
  );
  return [
    `Change of each abundance [per cent] if ${reference} is replaced`,
    ...tables,
    ...wrap(
      `Each column is a run with that evaluation; f_u alone is what one standard deviation of the reference does. First order (sensitivity times ln ratio over T9) agrees within ${Math.max(100 * worst, LEAST_PERCENT).toPrecision(1)} per cent of an abundance.`,
      "  ",
    ),
  ];
}

function sensitivityLines({ abundances }: RatesCompareResults): string[] {
  if (abundances === undefined) return [];
  const rows = Object.entries(abundances)
    .filter(([name, { range }]) => name !== HIDDEN && range !== undefined)
    .map(([name, { sensitivity, range }]) => [
      `  ${abundanceLabel(name)}`,
      (Math.abs(sensitivity) < 5e-5 ? 0 : sensitivity).toFixed(4),
      range!.map((T9) => T9.toPrecision(2)).join(" to "),
    ]);
  if (rows.length === 0) return ["Where the rate matters", "  no abundance of this network responds to it"];
  return [
    "Where the rate matters",
    ...alignColumns([["", "d ln X/d ln rate", "T9 that holds the middle 90 % of it"], ...rows], [1]),
  ];
}

function ratioLines({ table, evaluations, reference }: RatesCompareResults): string[] {
  const T9 = numericColumn(table, "T9");
  const own = numericColumn(table, `f_u_${reference}`);
  const others = evaluations.slice(1).map(({ evaluation }) => ({
    ratio: numericColumn(table, `ratio_${evaluation}`),
    factor: numericColumn(table, `f_u_${evaluation}`),
  }));
  const number = (value: number) => (value >= 0.1 && value < 10 ? value.toFixed(3) : formatNumber(value, 3));
  const spread = (value: number) => value.toFixed(3);
  return [
    "Ratio to the reference, ± its own f_u - 1",
    ...chunks(others, MOST_COLUMNS).flatMap((part, k) => [
      ...(k > 0 ? [""] : []),
      ...alignColumns(
        [
          ["T9", "ref", ...part.map((_, i) => letter(k * MOST_COLUMNS + i))],
          ...T9.map((each, row) => [
            String(each),
            `±${spread(own[row] - 1)}`,
            ...part.map(({ ratio, factor }) => `${number(ratio[row])}±${spread(ratio[row] * (factor[row] - 1))}`),
          ]),
        ],
        Array.from({ length: part.length + 2 }, (_, i) => i),
      ).map((line) => `  ${line}`),
    ]),
  ];
}

/** Text of a `rates compare` answer, at most 80 columns wide. */
export function ratesCompareText(answer: Envelope<RatesCompareResults>): string {
  const { results } = answer;
  const assumed = results.evaluations.some(({ uncertaintyBasis }) => uncertaintyBasis !== "published");
  const blocks = [
    [titleLine(`Evaluations of ${formatReaction(results.reaction)}`, answer.version)],
    [
      "Evaluation, typical f_u (mean over T9 0.1 to 1), T9 claimed, paper",
      ...evaluationLines(results),
      ...(assumed ? wrap(`${ASSUMED_MARK} uncertainty assumed or from memory, not published`, "  ") : []),
    ],
    swapLines(results),
    sensitivityLines(results),
    ratioLines(results),
    ...(results.swaps === undefined
      ? [answer.warnings.flatMap((warning) => wrap(warning, "  "))]
      : [["Calculation", ...provenanceLines(answer)]]),
  ];
  return `${blocks
    .filter((block) => block.length > 0)
    .map((block) => block.join("\n"))
    .join("\n\n")}\n`;
}

/** What the columns of the table are. */
export function ratesCompareDescriptions(results: RatesCompareResults): Record<string, string> {
  return {
    T9: "temperature",
    ...Object.fromEntries(
      results.evaluations.flatMap(({ evaluation, citation, uncertaintyBasis }) => [
        [`ratio_${evaluation}`, `rate of ${evaluation} over rate of ${results.reference}; ${citation}`],
        [`f_u_${evaluation}`, `factor uncertainty of ${evaluation}, ${uncertaintyBasis}`],
      ]),
    ),
  };
}

/** Header of CSV and ECSV: what is compared, and the changes of the abundances. */
export function ratesCompareNotes({
  version,
  results,
}: Envelope<RatesCompareResults>): Record<string, string | readonly string[]> {
  const changes = Object.entries(results.swaps ?? {}).flatMap(([evaluation, moved]) =>
    Object.entries(moved).map(
      ([name, { change }]) => `${evaluation} instead of ${results.reference}: ${name} ${percentText(change)} per cent`,
    ),
  );
  return {
    command: `emberline ${version} rates compare`,
    reaction: results.reaction,
    reference: results.reference,
    ...(changes.length > 0 ? { change: changes } : {}),
  };
}
