/** Numbers and symbols as a page shows them: powers of ten, true minus signs, subscripts. */
import { abundanceLabel } from "../nucleosynthesis/labels.ts";
import { formatEstimate, formatNumber } from "../output/text.ts";
import { escapeText, type Markup } from "./html.ts";

const SUBSCRIPTS: readonly (readonly [RegExp, string])[] = [
  [/\bY_p\b/g, "Y<sub>p</sub>"],
  [/\bN_eff\b/g, "N<sub>eff</sub>"],
  [/\btau_n\b|τ_n\b/g, "τ<sub>n</sub>"],
  [/\bomega_b\b|ω_b\b/g, "ω<sub>b</sub>"],
  [/\b([zrxTknDH])_(star|drag|e|m|r|eq|D|H|He|M)\b/g, "$1<sub>$2</sub>"],
  [/θ_star\b/g, "θ<sub>star</sub>"],
  [/T_γ/g, "T<sub>γ</sub>"],
  [/T_νe\b/g, "T<sub>νe</sub>"],
  [/n_He4\/n_b/g, "n(⁴He)/n<sub>b</sub>"],
];
/** Mass numbers before a symbol: 3He -> ³He. */
const MASS = /(?<![\w.])(\d{1,2})(?=(?:H|He|Li|Be|B|C)\b)/g;
const RAISED = "⁰¹²³⁴⁵⁶⁷⁸⁹";

/** Text with its symbols set: Y_p, ω_b, N_eff, z_star, 3He. */
export function symbols(text: string): Markup {
  let html = escapeText(text.replace(MASS, (digits) => [...digits].map((d) => RAISED[Number(d)]).join("")));
  for (const [pattern, set] of SUBSCRIPTS) html = html.replace(pattern, set);
  return { html };
}

/** `1.2e-5` and `1.2e-5 ± 0.3e-5` as `1.2 × 10⁻⁵` and `(1.2 ± 0.3) × 10⁻⁵`; a hyphen before a figure as a minus. */
function powers(text: string): Markup {
  const pair = /^(\S+)e(-?\d+) ± (\S+)e\2$/.exec(text);
  const single = /^(\S+)e(-?\d+)$/.exec(text);
  const times = (figures: string, power: string) => `${figures} × 10<sup>${power.replace("-", "−")}</sup>`;
  const minus = (figures: string) => figures.replace(/^-/, "−");
  if (pair !== null) return { html: times(`(${minus(pair[1])} ± ${pair[3]})`, pair[2]) };
  if (single !== null) return { html: times(minus(single[1]), single[2]) };
  return { html: minus(text) };
}

/** A value with its error. */
export function estimate(value: number, sigma?: number): Markup {
  return powers(formatEstimate(value, sigma));
}

/** A number to so many digits. */
export function number(value: number, digits = 5): Markup {
  return powers(formatNumber(value, digits));
}

/** A number to so many decimals, without a negative zero. */
export function fixed(value: number, decimals: number): string {
  const text = value.toFixed(decimals);
  return /^-0\.?0*$/.test(text) ? text.slice(1) : text.replace("-", "−");
}

/** Printed name of an abundance. */
export function abundance(name: string): Markup {
  return symbols(abundanceLabel(name));
}
