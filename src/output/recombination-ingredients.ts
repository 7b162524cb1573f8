/** Ingredients, constants and fits of recombination as text, each with what it moves. */
import type { RecombinationResults } from "../model/recombination.ts";
import { SWITCH_EFFECTS } from "../recombination/effects.generated.ts";
import { RECOMBINATION_SWITCHES } from "../recombination/switches.ts";
import type { Envelope, RecombinationConstantUsed } from "./result.ts";
import { alignColumns, formatNumber, wrap } from "./text.ts";

function signed(value: number, digits = 2): string {
  if (value === 0) return "0";
  return `${value > 0 ? "+" : "-"}${formatNumber(Math.abs(value), digits)}`;
}

/** Relative change of x_e and redshift where it changes most, among those listed. */
function largest(xe: Readonly<Record<string, number>>): string {
  const [z, change] = Object.entries(xe).reduce((a, b) => (Math.abs(b[1]) > Math.abs(a[1]) ? b : a));
  return change === 0 ? "0" : `${signed(change)} at ${z}`;
}

/** The ingredients with what leaving each out does, in the default cosmology. */
export function ingredientLines(answer: Envelope<RecombinationResults>): string[] {
  const { model, without } = answer.cosmology;
  const rows = RECOMBINATION_SWITCHES.filter((s) => s.models.includes(model)).map(({ name }) => {
    const { zStar, xe } = SWITCH_EFFECTS[name];
    return [`  ${name}`, without.includes(name) ? "out" : "in", signed(zStar), largest(xe)];
  });
  return [
    "",
    "Ingredients, and what leaving one out changes in the default cosmology",
    ...alignColumns([["  name", "", "z_star", "x_e, relative"], ...rows]),
  ];
}

/** Every constant with its value and effect, under its source. */
export function constantLines(used: readonly RecombinationConstantUsed[]): string[] {
  const head = ["  ", "value", "z_star", "x_e, relative"];
  const rows = used.map(({ meaning, value, unit, effectPerPercent: { zStar, xe } }) => [
    `  ${meaning}`,
    `${value}${unit === "1" ? "" : ` ${unit}`}`,
    signed(zStar),
    largest(xe),
  ]);
  const [first, ...lines] = alignColumns([head, ...rows]);
  return [
    "",
    ...wrap("Constants and fits, and what +1 % of each (of q and T1 themselves) changes in the default cosmology"),
    first,
    ...used.flatMap(({ source }, i) => [...(source === used[i - 1]?.source ? [] : wrap(source, "  ", "  ")), lines[i]]),
  ];
}
