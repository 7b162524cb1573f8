/** Names of reactions as people write them, `d(p,g)he3`, `3He(a,g)7Be`; display as `d(p,γ)³He`; nearest known names. */
import { InputError } from "../numerics/check.ts";
import { formatNuclide, nuclideFromText, nuclideNumbers } from "./nuclide.ts";
import { makeReaction, NEUTRON_PROTON, parseEquation, parseReactionId } from "./reaction.ts";

const PHOTON = /^(g|γ|gamma)$/i;
const BETA = /^(β|b|beta)[-+⁻⁺]?$/i;

/** Splits `n p`, `2p`, `np`, `nα`, `2a`, `n+he4` into nuclides of ours; undefined if some part is no nuclide. */
function particles(text: string): string[] | undefined {
  const found: string[] = [];
  for (const part of text.split(/[\s+]+/).filter((piece) => piece !== "")) {
    const whole = nuclideFromText(part);
    if (whole) {
      found.push(whole);
      continue;
    }
    let rest = part;
    while (rest !== "") {
      const match =
        /^([2-9]?)([npdtaα])(?![a-z]?\d)/i.exec(rest) ??
        /^([2-9]?)((?:\d{1,2}|[⁰¹²³⁴⁵⁶⁷⁸⁹]{1,2})[A-Z][a-z]?)/.exec(rest) ??
        /^([2-9]?)([a-z]{1,2}\d{1,2})/i.exec(rest);
      const id = match && nuclideFromText(match[2]);
      if (!match || !id) return undefined;
      for (let k = 0; k < Number(match[1] || 1); k++) found.push(id);
      rest = rest.slice(match[0].length);
    }
  }
  return found;
}

function parseTradeNotation(text: string): string | undefined {
  const match = /^([^()]+)\(([^(),]*),?([^(),]*)\)([^()]+)$/.exec(text.trim());
  if (!match) return undefined;
  const [, targetText, inText, outText, residualText] = match;
  const target = particles(targetText);
  const residual = particles(residualText);
  const decays = BETA.test(inText.trim()) && outText.trim() === "";
  const projectile = decays ? [] : particles(inText);
  const ejectiles = decays || PHOTON.test(outText.trim()) ? [] : particles(outText);
  if (!target?.length || !residual?.length || !projectile || !ejectiles) return undefined;
  if (!decays && projectile.length === 0) return undefined;
  return makeReaction([...target, ...projectile], [...ejectiles, ...residual]).id;
}

/**
 * The id of a reaction written as id (`d-p_gamma-he3`), equation (`d + p -> he3`) or in the trade's notation
 * (`d(p,g)he3`, `3He(a,g)7Be`, `⁷Li(d,nα)⁴He`, `t(β⁻)³He`). `n_p` stays itself.
 * @throws {InputError} if it is none of these, or A or Z is not conserved
 */
export function parseReactionName(text: string): string {
  const name = text.trim();
  if (name === NEUTRON_PROTON) return name;
  if (name.includes("(")) {
    const id = parseTradeNotation(name);
    if (id) return id;
  } else if (/->|→/.test(name)) return parseEquation(name).id;
  else if (name.includes("_")) return parseReactionId(name.toLowerCase()).id;
  throw new InputError("reaction", `${text}: not a reaction; write d-p_gamma-he3 or d(p,g)he3`);
}

function symbol(id: string): string {
  return id === "he4" ? "α" : formatNuclide(id);
}

function joined(ids: readonly string[]): string {
  let text = "";
  for (let i = 0; i < ids.length; ) {
    let count = 1;
    while (ids[i + count] === ids[i]) count++;
    // A digit before a superscript mass number would be read as one number: repeat the symbol instead.
    const plain = symbol(ids[i]);
    text += count > 1 && /^[a-zα]/.test(plain) ? `${count}${plain}` : plain.repeat(count);
    i += count;
  }
  return text;
}

/**
 * The trade's notation of a reaction id for display: `d(p,γ)³He`, `³He(³He,2p)⁴He`, `⁷Li(d,nα)⁴He`, `t(β⁻)³He`.
 * @throws {InputError} as {@link parseReactionId}
 */
export function formatReaction(id: string): string {
  if (id === NEUTRON_PROTON) return "n ↔ p";
  const { reactants, products, isDecay } = parseReactionId(id);
  const residual = formatNuclide(products[products.length - 1]);
  const ejectiles = products.slice(0, -1);
  if (isDecay) {
    const charge = (ids: readonly string[]) => ids.reduce((sum, each) => sum + nuclideNumbers(each)!.Z, 0);
    const sign = charge(products) > charge(reactants) ? "⁻" : "⁺";
    const others = ejectiles.map((each) => `${formatNuclide(each)} `).join("");
    return `${formatNuclide(reactants[0])}(β${sign})${others}${residual}`;
  }
  const out = ejectiles.length === 0 ? "γ" : joined(ejectiles);
  return `${formatNuclide(reactants[0])}(${joined(reactants.slice(1))},${out})${residual}`;
}

/** The notation as typed on a keyboard: `d(p,g)he3`. */
function plainNotation(id: string): string {
  if (id === NEUTRON_PROTON) return id;
  const { reactants, products } = parseReactionId(id);
  const out = products.length === 1 ? "g" : products.slice(0, -1).join("");
  return `${reactants[0]}(${reactants.slice(1).join("").replace("he4", "a")},${out.replaceAll("he4", "a")})${products.at(-1)}`;
}

/** Number of insertions, deletions, replacements and swaps of neighbours that turn a into b. */
function editDistance(a: string, b: string): number {
  let before: number[] = [];
  let previous = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i++) {
    const row = [i];
    for (let j = 1; j <= b.length; j++) {
      const change = previous[j - 1] + (a[i - 1] === b[j - 1] ? 0 : 1);
      row[j] = Math.min(change, previous[j] + 1, row[j - 1] + 1);
      if (i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1])
        row[j] = Math.min(row[j], before[j - 2] + 1);
    }
    before = previous;
    previous = row;
  }
  return previous[b.length];
}

/**
 * The known name closest to a mistyped one (edit distance at most half its length).
 * @returns undefined if none is close
 */
export function suggestNearest(name: string, candidates: Iterable<string>): string | undefined {
  let best: string | undefined;
  let least = Math.max(2, Math.floor(name.length / 2)) + 1;
  for (const candidate of candidates) {
    const distance = editDistance(name.toLowerCase(), candidate.toLowerCase());
    if (distance < least) {
      least = distance;
      best = candidate;
    }
  }
  return best;
}

/**
 * The known reaction that a person's name stands for.
 * @param known ids, e.g. of a network (add `n_p` where the computed weak rates count)
 * @param what how the name was given, for the message: `evaluation`, `scale`, `reaction`
 * @throws {InputError} naming the nearest known reaction; a name of the reverse direction is pointed to the forward one
 */
export function resolveReaction(name: string, known: Iterable<string>, what = "reaction"): string {
  const ids = [...known];
  let problem = "no such reaction there";
  let wanted = name;
  try {
    wanted = parseReactionName(name);
    if (ids.includes(wanted)) return wanted;
    const { reactants, products, isDecay } = parseReactionId(wanted);
    if (!isDecay && products.length > 1) {
      const forward = makeReaction(products, reactants).id;
      if (ids.includes(forward))
        throw new InputError(
          "reaction",
          `${what} ${name}: this is the reverse of ${forward}, which covers both directions (detailed balance); use that name`,
        );
    }
  } catch (error) {
    if (!(error instanceof InputError)) throw error;
    if (error.message.includes("is the reverse of")) throw error;
    problem = error.message.startsWith(name) ? error.message.slice(name.length).replace(/^:\s*/, "") : error.message;
  }
  const written = new Map(ids.map((id) => [wanted.includes("(") ? plainNotation(id) : id, id]));
  const nearest = suggestNearest(wanted, written.keys());
  const hint = nearest
    ? `did you mean ${written.get(nearest)}?`
    : `known are ${ids.slice(0, 12).join(" ")}${ids.length > 12 ? " ..." : ""}`;
  throw new InputError("reaction", `${what} ${name}: ${problem}; ${hint}`);
}
