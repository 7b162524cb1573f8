/** The answer of `rates list` as text: reactions with their evaluations below them, the ones in use marked. */
import { formatReaction } from "../nuclear/reaction-name.ts";
import { ASSUMED_MARK, COLLECTION, titleLine } from "./provenance-text.ts";
import type { ListedRate, RatesListResults } from "./rates-result.ts";
import type { Envelope } from "./result.ts";
import { alignColumns, counted, displayWidth, formatNumber, pad, wrap } from "./text.ts";

/** Mark of an evaluation that networks use. */
const USED_MARK = ">";

/** `0.001-4`. */
export function rangeText([low, high]: readonly [number, number]): string {
  return `${low}-${high}`;
}

/** Which networks use an evaluation: nothing to say if all that hold the reaction agree. */
function usage(rate: ListedRate): string {
  if (rate.usedBy.length === 0 || rate.usedBy.length === rate.networks.length) return "";
  return ` (used by ${rate.usedBy.join(", ")})`;
}

/** The paper; of the collection's sets the paper behind the set, since their name says where they come from. */
function paper({ evaluation, citation }: ListedRate): string {
  const inner = evaluation === COLLECTION ? citation.split("; ").slice(1).join("; ") : "";
  return inner === "" ? citation : inner;
}

function reactionLine({ reaction, networks, qValue_keV }: ListedRate): string[] {
  const where = networks.length > 0 ? `in ${networks.join(", ")}` : "in no network";
  const q = `Q\u00a0=\u00a0${formatNumber(qValue_keV / 1000)}\u00a0MeV`;
  return wrap(`${formatReaction(reaction)} (${reaction}), ${q}, ${where}`, "", "    ");
}

/** Text of a `rates list` answer, at most 80 columns wide. */
export function ratesListText(answer: Envelope<RatesListResults>): string {
  const { rates, reactions, evaluations } = answer.results;
  const heads = alignColumns(
    rates.map((rate) => [
      `  ${rate.usedBy.length > 0 ? USED_MARK : " "} ${rate.evaluation}`,
      `${rate.factorUncertainty.toFixed(3)}${rate.uncertaintyBasis === "published" ? "" : ASSUMED_MARK}`,
      rangeText(rate.validT9),
      rate.basis ?? "-",
    ]),
  );
  const room = Math.max(0, ...heads.map(displayWidth)) + 2;
  const lines = rates.flatMap((rate, i) => [
    ...(rate.reaction === rates[i - 1]?.reaction ? [] : reactionLine(rate)),
    ...wrap(`${paper(rate)}${usage(rate)}`, pad(heads[i], room), " ".repeat(room)),
  ]);
  const legend =
    `Columns: ${USED_MARK} used by the networks named; evaluation; typical f_u (mean over T9 0.1 to 1), ${ASSUMED_MARK} assumed or ` +
    "from memory, not published; T9 [GK] that the source claims; what it rests on; paper.";
  const collection = rates.find((rate) => rate.evaluation === COLLECTION)?.citation.split("; ")[0];
  return `${[
    titleLine(`Rates: ${counted(reactions, "reaction")}, ${counted(evaluations, "evaluation")}`, answer.version),
    "",
    ...(lines.length > 0 ? lines : ["  none"]),
    "",
    ...wrap(legend, "", "  "),
    ...(collection === undefined ? [] : wrap(`${COLLECTION}: sets of ${collection} as they stand.`, "", "  ")),
  ].join("\n")}\n`;
}

/** What the columns of the table are. */
export function ratesListDescriptions(): Record<string, string> {
  return {
    reaction: "target-projectile_ejectiles-residual",
    evaluation: "name for --evaluation REACTION=NAME",
    used_by: "networks that use this evaluation",
    kind: "table, reaclib (sum of seven-parameter fits) or decay",
    basis: "what the rate rests on: experiment, evaluation, theory, fit, estimate",
    f_u: "typical factor uncertainty: exp of the mean of ln f_u over ln T9 from 0.1 to 1",
    uncertainty_basis: "where f_u comes from: published, assumed, from memory",
    valid_T9_from: "lowest temperature that the source claims",
    valid_T9_to: "highest temperature that the source claims",
    q_value_keV: "energy released",
    citation: "the paper behind the numbers",
  };
}
