/** The options of the command line: names, parsers, help texts, and the keys of a request they become. */
import { Option } from "commander";
import { InputError } from "../numerics/check.ts";
import {
  DEFAULTS,
  type Keys,
  type Measured,
  NUCLEOSYNTHESIS_CORRECTIONS,
  RANGES,
  SCALE_RANGE,
} from "../parameters/cosmology.ts";

/** Formats of the result. */
export const FORMATS = ["text", "json", "csv", "ecsv"] as const;
export type Format = (typeof FORMATS)[number];

/** `NAME=FILE`, or FILE alone for all charts of the command in one figure. */
export interface ChartRequest {
  readonly name?: string;
  readonly file: string;
}

/** What commander hands to a command, by camelCase option name. */
export interface Options {
  readonly [name: string]: unknown;
  readonly format: Format;
  readonly out?: string;
  readonly chart?: readonly ChartRequest[];
  readonly rates?: string;
  readonly quiet?: boolean;
  readonly debug?: boolean;
}

const NUMBER = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i;

/** How a number of this key is asked for, e.g. `500 to 1500 s`. */
function accepted(key: string): string {
  const { min, max, unit } = RANGES[key];
  return `${min} to ${max}${unit === "" ? "" : ` ${unit}`}`;
}

/** A value as it is shown in a message: blank ones in quotes. */
function shown(text: string): string {
  return text.trim() === "" ? JSON.stringify(text) : text;
}

const PLUS_MINUS = /±|\+\/-|\+-/;

/**
 * A number written in full: nothing after it, no NaN or infinity.
 * @throws {InputError} naming the option and what it accepts
 */
export function strictNumber(text: string, option: string, expected: string): number {
  const value = NUMBER.test(text.trim()) ? Number(text) : Number.NaN;
  if (!Number.isFinite(value))
    throw new InputError("number", `${option} ${shown(text)}: not a finite number; give ${expected}`);
  return value;
}

/** A number within the range of its key. @throws {InputError} */
export function numberInRange(text: string, option: string, key: string): number {
  if (PLUS_MINUS.test(text))
    throw new InputError("number", `${option} ${text}: takes no error; give a number from ${accepted(key)}`);
  const value = strictNumber(text, option, `a number from ${accepted(key)}`);
  const { min, max } = RANGES[key];
  if (!(value >= min && value <= max))
    throw new InputError("range", `${option} ${text}: out of range; accepted are ${accepted(key)}`);
  return value;
}

/** A number, or one with its error: `878.4±0.5`, `878.4+-0.5`, `878.4+/-0.5`. */
function measuredInRange(text: string, option: string, key: string): number | Measured {
  const [first, second, ...rest] = text.split(PLUS_MINUS);
  if (second === undefined) return numberInRange(text, option, key);
  if (rest.length > 0) throw new InputError("number", `${option} ${text}: more than one error; write VALUE±SIGMA`);
  const value = numberInRange(first, option, key);
  const sigma = NUMBER.test(second.trim()) ? Number(second) : Number.NaN;
  if (!(sigma >= 0 && sigma < Number.POSITIVE_INFINITY))
    throw new InputError("number", `${option} ${text}: the error after ± must be a number of 0 or more`);
  return { value, sigma };
}

function wholeInRange(text: string, option: string, key: string): number {
  const value = numberInRange(text, option, key);
  if (!Number.isInteger(value))
    throw new InputError("range", `${option} ${text}: must be a whole number from ${accepted(key)}`);
  return value;
}

/** @throws {InputError} unless the word is one of the choices */
export function oneOf(text: string, option: string, choices: readonly string[]): string {
  if (!choices.includes(text))
    throw new InputError("choice", `${option} ${shown(text)}: unknown; accepted are ${choices.join(", ")}`);
  return text;
}

/** `R=VALUE` split at its last `=`; reactions contain none. */
function pair(text: string, option: string, expected: string): [string, string] {
  const at = text.lastIndexOf("=");
  if (at <= 0 || at === text.length - 1)
    throw new InputError("syntax", `${option} ${shown(text)}: write ${expected}, with a reaction such as d(p,g)he3`);
  return [text.slice(0, at).trim(), text.slice(at + 1).trim()];
}

function addEntry<T>(
  option: string,
  name: string,
  value: T,
  previous: Readonly<Record<string, T>> = {},
): Record<string, T> {
  if (Object.hasOwn(previous, name))
    throw new InputError("conflict", `${option} ${name}: given twice; keep one of them`);
  return { ...previous, [name]: value };
}

/** @throws {InputError} unless the factor is a number within the range of scales */
export function parseScale(text: string, previous?: Readonly<Record<string, number>>): Record<string, number> {
  const [reaction, factorText] = pair(text, "--scale", "R=FACTOR");
  const range = `${SCALE_RANGE.min} to ${SCALE_RANGE.max}`;
  const factor = strictNumber(factorText, `--scale ${reaction}=`, `a factor from ${range}`);
  if (!(factor >= SCALE_RANGE.min && factor <= SCALE_RANGE.max))
    throw new InputError("range", `--scale ${text}: out of range; the factor must be ${range}`);
  return addEntry("--scale", reaction, factor, previous);
}

function parseEvaluation(text: string, previous?: Readonly<Record<string, string>>): Record<string, string> {
  const [reaction, name] = pair(text, "--evaluation", "R=NAME");
  return addEntry("--evaluation", reaction, name, previous);
}

/** @throws {InputError} unless the file ends in .png, .svg or .pdf and the name is one of the command's charts */
export function parseChart(text: string, names: readonly string[], previous: readonly ChartRequest[] = []) {
  const named = /^([a-zA-Z][\w-]*)=(.*)$/.exec(text);
  const request: ChartRequest = named === null ? { file: text } : { name: named[1], file: named[2] };
  if (request.name !== undefined && !names.includes(request.name))
    throw new InputError("choice", `--chart ${text}: no chart ${request.name}; there are ${names.join(", ")}`);
  if (!/[^/\\]\.(png|svg|pdf)$/i.test(request.file))
    throw new InputError("choice", `--chart ${shown(text)}: the file must end in .png, .svg or .pdf`);
  return [...previous, request];
}

/** @throws {InputError} unless a whole number from 1 */
function parseJobs(text: string): number {
  const jobs = strictNumber(text, "--jobs", "a whole number from 1");
  if (!(Number.isInteger(jobs) && jobs >= 1))
    throw new InputError("range", `--jobs ${text}: must be a whole number from 1`);
  return jobs;
}

function unitSuffix(unit: string): string {
  return unit === "" ? "" : ` [${unit}]`;
}

/** Option of one numeric key, with unit, range and default in its help. */
export function numeric(
  flag: string,
  key: string,
  parse: (text: string, option: string, key: string) => unknown,
  fallback: string,
): Option {
  const { meaning, unit, min, max } = RANGES[key];
  const text = `${meaning}${unitSuffix(unit)}, ${min} .. ${max} (default ${fallback})`;
  return new Option(`--${flag} <x>`, text).argParser((value: string) => parse(value, `--${flag}`, key));
}

function number(flag: string, key: keyof typeof DEFAULTS): Option {
  return numeric(flag, key, numberInRange, String(DEFAULTS[key]));
}

/** The parameters of the early Universe and of the rates, as every nucleosynthesis command takes them. */
export function nucleosynthesisOptions(): Option[] {
  return [
    numeric("omega-b", "omegaB", measuredInRange, String(DEFAULTS.omegaB)).conflicts("eta10"),
    numeric("eta10", "eta10", measuredInRange, "from omega-b"),
    numeric("n-eff", "nEff", numberInRange, "3.044").conflicts("deltaN"),
    numeric("delta-n", "deltaNEff", numberInRange, String(DEFAULTS.deltaNEff)),
    numeric("tau-n", "tauN", measuredInRange, `${DEFAULTS.tauN}±${DEFAULTS.tauNSigma}`),
    number("xi-e", "xiE"),
    number("xi-mu", "xiMu"),
    number("xi-tau", "xiTau"),
    number("t-cmb", "tCmb"),
    number("omega-c", "omegaC"),
    number("h0", "h0"),
    number("sum-mnu", "sumMnu"),
    new Option(
      "--expansion <expression>",
      'factor on H(T): an expression in T [K], TMeV, t [s], H [1/s]; finite and positive throughout (default "1")',
    ),
    new Option(
      "--without <name>",
      `leave a correction out (repeatable): ${NUCLEOSYNTHESIS_CORRECTIONS.join(", ")}; finite-mass takes weak-magnetism with it, qed-e2 takes qed-e3`,
    ).argParser((text: string, previous: readonly string[] = []) => [
      ...previous,
      oneOf(text, "--without", NUCLEOSYNTHESIS_CORRECTIONS),
    ]),
    new Option("--network <name>", `reaction network: twelve, standard, extended, wide (default ${DEFAULTS.network})`),
    new Option(
      "--evaluation <R=NAME>",
      "another evaluation for a reaction (repeatable), e.g. d-p_gamma-he3=marcucci2016",
    ).argParser(parseEvaluation),
    new Option(
      "--scale <R=FACTOR>",
      `multiply a rate (repeatable), ${SCALE_RANGE.min} .. ${SCALE_RANGE.max}, e.g. "d(p,g)he3=1.02"`,
    ).argParser(parseScale),
    new Option("--rates <dir>", "another rate library, whole or holding only the files that differ"),
    number("tolerance", "tolerance"),
  ];
}

/** Options that may be given more than once. */
const REPEATABLE = ["--without", "--evaluation", "--scale", "--chart", "--over", "--observed", "--prior"];

/**
 * The same option, refusing a second value that differs from the first, where only one counts.
 * Without a parser of its own an option keeps one value, whatever its name.
 */
export function onlyOnce(option: Option): Option {
  const parse = option.parseArg;
  const counts = parse !== undefined && REPEATABLE.includes(option.long ?? "");
  if (counts || option.variadic || !(option.required || option.optional)) return option;
  let first: string | undefined;
  return option.argParser((text: string, previous: unknown) => {
    if (first !== undefined && first !== text)
      throw new InputError(
        "conflict",
        `${option.long} ${shown(first)} and ${shown(text)}: given twice; keep one of them`,
      );
    first = text;
    return parse === undefined ? text : parse(text, previous);
  });
}

/** Theory errors and Monte Carlo. */
export function errorOptions(): Option[] {
  return [
    new Option(
      "--errors <kind>",
      `theory errors: linear, none, sampled (with --samples) (default ${DEFAULTS.errors})`,
    ).argParser((text: string) => oneOf(text, "--errors", ["linear", "none", "sampled"])),
    numeric("samples", "samples", wholeInRange, String(DEFAULTS.samples)),
    numeric("seed", "seed", wholeInRange, String(DEFAULTS.seed)),
  ];
}

/** Where and how the answer is written. `charts`: names of the command's charts, if it has any. */
export function outputOptions(charts: readonly string[] = []): Option[] {
  const chart = new Option(
    "--chart <[NAME=]FILE>",
    `chart as .png, .svg or .pdf (repeatable): all panels in one figure, or one by its name: ${charts.join(", ")}`,
  ).argParser((text: string, previous: readonly ChartRequest[] | undefined) => parseChart(text, charts, previous));
  return [
    new Option("--format <name>", `format of the result: ${FORMATS.join(", ")}`)
      .default("text")
      .argParser((text: string) => oneOf(text, "--format", FORMATS)),
    new Option("--out <file>", "write the result to a file, whole or not at all (default standard output)"),
    ...(charts.length > 0 ? [chart] : []),
    new Option(
      "--jobs <n>",
      "threads, where a command runs many cases (default: all cores); any number gives the same result",
    ).argParser(parseJobs),
    new Option("--quiet", "no progress on standard error"),
    new Option("--debug", "show where an error came from"),
  ];
}

/** Option name as commander stores it -> key of a request, where the two differ. */
const KEY_OF_OPTION: Readonly<Record<string, keyof Keys>> = {
  deltaN: "deltaNEff",
  evaluation: "evaluations",
  scale: "scales",
  yp: "ypMass",
};
const NOT_KEYS = ["format", "out", "chart", "rates", "jobs", "resume", "join", "quiet", "debug"];

/** The keys of a request from the options that were given. */
export function toKeys(options: Options): Keys {
  const given = Object.entries(options).filter(([name, value]) => !NOT_KEYS.includes(name) && value !== undefined);
  return Object.fromEntries(given.map(([name, value]) => [KEY_OF_OPTION[name] ?? name, value])) as Keys;
}
