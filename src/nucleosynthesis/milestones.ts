/** Times and temperatures of the first hours: freeze-out, deuterium peak, 1 MeV, 1e9 K. */
import { kelvinToMeV, mevToT9 } from "../constants/units.ts";
import { CalculationError } from "../numerics/check.ts";
import { notAKnotSpline } from "../numerics/interpolate.ts";
import { findRoot } from "../numerics/roots.ts";
import type { Timeline } from "./timeline.ts";

/** Names and units as in the JSON output. */
export interface MilestoneValues {
  readonly tAt1MeV_s: number;
  /** k_B T where the n -> p rate equals H. */
  readonly freezeOutTemperature_MeV: number;
  readonly neutronToProtonAtFreezeOut: number;
  readonly tDeuteriumPeak_s: number;
  readonly T9DeuteriumPeak: number;
  readonly tAt1e9K_s: number;
  /** T_gamma/T_nue at the end of the run. */
  readonly photonToNeutrinoTemperature: number;
}

/**
 * Milestones by cubic interpolation of a timeline in s = -ln T9.
 * @param index position of a nuclide in Y
 * @throws {CalculationError} if a milestone lies outside the run (e.g. weak rates never equal H)
 */
export function findMilestones(timeline: Timeline, index: (id: string) => number): MilestoneValues {
  const { s, t, T, H, nToP, Y } = timeline;
  const lnTime = notAKnotSpline(s, t.map(Math.log));
  const lnTemperature = notAKnotSpline(s, T.map(Math.log));
  const timeAt = (at: number) => Math.exp(lnTime.value(at));
  const sOf = (T9: number) => -Math.log(T9);
  const contrast = notAKnotSpline(
    s,
    nToP.map((rate, i) => Math.log(rate / H[i])),
  );
  let i = 0;
  while (i < s.length && contrast.y[i] > 0) i++;
  if (i === 0 || i === s.length)
    throw new CalculationError(
      "milestone",
      "weak freeze-out: the n -> p rate does not cross H between 10 MeV and T9 = 0.01",
    );
  const sFreeze = findRoot(contrast.value, s[i - 1], s[i]);
  const lnRatio = notAKnotSpline(
    s.subarray(Math.max(0, i - 10), i + 10),
    Y.slice(Math.max(0, i - 10), i + 10).map((y) => Math.log(y[index("n")] / y[index("p")])),
  );
  const deuterium = Float64Array.from(Y, (y) => y[index("d")]);
  const k = deuterium.indexOf(Math.max(...deuterium));
  const curve = notAKnotSpline(s, deuterium.map(Math.log));
  const inside = k > 0 && k < s.length - 1;
  const sPeak = inside ? findRoot(curve.derivative, s[k - 1], s[k + 1]) : s[k];
  return {
    tAt1MeV_s: timeAt(sOf(mevToT9(1))),
    freezeOutTemperature_MeV: kelvinToMeV(Math.exp(lnTemperature.value(sFreeze))),
    neutronToProtonAtFreezeOut: Math.exp(lnRatio.value(sFreeze)),
    tDeuteriumPeak_s: timeAt(sPeak),
    T9DeuteriumPeak: Math.exp(-sPeak),
    tAt1e9K_s: timeAt(0),
    photonToNeutrinoTemperature: 1 / timeline.TnueOverT[s.length - 1],
  };
}
