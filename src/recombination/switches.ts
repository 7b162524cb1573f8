/** The parts of the recombination calculation that can be left out by name, so that the effect of each can be shown. */

export interface RecombinationSwitch {
  readonly name: string;
  /** What leaving it out does. */
  readonly meaning: string;
  /** Models in which it exists. */
  readonly models: readonly ("saha" | "three-level")[];
}

const THREE = ["three-level"] as const;
const BOTH = ["saha", "three-level"] as const;

/** Names for `without` in recombination; the default calculation has all of them on. */
export const RECOMBINATION_SWITCHES: readonly RecombinationSwitch[] = [
  {
    name: "hydrogen-bottleneck",
    meaning: "every recombination to n >= 2 reaches the ground state (Peebles factor C = 1)",
    models: THREE,
  },
  { name: "two-photon", meaning: "no 2s-1s two-photon decay of hydrogen", models: THREE },
  { name: "lyman-alpha-escape", meaning: "no escape of Lyman alpha by redshifting out of the line", models: THREE },
  { name: "matter-temperature-rates", meaning: "photo-ionisation of hydrogen at T_r instead of T_m", models: THREE },
  { name: "matter-cooling", meaning: "T_m = T_r throughout: no adiabatic cooling of matter", models: BOTH },
  {
    name: "helium-bottleneck",
    meaning: "every recombination of He II reaches the ground state (He I close to Saha)",
    models: THREE,
  },
  { name: "helium-two-photon", meaning: "no two-photon decay of He I 2 1S", models: THREE },
  { name: "helium-triplet", meaning: "He I recombines through singlets only", models: THREE },
  {
    name: "helium-continuum-opacity",
    meaning: "He I lines are not absorbed by the continuum of neutral hydrogen",
    models: THREE,
  },
  { name: "helium-double-ionisation", meaning: "helium is never ionised twice", models: BOTH },
];

export const RECOMBINATION_SWITCH_NAMES: readonly string[] = RECOMBINATION_SWITCHES.map(({ name }) => name);
