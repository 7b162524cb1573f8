/** The keys of a request that came as JSON: every one known, every value of its kind. */
import { suggestNearest } from "../nuclear/reaction-name.ts";
import { InputError } from "../numerics/check.ts";

type Kind =
  | "number"
  | "measured"
  | "text"
  | "texts"
  | "numbers by name"
  | "texts by name"
  | "switch"
  | "numbers"
  | "any";

/** Keys that every command takes. */
const COMMON: Readonly<Record<string, Kind>> = {
  omegaB: "measured",
  eta10: "measured",
  nEff: "number",
  deltaNEff: "number",
  tauN: "measured",
  xiE: "number",
  xiMu: "number",
  xiTau: "number",
  tCmb: "number",
  omegaC: "number",
  h0: "number",
  sumMnu: "number",
  ypMass: "number",
  model: "text",
  alphaFactor: "number",
  tauReion: "number",
  zReion: "number",
  expansion: "text",
  without: "texts",
  network: "text",
  evaluations: "texts by name",
  scales: "numbers by name",
  errors: "text",
  samples: "number",
  seed: "number",
  tolerance: "number",
};

const isObject = (value: unknown): value is Record<string, unknown> =>
  typeof value === "object" && value !== null && !Array.isArray(value);
const isNumber = (value: unknown) => typeof value === "number" && Number.isFinite(value);
const isText = (value: unknown) => typeof value === "string";

const KINDS: Readonly<Record<Kind, { readonly test: (value: unknown) => boolean; readonly wanted: string }>> = {
  number: { test: isNumber, wanted: "a number" },
  measured: {
    test: (value) =>
      isNumber(value) ||
      (isObject(value) && Object.keys(value).sort().join() === "sigma,value" && Object.values(value).every(isNumber)),
    wanted: 'a number or {"value": ..., "sigma": ...}',
  },
  text: { test: isText, wanted: "a string" },
  texts: { test: (value) => Array.isArray(value) && value.every(isText), wanted: "an array of strings" },
  numbers: {
    test: (value) => isText(value) || (Array.isArray(value) && value.every(isNumber)),
    wanted: "an array of numbers",
  },
  "numbers by name": {
    test: (value) => isObject(value) && Object.values(value).every(isNumber),
    wanted: 'an object {"REACTION": number}',
  },
  "texts by name": {
    test: (value) => isObject(value) && Object.values(value).every(isText),
    wanted: 'an object {"REACTION": "NAME"}',
  },
  switch: { test: (value) => typeof value === "boolean", wanted: "true or false" },
  any: { test: () => true, wanted: "" },
};

/** Keys of single commands. */
const OWN: Readonly<Record<string, Readonly<Record<string, Kind>>>> = {
  scan: { over: "texts" },
  grid: { over: "texts", part: "text", check: "switch" },
  recombination: { z: "numbers", budget: "switch" },
  rates: { action: "text", reaction: "text", nuclide: "text", names: "texts", t9: "numbers" },
  infer: { observed: "text", prior: "text", free: "text" },
};

/**
 * Checks the keys of a request.
 * @throws {InputError} naming an unknown key and the nearest known one, or a value of the wrong kind
 */
export function checkKeys(command: string, keys: Readonly<Record<string, unknown>>): void {
  const known = { ...COMMON, ...OWN[command] };
  for (const [key, value] of Object.entries(keys)) {
    if (!Object.hasOwn(known, key)) {
      const nearest = suggestNearest(key, Object.keys(known));
      const hint = nearest === undefined ? `known are ${Object.keys(known).join(", ")}` : `did you mean ${nearest}?`;
      throw new InputError("unknown-key", `unknown key ${key.slice(0, 100)} of ${command}; ${hint}`);
    }
    const { test, wanted } = KINDS[known[key]];
    if (!test(value))
      throw new InputError("type", `${key} = ${JSON.stringify(value).slice(0, 100)}: must be ${wanted}`);
  }
}
