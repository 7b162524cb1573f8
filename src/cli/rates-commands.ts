/** The commands below `rates`: what each takes, and the module that does it. */
import { Argument, type Command, Option } from "commander";
import type { RateLibrary } from "../nuclear/library.ts";
import { suggestNearest } from "../nuclear/reaction-name.ts";
import { InputError } from "../numerics/check.ts";
import { nucleosynthesisOptions, type Options, onlyOnce, outputOptions, strictNumber } from "./options.ts";

/** One command of the group: as those of the first level, with words after its name. */
interface RatesSpec {
  readonly name: string;
  readonly summary: string;
  readonly words: readonly Argument[];
  readonly options: () => readonly Option[];
  readonly example: string;
  readonly load: () => Promise<{ run(options: Options): Promise<void> }>;
}

/** Name of the group. */
export const RATES = "rates";
const SUMMARY = "list, show, compare, check, make: the rate evaluations behind the answer";
const DEFAULT_RATES = "list";

const ratesOption = () =>
  new Option("--rates <dir>", "another rate library, whole or holding only the files that differ");
const reactionWord = () => new Argument("<reaction>", "d-p_gamma-he3 or d(p,g)he3");

/** @throws {InputError} unless every entry is a number above 0 */
function parseTemperatures(text: string): number[] {
  return text.split(",").map((part) => {
    const T9 = strictNumber(part, "--t9", "temperatures above 0 in GK, such as 0.1,0.5,1");
    if (!(T9 > 0)) throw new InputError("range", `--t9 ${part}: out of range; temperatures must be above 0 GK`);
    return T9;
  });
}

/** @throws {InputError} unless two increasing temperatures */
function parseValid(text: string): [number, number] {
  const parts = text.split(",").map((part) => strictNumber(part, "--valid", "two temperatures in GK, such as 0.01,3"));
  if (parts.length !== 2 || !(parts[0] >= 0) || !(parts[1] > parts[0]))
    throw new InputError("range", `--valid ${text}: give two increasing temperatures in GK, such as 0.01,3`);
  return [parts[0], parts[1]];
}

const SPECS: readonly RatesSpec[] = [
  {
    name: "list",
    summary: "every evaluation of every reaction: in which networks, how uncertain, how far valid, from which paper",
    words: [],
    options: () => [
      new Option("--network <name>", "only reactions of this network"),
      new Option("--nuclide <id>", "only reactions that make or destroy it, e.g. be7 or 7Be"),
      new Option("--reaction <R>", "only this reaction, e.g. d(p,g)he3"),
      ratesOption(),
      ...outputOptions(),
    ],
    example: "emberline rates list --nuclide 7Be --network standard",
    load: () => import("./commands/rates-list.ts"),
  },
  {
    name: "show",
    summary: "one rate: every field of its file, forward and reverse rate and uncertainty against temperature",
    words: [reactionWord()],
    options: () => [
      new Option("--evaluation <R=NAME>", "another evaluation than the one the network uses; R may be left out"),
      new Option("--network <name>", "whose evaluation is shown (default standard)"),
      new Option("--t9 <list>", "temperatures of the table [GK], e.g. 0.1,0.5,1").argParser(parseTemperatures),
      ratesOption(),
      ...outputOptions(["rate", "uncertainty"]),
    ],
    example: 'emberline rates show "d(p,g)he3" --evaluation mossa2020 --t9 0.1,0.8 --chart rate.svg',
    load: () => import("./commands/rates-show.ts"),
  },
  {
    name: "compare",
    summary: "evaluations of one rate side by side, and how much every abundance moves if they are swapped",
    words: [
      reactionWord(),
      new Argument("[evaluations...]", "names, the reference first (default: all, the network's first)"),
    ],
    options: () => [...nucleosynthesisOptions(), ...outputOptions(["ratio", "sensitivity", "abundances"])],
    example: 'emberline rates compare "7Be(n,p)7Li" desouza2020 damone2018 --chart compare.svg',
    load: () => import("./commands/rates-compare.ts"),
  },
  {
    name: "check",
    summary: "all checks of the library or of a folder of yours, with file and line; exit status 2 if one fails",
    words: [new Argument("[dir]", "a folder of rates of yours (default: the whole library)")],
    options: outputOptions,
    example: "emberline rates check my-rates",
    load: () => import("./commands/rates-check.ts"),
  },
  {
    name: "make",
    summary: "a rate file from a table of the astrophysical S-factor, by the Gamow integral",
    words: [],
    options: () => [
      new Option(
        "--from <file>",
        "CSV with columns E_MeV, S_MeV_b and, if known, sigma_MeV_b; also in keV or eV",
      ).makeOptionMandatory(),
      new Option("--reaction <R>", "what reacts, e.g. d(p,g)he3").makeOptionMandatory(),
      new Option("--name <name>", "name of the evaluation, firstauthorYEAR").makeOptionMandatory(),
      new Option("--citation <text>", "the paper behind the numbers").makeOptionMandatory(),
      new Option(
        "--valid <a,b>",
        "temperatures that are claimed [GK] (default: where the table covers the integral)",
      ).argParser(parseValid),
      new Option("--doi <doi>", "of the paper"),
      new Option(
        "--basis <word>",
        "what the S-factor rests on: experiment, evaluation, theory, fit, estimate (default evaluation)",
      ),
      new Option("--note <text>", "a remark for the file"),
      ratesOption(),
      ...outputOptions(),
    ],
    example:
      'emberline rates make --from s.csv --reaction "d(p,g)he3" --name smith2027 --citation "Smith 2027" --out my-rates/d-p_gamma-he3/smith2027.ecsv',
    load: () => import("./commands/rates-make.ts"),
  },
];

/** One example and one description a command, options in the order of the list. */
function addSpec(group: Command, spec: RatesSpec): void {
  const command = group
    .command(spec.name, { isDefault: spec.name === DEFAULT_RATES })
    .summary(spec.summary)
    .description(`${spec.summary[0].toUpperCase()}${spec.summary.slice(1)}.`)
    .addHelpText("after", `\nExample:\n  ${spec.example}`)
    .action(async (...given: unknown[]) => {
      const options = given[spec.words.length] as Options;
      const words = Object.fromEntries(spec.words.map((word, i) => [word.name(), given[i]]));
      await (await spec.load()).run({ ...options, ...words });
    });
  for (const word of spec.words) command.addArgument(word);
  for (const option of spec.options()) command.addOption(onlyOnce(option));
}

/** Adds the group to the command line. Without a word after it: the list. */
export function addRatesCommands(program: Command): void {
  const group = program
    .command(RATES)
    .configureHelp({ subcommandTerm: (command) => command.name() })
    .summary(SUMMARY)
    .description(`The rate evaluations behind the answer. Without a command: ${DEFAULT_RATES}.`);
  for (const spec of SPECS) addSpec(group, spec);
}

/**
 * The words of a command line with `help rates list` spelt `rates list --help`.
 * @throws {InputError} for an unknown command of the group (nearest named)
 */
export function spellRates(args: readonly string[]): readonly string[] {
  const asked = args[0] === "help" ? args.slice(1) : args;
  if (asked[0] !== RATES || asked[1] === undefined || asked[1].startsWith("-")) return args;
  const names = [...SPECS.map((spec) => spec.name), "help"];
  if (!names.includes(asked[1])) {
    const nearest = suggestNearest(asked[1], names);
    const hint = nearest === undefined ? "" : ` did you mean ${nearest}?`;
    throw new InputError("command", `unknown command ${RATES} ${asked[1]};${hint} there are ${names.join(", ")}`);
  }
  return args[0] === "help" ? [...asked, "--help"] : args;
}

/**
 * The evaluation that `--evaluation R=NAME` or `--evaluation NAME` names for a reaction.
 * @throws {InputError} if R is another reaction, or none
 */
export function evaluationOf(given: string | undefined, reaction: string, library: RateLibrary): string | undefined {
  if (given === undefined) return undefined;
  const at = given.lastIndexOf("=");
  if (at < 0) return given;
  const [wanted, named] = [library.reactionId(reaction), library.reactionId(given.slice(0, at).trim())];
  if (named !== wanted)
    throw new InputError(
      "evaluation",
      `--evaluation ${given}: ${named} is another reaction than the ${wanted} to show; give an evaluation of that one`,
    );
  return given.slice(at + 1).trim();
}
