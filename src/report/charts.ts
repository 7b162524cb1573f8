/** A chart in the report: picture, text alternative, caption. */
import { html, type Markup, NOTHING } from "./html.ts";
import { inlineSvg } from "./inline-svg.ts";

/** What is said about a chart. */
export interface ChartText {
  readonly name: string;
  readonly title: string;
  /** What it shows, with the numbers that matter, for those who do not see it. */
  readonly description: string;
  readonly caption: string;
  /** Higher than wide: as large as it is; others fill the width. */
  readonly upright?: boolean;
}

/** The figure, or nothing if the chart was not drawn. */
export function chartFigure(charts: Readonly<Record<string, string>>, text: ChartText): Markup {
  const svg = charts[text.name];
  if (svg === undefined) return NOTHING;
  const picture = inlineSvg({ svg, title: text.title, description: text.description }, `chart-${text.name}`);
  const kind = text.upright === true ? "upright" : "large";
  return html`<figure class="${kind}">
<section class="wide" aria-label="Chart: ${text.title}" tabindex="0">${picture}</section>
<figcaption>${text.caption}</figcaption>
</figure>
`;
}
