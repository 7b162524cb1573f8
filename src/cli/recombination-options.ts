/** The options that only `recombination` takes, and those that it takes with another meaning. */
import { Option } from "commander";
import { InputError } from "../numerics/check.ts";
import { formatNumber } from "../output/text.ts";
import { DEFAULTS } from "../parameters/cosmology.ts";
import { SWITCH_EFFECTS } from "../recombination/effects.generated.ts";
import { RECOMBINATION_TOLERANCE } from "../recombination/inputs.ts";
import { RECOMBINATION_SWITCH_NAMES, RECOMBINATION_SWITCHES } from "../recombination/switches.ts";
import { nucleosynthesisOptions, numberInRange, numeric, oneOf, strictNumber } from "./options.ts";

/** Options of nucleosynthesis that are replaced here. */
const REPLACED = ["without", "expansion", "tolerance"];

/** @throws {InputError} unless a list of numbers from 0 to 1e4 */
export function parseRedshiftList(text: string): number[] {
  return text.split(",").map((part) => {
    const z = strictNumber(part, "--z", "redshifts from 0 to 10000, such as 1100,1089.5");
    if (!(z >= 0 && z <= 1e4))
      throw new InputError("range", `--z ${part}: outside the table; give redshifts from 0 to 10000`);
    return z;
  });
}

/** What leaving a switch out moves, in a few words. */
function effectOf(name: string): string {
  const { zStar, xe } = SWITCH_EFFECTS[name];
  const [z, change] = Object.entries(xe).reduce((a, b) => (Math.abs(b[1]) > Math.abs(a[1]) ? b : a));
  const signed = (value: number) => `${value > 0 ? "+" : value < 0 ? "-" : ""}${formatNumber(Math.abs(value), 2)}`;
  return Math.abs(zStar) > 0.001 ? `z_star ${signed(zStar)}` : `x_e ${signed(100 * change)} % at z = ${z}`;
}

/** The parameters of recombination: those of the nucleosynthesis run that gives helium, and its own. */
export function recombinationOptions(): Option[] {
  const switches = RECOMBINATION_SWITCHES.map(({ name, meaning }) => `${name} (${meaning}: ${effectOf(name)})`);
  return [
    ...nucleosynthesisOptions().filter((option) => !REPLACED.includes(option.name())),
    numeric("yp", "ypMass", numberInRange, "from the nucleosynthesis run"),
    new Option("--model <name>", `three-level or saha, ionisation equilibrium (default ${DEFAULTS.model})`).argParser(
      (text: string) => oneOf(text, "--model", ["three-level", "saha"]),
    ),
    numeric("alpha-factor", "alphaFactor", numberInRange, String(DEFAULTS.alphaFactor)),
    numeric("tau-reion", "tauReion", numberInRange, "none").conflicts("zReion"),
    numeric("z-reion", "zReion", numberInRange, "none"),
    new Option(
      "--without <name>",
      `leave an ingredient out (repeatable); what that changes in the default cosmology: ${switches.join("; ")}`,
    ).argParser((text: string, previous: readonly string[] = []) => [
      ...previous,
      oneOf(text, "--without", RECOMBINATION_SWITCH_NAMES),
    ]),
    new Option("--expansion <expression>", "refused: a factor on H(T) acts in nucleosynthesis only").hideHelp(),
    new Option("--z <list>", "rows of the table at these redshifts, 0 .. 10000, such as 1100,1089.5").argParser(
      parseRedshiftList,
    ),
    new Option("--budget", "sensitivities d ln X/d ln p of z_star, z_drag, r_drag to every parameter"),
    numeric("tolerance", "tolerance", numberInRange, String(RECOMBINATION_TOLERANCE)),
  ];
}
