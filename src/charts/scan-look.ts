/** The look of the abundance diagram, and what it is told to show beside the curves. */
import { formatReaction } from "../nuclear/reaction-name.ts";
import { RANGES } from "../parameters/cosmology.ts";
import { DASHES, PALETTE } from "./style.ts";

/** A measured range to compare with. */
export interface ObservedRange {
  /** Name of the abundance, e.g. dToH. */
  readonly abundance: string;
  readonly value: number;
  readonly sigma: number;
  readonly kind: "measurement" | "upper-limit";
  /** Short name of the source: first author and year. */
  readonly source: string;
}

/** The baryon density from another measurement, drawn as an upright band. */
export interface DensityBand {
  readonly omegaB: number;
  readonly sigma: number;
  readonly source: string;
}

/** What stands in the figure beside the curves. */
export interface ScanMarks {
  /** Keys of the axes. */
  readonly axes: readonly string[];
  /** Whether the x axis is logarithmic. */
  readonly log: boolean;
  /** eta10 for omega_b = 1: ties the two x axes together. */
  readonly eta10PerOmegaB: number;
  readonly observed: readonly ObservedRange[];
  readonly density?: DensityBand;
}

export interface Look {
  readonly label: string;
  readonly color: string;
  readonly dash: readonly number[];
}

/** Abundances drawn, with their look. */
export const LOOKS: Readonly<Record<string, Look>> = {
  Yp: { label: "⁴He", color: PALETTE.vermilion, dash: DASHES.solid },
  dToH: { label: "D", color: PALETTE.blue, dash: DASHES.solid },
  he3ToH: { label: "³He", color: PALETTE.purple, dash: DASHES.dashed },
  li7ToH: { label: "⁷Li", color: PALETTE.green, dash: DASHES.solid },
};
/** One colour a value of the second axis, dark to light, so that their order shows in grey too. */
export const RAMP = ["#1b1f27", "#25456e", "#0072b2", "#2f9ac4", "#57b9a4", "#a5c34f"] as const;

/** Text sizes [px], a little larger than elsewhere since the figure is often made small. */
export const TEXT = { axis: 12, label: 13, small: 11 } as const;

/** Title of an axis in words. */
export function axisTitle(key: string): string {
  if (key === "eta10") return "η₁₀ = 10¹⁰ n_b/n_γ";
  if (key === "omegaB") return "ω_b = Ω_b h²";
  if (key.startsWith("scale:")) return `rate of ${formatReaction(key.slice("scale:".length))} / adopted rate`;
  const { meaning, unit } = RANGES[key];
  return `${meaning.replace(/, instead of .*/, "")}${unit === "" ? "" : ` [${unit}]`}`;
}

/** Panels by name, from top to bottom: axis title, abundances, share of the height. */
export const PANELS = {
  helium: { title: "Yₚ", abundances: ["Yp"], weight: 3 },
  deuterium: { title: "D/H, ³He/H", abundances: ["dToH", "he3ToH"], weight: 4 },
  lithium: { title: "⁷Li/H", abundances: ["li7ToH"], weight: 3 },
} as const;
export type PanelName = keyof typeof PANELS;

/** Names for `--chart NAME=FILE`. */
export const SCAN_CHARTS = Object.keys(PANELS) as PanelName[];
