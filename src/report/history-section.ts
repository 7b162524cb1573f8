/** Section of the report: the first hours, with milestones and charts. */
import type { Envelope, HistoryResults } from "../output/result.ts";
import { formatNumber } from "../output/text.ts";
import { chartFigure } from "./charts.ts";
import { dataTable, type Section } from "./html.ts";
import type { ReportCharts } from "./report.ts";
import { symbols } from "./symbols.ts";

export function historySection({ results }: Envelope<HistoryResults>, charts: ReportCharts): Section {
  const m = results.milestones;
  const f = (value: number, digits = 5) => formatNumber(value, digits);
  const table = dataTable(
    "Milestones of the first hours",
    [{ head: "milestone" }, { head: "value", numeric: true }, { head: "meaning" }],
    [
      ["age at T = 1 MeV", `${f(m.tAt1MeV_s)} s`, "photon temperature"],
      ["weak freeze-out", `${f(m.freezeOutTemperature_MeV)} MeV`, "the rate n → p equals the expansion rate"],
      ["n/p at freeze-out", f(m.neutronToProtonAtFreezeOut), "neutrons per proton"],
      ["age at T = 10⁹ K", `${f(m.tAt1e9K_s)} s`, ""],
      [
        "deuterium peak",
        `${f(m.tDeuteriumPeak_s)} s`,
        `largest share of deuterium, at T = ${f(m.T9DeuteriumPeak, 4)} × 10⁹ K`,
      ],
      [symbols("T_γ/T_νe at the end"), f(m.photonToNeutrinoTemperature), "after electrons and positrons are gone"],
    ],
  );
  const figures = [
    chartFigure(charts, {
      name: "temperature",
      title: "Temperature against time",
      description: `Photon and neutrino temperatures fall as the square root of time; T is 1 MeV at ${f(m.tAt1MeV_s, 3)} s. Below, the neutrino temperature over the photon temperature falls from 1 to ${f(1 / m.photonToNeutrinoTemperature, 4)} while electrons and positrons annihilate.`,
      caption: "Temperature of photons and neutrinos, and the ratio of neutrino to photon temperature.",
    }),
    chartFigure(charts, {
      name: "weak",
      title: "Weak rates and neutron-to-proton ratio",
      description: `The rate n to p crosses the expansion rate at ${f(m.freezeOutTemperature_MeV, 3)} MeV, where n/p is ${f(m.neutronToProtonAtFreezeOut, 3)}; the ratio then leaves its equilibrium value and falls by free decay until deuterium forms.`,
      caption:
        "Above: weak rates and the expansion rate against temperature. Below: neutrons per proton, and its value in equilibrium.",
    }),
    chartFigure(charts, {
      name: "nuclides",
      title: "Nuclides against time",
      description: `Share of the nucleons in each nuclide. Deuterium peaks at ${f(m.tDeuteriumPeak_s, 3)} s, T = ${f(m.T9DeuteriumPeak, 3)} billion kelvin; helium-4 then takes nearly all neutrons, and traces of deuterium, helium-3, tritium, lithium and beryllium remain.`,
      caption: "Share of the nucleons in each nuclide through the first hours.",
    }),
  ];
  return { id: "history", title: "The first hours", content: [table, ...figures] };
}
