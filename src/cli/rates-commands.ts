/** The commands below `rates`: what each takes, and the module that does it. */
import { type Argument, type Command, Option } from "commander";
import { suggestNearest } from "../nuclear/reaction-name.ts";
import { InputError } from "../numerics/check.ts";
import { type Options, outputOptions } from "./options.ts";

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
  for (const option of spec.options()) command.addOption(option);
}

/** Adds the group to the command line. Without a word after it: the list. */
export function addRatesCommands(program: Command): void {
  const group = program
    .command(RATES)
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
