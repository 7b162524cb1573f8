/** The request `history`: the first hours as a table with milestones. */
import { kelvinToMeV } from "../constants/units.ts";
import { scaleFactors, validityWarnings } from "../model/prepare.ts";
import type { RateLibrary } from "../nuclear/library.ts";
import { findMilestones } from "../nucleosynthesis/milestones.ts";
import { computeTimeline } from "../nucleosynthesis/timeline.ts";
import type { Keys } from "../parameters/cosmology.ts";
import type { Envelope, HistoryResults } from "./envelope.ts";
import { makeEnvelope } from "./envelope.ts";
import { modelFor } from "./model-for.ts";
import { nucleosynthesisProvenance } from "./provenance.ts";

/**
 * Answers `history` .
 * @throws {InputError | CalculationError}
 */
export async function computeHistory(keys: Keys, library: RateLibrary): Promise<Envelope<HistoryResults>> {
  const model = await modelFor(keys, library);
  const p = model.parameters();
  const context = model.context(p);
  const { data, history } = context;
  const factors = scaleFactors(data, p.scales, model.library);
  const timeline = computeTimeline(context, { eta10: p.eta10, tauN: p.tauN, factors, tolerance: p.tolerance });
  const species = data.nuclides.map((x) => (x.id === "p" ? "Y_h1" : `Y_${x.id}`));
  const columns = ["t_s", "T_K", "T_MeV", "Tnue_over_T", "Tnumu_over_T", "H_per_s", "n_to_p_per_s", "p_to_n_per_s"];
  const units = ["s", "K", "MeV", "1", "1", "1/s", "1/s", "1/s"];
  const rows = timeline.Y.map((Y, i) => [
    timeline.t[i],
    timeline.T[i],
    kelvinToMeV(timeline.T[i]),
    timeline.TnueOverT[i],
    timeline.TnumuOverT[i],
    timeline.H[i],
    timeline.nToP[i],
    timeline.pToN[i],
    ...Y,
  ]);
  return makeEnvelope(
    "history",
    p,
    {
      table: { columns: [...columns, ...species], units: [...units, ...species.map(() => "1")], rows },
      milestones: findMilestones(timeline, (id) => data.compiled.index.get(id) as number),
      nEffComputed: history.nEffComputed,
    },
    nucleosynthesisProvenance(model, p),
    { ...timeline.counts, tolerance: p.tolerance },
    validityWarnings(p),
  );
}
