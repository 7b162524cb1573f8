/** Messages of requests, which speak of keys, in the words of the command line, which has options. */

/** Option of every key whose name is not that of its option. */
const OPTION_OF_KEY: Readonly<Record<string, string>> = {
  omegaB: "omega-b",
  nEff: "n-eff",
  deltaNEff: "delta-n",
  tauN: "tau-n",
  xiE: "xi-e",
  xiMu: "xi-mu",
  xiTau: "xi-tau",
  tCmb: "t-cmb",
  omegaC: "omega-c",
  sumMnu: "sum-mnu",
  ypMass: "yp",
  alphaFactor: "alpha-factor",
  tauReion: "tau-reion",
  zReion: "z-reion",
};
/** Keys that are spelt as their options, and name them wherever a message starts with them. */
const SAME = ["network", "errors", "samples", "seed", "tolerance", "rates", "scale", "nuclide", "expansion"];
/** The same, where more words follow that are no value. */
const WITH_EQUALS = [
  "eta10",
  "h0",
  "model",
  "z",
  "without",
  "from",
  "name",
  "basis",
  "citation",
  "reaction",
  "format",
  "free",
];
/** Options whose text is the user's own, written after the key. */
const WITH_TEXT = ["over", "part", "observed", "free", "prior", "evaluation"];

const optionOf = (key: string) => `--${OPTION_OF_KEY[key] ?? key}`;
const any = (keys: readonly string[]) => keys.join("|");
const KEYS = any([...Object.keys(OPTION_OF_KEY), ...SAME, ...WITH_EQUALS]);

/**
 * The message with `key = value` at its start as `--option value`, and so for what is chosen by reaction.
 * @param args the words of the command line: where evaluations are words and no option, they stay so
 */
export function nameOptions(message: string, args: readonly string[] = []): string {
  if (args[0] === "rates" && args[1] === "compare" && /^evaluation of /.test(message)) return message;
  return message
    .replace(/^evaluation of (\S+) = /, "--evaluation $1=")
    .replace(/^network \S+, evaluation of /, "--evaluation ")
    .replace(new RegExp(`^(${KEYS})( sigma)? = `), (_, key: string, sigma = "") => `${optionOf(key)}${sigma} `)
    .replace(
      new RegExp(`^(${KEYS}) and (${KEYS}) (?=both )`),
      (_, a: string, b: string) => `${optionOf(a)} and ${optionOf(b)} `,
    )
    .replace(new RegExp(`^(--\\S+ \\S+) and (${KEYS}) = `), (_, a: string, b: string) => `${a} and ${optionOf(b)} `)
    .replace(new RegExp(`^(${any(SAME)}) (?!is |are |has |needs )`), "--$1 ")
    .replace(new RegExp(`^(${any(WITH_TEXT)}) (?=\\S+:? )`), "--$1 ");
}
