/** How the abundances are printed: Yp -> Y_p, he3ToH -> ³He/H. */
import type { AbundanceName } from "./abundances.ts";

/** Printed name of each abundance. */
export const ABUNDANCE_LABELS: Readonly<Record<AbundanceName, string>> = {
  Yp: "Y_p",
  YpMass: "Y_p (mass)",
  dToH: "D/H",
  tToH: "T/H",
  he3ToH: "³He/H",
  li6ToH: "⁶Li/H",
  li7ToH: "⁷Li/H",
  be9ToH: "⁹Be/H",
  b10ToH: "¹⁰B/H",
  b11ToH: "¹¹B/H",
  cnoToH: "CNO/H",
};

/** Printed name of an abundance; a name that is not known stays as it is. */
export function abundanceLabel(name: string): string {
  return (ABUNDANCE_LABELS as Readonly<Record<string, string>>)[name] ?? name;
}
