/** The command line: its commands, each loaded only when run, and every error as one line. */
import { Command, CommanderError, type Option } from "commander";
import { Interrupted } from "../node/interrupt.ts";
import { printNotice, printResult } from "../node/print.ts";
import { suggestNearest } from "../nuclear/reaction-name.ts";
import { EmberlineError, InputError } from "../numerics/check.ts";
import { VERSION } from "../version.ts";
import { inferOptions } from "./infer-options.ts";
import { nameOptions } from "./name-options.ts";
import { errorOptions, nucleosynthesisOptions, type Options, onlyOnce, outputOptions } from "./options.ts";
import { addRatesCommands, RATES, spellRates } from "./rates-commands.ts";
import { recombinationOptions } from "./recombination-options.ts";
import { SWEEP_COMMANDS } from "./sweep-commands.ts";
import { resumeOptions } from "./sweep-options.ts";

/** One command: its help, its options, and the module that does it. */
interface CommandSpec {
  readonly name: string;
  readonly summary: string;
  readonly options: () => readonly Option[];
  readonly example: string;
  readonly load: () => Promise<{ run(options: Options): Promise<void> }>;
}

const COMMANDS: readonly CommandSpec[] = [
  {
    name: "abundances",
    summary: "light-element abundances of one cosmology, each with its theory error",
    options: () => [...nucleosynthesisOptions(), ...errorOptions(), ...outputOptions(), ...resumeOptions()],
    example: "emberline abundances --omega-b 0.0224±0.0001 --tau-n 879.4 --network twelve",
    load: () => import("./commands/abundances.ts"),
  },
  {
    name: "history",
    summary: "temperatures, expansion, weak rates and every nuclide through the first hours",
    options: () => [...nucleosynthesisOptions(), ...outputOptions(["temperature", "weak", "abundances"])],
    example: "emberline history --network twelve --chart history.svg --out history.txt",
    load: () => import("./commands/history.ts"),
  },
  ...SWEEP_COMMANDS,
  {
    name: "budget",
    summary: "where each abundance's error comes from, and its sensitivity to every parameter and rate",
    options: () => [...nucleosynthesisOptions(), ...outputOptions(["helium", "deuterium", "helium3", "lithium"])],
    example: "emberline budget --chart budget.png",
    load: () => import("./commands/budget.ts"),
  },
  {
    name: "infer",
    summary: "baryon density, N_eff and more from observed abundances",
    options: () => [
      ...inferOptions(),
      ...nucleosynthesisOptions(),
      ...errorOptions().filter((option) => option.long === "--seed"),
      ...outputOptions(["elements", "contours", "posterior"]),
      ...resumeOptions(),
    ],
    example: "emberline infer --observed D/H=2.527e-5±0.030e-5,Yp=0.245±0.003 --free omegaB,nEff --chart infer.png",
    load: () => import("./commands/infer.ts"),
  },
  {
    name: "recombination",
    summary: "ionisation history, last scattering, baryon drag, sound horizons of one cosmology",
    options: () => [...recombinationOptions(), ...outputOptions(["ionisation", "visibility", "temperature", "depth"])],
    example: "emberline recombination --tau-reion 0.054 --chart recombination.svg --format csv --out history.csv",
    load: () => import("./commands/recombination.ts"),
  },
];
const DEFAULT_COMMAND = "abundances";

function addCommand(program: Command, spec: CommandSpec, withOptions: boolean): void {
  const command = program
    .command(spec.name, { isDefault: spec.name === DEFAULT_COMMAND })
    .summary(spec.summary)
    .description(`${spec.summary[0].toUpperCase()}${spec.summary.slice(1)}.`)
    .addHelpText("after", `\nExample:\n  ${spec.example}`)
    .action(async (options: Options) => (await spec.load()).run(options));
  if (withOptions) for (const option of spec.options()) command.addOption(onlyOnce(option));
}

/**
 * The whole command line; errors are thrown, help and version go to `print`.
 * @param only the command that will run: the others get no options, which takes time to make; all if left out
 */
export function makeProgram(print: (text: string) => void, only?: string): Command {
  const program = new Command("emberline")
    .description("Big Bang nucleosynthesis and the thermal history of the early Universe.")
    .version(VERSION)
    .exitOverride()
    .configureOutput({ writeOut: print, writeErr: () => {} })
    .addHelpText("after", `\nWithout a command: ${DEFAULT_COMMAND} of the default cosmology.`);
  for (const spec of COMMANDS) addCommand(program, spec, only === undefined || spec.name === only);
  addRatesCommands(program);
  return program;
}

/** The command that a command line asks for. */
function commandOf(args: readonly string[]): string {
  const word = args[0] === "help" ? args[1] : args[0];
  return word === undefined || word.startsWith("-") ? DEFAULT_COMMAND : word;
}

/** The words after `emberline help` that explain a command line. */
function helpOf(args: readonly string[]): string {
  const command = commandOf(args);
  return command === RATES && args[1] !== undefined && !args[1].startsWith("-") ? `${RATES} ${args[1]}` : command;
}

/** Commander takes a stray word for an argument of the default command; here it is an unknown command. */
function requireKnownCommand(args: readonly string[]): void {
  const names = [...COMMANDS.map((spec) => spec.name), RATES, "help"];
  const word = args[0] === "help" ? args[1] : args[0];
  if (word === undefined || word.startsWith("-") || names.includes(word)) return;
  const nearest = suggestNearest(word, names);
  const hint = nearest === undefined ? "" : ` did you mean ${nearest}?`;
  throw new InputError("command", `unknown command ${word};${hint} commands are ${names.join(", ")}`);
}

/** What to do about a mistake that commander finds, by its code. */
const REMEDIES: Readonly<Record<string, string>> = {
  "commander.conflictingOption": "give one of them",
  "commander.excessArguments": "options start with --",
  "commander.optionMissingArgument": "write the value after it",
  "commander.missingArgument": "write it after the command",
  "commander.missingMandatoryOptionValue": "add it",
};

/** One line for an error, and the exit status. @param args the words of the command line */
export function describeError(
  error: unknown,
  args: readonly string[] = [],
): { readonly line: string; readonly status: number } {
  const say = (text: string) => `emberline: ${text.trim().replace(/\s*\n\s*/g, " ")}`;
  if (error instanceof EmberlineError) return { line: say(nameOptions(error.message, args)), status: error.exitCode };
  if (error instanceof Interrupted) return { line: say(error.message), status: error.exitCode };
  if (error instanceof CommanderError) {
    const message = error.message.replace(/^error: /, "").replace(/\.$/, "");
    return { line: say(`${message}; ${REMEDIES[error.code] ?? `see emberline help ${helpOf(args)}`}`), status: 2 };
  }
  const message = error instanceof Error ? `${error.name}: ${error.message}` : String(error);
  return { line: say(`the calculation failed: ${message}; --debug shows where`), status: 1 };
}

/**
 * Runs one command line.
 * @param args words after the program's name
 * @returns exit status: 0 done, 1 the calculation failed, 2 bad input, 130 interrupted
 */
export async function main(args: readonly string[]): Promise<number> {
  const printed: string[] = [];
  try {
    requireKnownCommand(args);
    await makeProgram((text) => printed.push(text), commandOf(args)).parseAsync(spellRates(args), { from: "user" });
    return 0;
  } catch (error) {
    if (error instanceof CommanderError && error.exitCode === 0) {
      await printResult(printed.join(""));
      return 0;
    }
    const { line, status } = describeError(error, args);
    await printNotice(line);
    if (args.includes("--debug") && error instanceof Error) await printNotice(error.stack ?? "");
    return status;
  }
}
