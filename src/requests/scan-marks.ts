/** What the abundance diagram shows beside the curves: observed ranges and the baryon density of the CMB. */
import type { ScanMarks } from "../charts/scan-look.ts";
import type { RateLibrary } from "../nuclear/library.ts";
import type { ScanResults } from "../output/sweep-result.ts";
import { eta10PerOmegaB } from "../parameters/cosmology.ts";
import type { Envelope } from "./envelope.ts";
import { cmbDensity, recommendedObservations, shortSource } from "./observed.ts";

/** @throws {InputError} if the files of the observations are damaged */
export function scanMarks(answer: Envelope<ScanResults>, library: RateLibrary): ScanMarks {
  const { axes } = answer.results;
  const along = axes.length === 2 && axes[1].count > axes[0].count ? axes[1] : axes[0];
  const density = cmbDensity(library);
  return {
    axes: axes.map((axis) => axis.key),
    log: along.log,
    eta10PerOmegaB: eta10PerOmegaB(answer.cosmology.tCmb),
    observed: recommendedObservations(library).map(({ abundance, value, sigma, kind, source, date }) => ({
      abundance,
      value,
      sigma,
      kind,
      source: shortSource(source, date),
    })),
    density: { ...density, source: shortSource(density.source, density.date) },
  };
}
