/** Section of the report: where the errors come from, and how the abundances respond to parameters and rates. */
import { isAssumed, sortedShares } from "../model/error-budget.ts";
import { abundanceLabel } from "../nucleosynthesis/labels.ts";
import { sourceLabel } from "../output/budget-output.ts";
import type { BudgetResults } from "../output/budget-result.ts";
import type { Envelope } from "../output/result.ts";
import { chartFigure } from "./charts.ts";
import { type Content, dataTable, html, type Section } from "./html.ts";
import type { ReportCharts } from "./report.ts";
import { abundance, fixed, symbols } from "./symbols.ts";

const SHOWN = ["Yp", "dToH", "he3ToH", "li7ToH"] as const;
/** Sources and parameters that are smaller for every abundance are left out of the tables. */
const LEAST = { share: 0.005, sensitivity: 0.02 } as const;

function shareText(share: number): string {
  return share < 0.0005 ? "" : `${(100 * share).toPrecision(2)} %`;
}

export function budgetSection({ results }: Envelope<BudgetResults>, charts: ReportCharts): Section {
  const shown = SHOWN.filter((name) => results.variance[name] !== undefined);
  const heads = shown.map((name) => ({ head: abundance(name), numeric: true }));
  const sources = results.sources
    .filter(({ name }) => shown.some((each) => results.variance[each][name] >= LEAST.share))
    .map((source): Content[] => [
      symbols(`${sourceLabel(source.name)}${isAssumed(source) ? " (error assumed)" : ""}`),
      ...shown.map((each) => shareText(results.variance[each][source.name])),
      source.citation,
    ]);
  const parameters = Object.keys(results.sensitivities[shown[0]] ?? {})
    .filter((name) => shown.some((each) => Math.abs(results.sensitivities[each][name]) >= LEAST.sensitivity))
    .map((name): Content[] => [
      symbols(sourceLabel(name)),
      ...shown.map((each) => fixed(results.sensitivities[each][name], 3)),
    ]);
  const leading = shown.map((name) => {
    const [first] = sortedShares(results, name);
    return `${abundanceLabel(name)}: ${sourceLabel(first.source.name)}, ${shareText(first.share)}`;
  });
  return {
    id: "budget",
    title: "Where the errors come from",
    content: [
      chartFigure(charts, {
        name: "budget",
        title: "Share of each source in the variance",
        description: `Bars of the largest shares of each variance. The leading sources are ${leading.join("; ")}. The table below has all of them.`,
        caption: "Share of each source in the variance of each abundance; pale bars: the size of the error is assumed.",
      }),
      dataTable(
        "Share of the variance, sources of 0.5 % or more",
        [{ head: "source" }, ...heads, { head: "from" }],
        sources,
      ),
      dataTable(
        "Sensitivities d ln X/d ln p of 0.02 or more: a parameter or rate 1 % higher moves the abundance by so many per cent",
        [{ head: "parameter or rate" }, ...heads],
        parameters,
      ),
      html`<p>${symbols("N_eff")}: per cent of three neutrino species; G: at fixed baryon density.</p>\n`,
    ],
  };
}
