/** Sections of the report: parameters, rates with citations, observations, and how it was calculated. */
import type { Observation } from "../inference/observations.ts";
import { formatReaction } from "../nuclear/reaction-name.ts";
import type { Provenance } from "../output/result.ts";
import { type CosmologyParameters, NUCLEOSYNTHESIS_CORRECTIONS, RANGES } from "../parameters/cosmology.ts";
import { type Content, dataTable, html, type Section } from "./html.ts";
import type { ReportData, ReportDensity } from "./report.ts";
import { abundance, estimate, symbols } from "./symbols.ts";

/** What the keys without a range mean. */
const MEANINGS: Readonly<Record<string, string>> = {
  omegaBSigma: "its standard deviation",
  tauNSigma: "its standard deviation",
  model: "recombination model",
  expansion: "factor on the expansion rate",
  without: "corrections left out",
  network: "reaction network",
  evaluations: "evaluations other than the network's",
  scales: "factors on rates",
  errors: "theory errors",
};

function shownValue(value: unknown): string {
  if (Array.isArray(value)) return value.length === 0 ? "none" : value.join(", ");
  if (typeof value === "object" && value !== null) {
    const entries = Object.entries(value);
    return entries.length === 0 ? "none" : entries.map(([name, item]) => `${name}: ${item}`).join(", ");
  }
  return String(value);
}

export function parameterSection(cosmology: CosmologyParameters): Section {
  const rows = Object.entries(cosmology).map(([key, value]): Content[] => [
    html`<code>${key}</code>`,
    shownValue(value),
    RANGES[key]?.unit ?? (key === "tauNSigma" ? "s" : ""),
    (MEANINGS[key] ?? RANGES[key]?.meaning ?? "").replace(/, instead of .*/, ""),
  ]);
  const table = dataTable(
    "Every parameter of the calculation, by its key",
    [{ head: "key" }, { head: "value" }, { head: "unit" }, { head: "meaning" }],
    rows,
  );
  return { id: "parameters", title: "Parameters", content: [table] };
}

export function ratesSection({ rates, network }: Provenance): Section {
  const rows = rates.map((rate): Content[] => [
    formatReaction(rate.reaction),
    html`<code>${rate.reaction}</code>`,
    `${rate.evaluation}${rate.scale === undefined ? "" : ` × ${rate.scale}`}`,
    rate.uncertaintyBasis,
    rate.citation,
  ]);
  const table = dataTable(
    `The ${rates.length} rates of network ${network}; the rates n ↔ p are computed`,
    [{ head: "reaction" }, { head: "id" }, { head: "evaluation" }, { head: "error" }, { head: "citation" }],
    rows,
  );
  return { id: "rates", title: "Rates", content: [table] };
}

export function sourcesSection(observed: readonly Observation[], density: ReportDensity): Section {
  const rows = observed.map((o): Content[] => [
    abundance(o.abundance),
    estimate(o.value, o.sigma),
    o.kind === "upper-limit" ? "upper limit" : "measurement",
    o.source,
    `${o.basis}${o.note === undefined ? "" : `; ${o.note}`}`,
  ]);
  rows.push([symbols("ω_b (CMB)"), estimate(density.omegaB, density.sigma), "measurement", density.source, ""]);
  const table = dataTable(
    "Observed values that the calculation is compared with",
    [
      { head: "quantity" },
      { head: "value", numeric: true },
      { head: "kind" },
      { head: "source" },
      { head: "how it came here" },
    ],
    rows,
  );
  return { id: "observations", title: "Observations", content: [table] };
}

/** Answers of which the cost is told. */
const PARTS = ["abundances", "history", "budget", "diagram", "recombination"] as const;

export function calculationSection(data: ReportData): Section {
  const { provenance, version, solver } = data.abundances;
  const off = NUCLEOSYNTHESIS_CORRECTIONS.filter((name) => !provenance.corrections.includes(name));
  const rows = PARTS.flatMap((name): Content[][] => {
    const answer = data[name];
    if (answer === undefined) return [];
    const { steps, rejected, rhs, jacobians, factorisations, tolerance } = answer.solver;
    return [[name, steps, rejected, rhs, jacobians, factorisations, tolerance.toExponential()]];
  });
  const heads = ["steps", "rejected", "right-hand sides", "Jacobians", "factorisations", "tolerance"];
  return {
    id: "calculation",
    title: "How it was calculated",
    content: [
      html`<p>emberline ${version}, constants ${provenance.constants}, relative error control ${solver.tolerance.toExponential()}.</p>
<p>Corrections: ${provenance.corrections.length > 0 ? provenance.corrections.join(", ") : "none"}${off.length > 0 ? `; left out: ${off.join(", ")}` : ""}.</p>
`,
      dataTable(
        "Work of the integrations behind each part",
        [{ head: "part" }, ...heads.map((head) => ({ head, numeric: true }))],
        rows,
      ),
    ],
  };
}
