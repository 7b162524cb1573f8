/** The options of the command `infer`. */
import { Option } from "commander";

const joined = (text: string, previous?: string) => (previous === undefined ? text : `${previous},${text}`);

/** What is observed, what is free, what is known beforehand. */
export function inferOptions(): Option[] {
  return [
    new Option(
      "--observed <data>",
      "NAME=VALUE±SIGMA,... (D/H, Yp, 3He/H, 7Li/H), NAME=measurement of the catalogue, or a set of rates/observations/: recommended, recent (default recommended)",
    ).argParser(joined),
    new Option("--free <keys>", "what is inferred: omegaB, nEff, tauN, xiE, separated by commas (default omegaB)"),
    new Option(
      "--prior <KEY=VALUE±SIGMA>",
      "Gaussian prior (repeatable); KEY=MIN:MAX for a flat one; planck2018 for the CMB's omega_b (default flat)",
    ).argParser(joined),
  ];
}
