/** The look of the report: one sheet of style for screen and paper, wide and narrow. */

/** CSS; colours have a contrast of 4.5 or more on their ground. */
export const PAGE_STYLE = `:root { color-scheme: light; --ink: #1b1f27; --muted: #4d5663; --line: #d5dae1; --accent: #00588a; }
* { box-sizing: border-box; }
html { background: #fff; }
body { margin: 0 auto; padding: 1.5rem clamp(1rem, 4vw, 3rem) 3rem; max-width: 62rem; color: var(--ink);
  font: 1rem/1.55 "Segoe UI", "Noto Sans", "DejaVu Sans", "Helvetica Neue", Arial, sans-serif; }
h1 { font-size: 1.7rem; line-height: 1.2; margin: 0 0 0.5rem; }
h2 { font-size: 1.25rem; line-height: 1.3; margin: 2.5rem 0 0.75rem; padding-bottom: 0.25rem; border-bottom: 2px solid var(--ink); }
h3 { font-size: 1.02rem; margin: 1.5rem 0 0.5rem; }
p { max-width: 46rem; }
a { color: var(--accent); }
a:focus-visible, [tabindex]:focus-visible { outline: 3px solid var(--accent); outline-offset: 2px; }
pre { margin: 0.5rem 0; padding: 0.6rem 0.8rem; background: #f3f5f7; border-left: 4px solid var(--accent);
  white-space: pre-wrap; overflow-wrap: anywhere; }
code { font-family: ui-monospace, "DejaVu Sans Mono", Menlo, Consolas, monospace; font-size: 0.9em; }
nav ul { list-style: none; margin: 1rem 0 0; padding: 0; display: flex; flex-wrap: wrap; gap: 0.25rem 1.25rem; }
nav a { display: inline-block; padding: 0.2rem 0; }
aside { margin-top: 1.5rem; padding: 0.2rem 1rem 0.6rem; border: 2px solid #8a5200; }
aside h2 { margin-top: 0.5rem; border: 0; }
.wide { overflow-x: auto; margin: 1rem 0; background: #fff; }
table { border-collapse: collapse; font-size: 0.92rem; }
caption { text-align: left; color: var(--muted); padding: 0 0 0.4rem; caption-side: top; }
caption span { display: block; max-width: min(46rem, calc(100vw - 2.5rem)); }
sub, sup { font-size: 0.75em; line-height: 0; }
th, td { padding: 0.28rem 1.1rem 0.28rem 0; text-align: left; vertical-align: top; border-bottom: 1px solid var(--line); }
thead th { border-bottom: 2px solid var(--muted); vertical-align: bottom; }
tbody th { font-weight: 600; }
td:last-child:not(.number) { min-width: 13rem; }
.number { text-align: right; font-variant-numeric: tabular-nums; white-space: nowrap; }
td.number, th.number { padding-left: 0.6rem; }
figure { margin: 1.25rem 0; }
figure .wide { margin: 0; }
figure svg { display: block; max-width: 100%; height: auto; }
figure.large svg { min-width: 34rem; }
figure.upright { display: flex; flex-wrap: wrap; align-items: flex-end; gap: 0.5rem 2rem; }
figure.upright figcaption { flex: 1 1 16rem; }
figcaption { color: var(--muted); font-size: 0.92rem; max-width: 46rem; margin-top: 0.35rem; }
footer { margin-top: 3rem; border-top: 1px solid var(--line); color: var(--muted); font-size: 0.92rem; }
@media (max-width: 40rem) { body { padding-top: 1rem; } th, td { padding-right: 0.8rem; } }
@media print {
  @page { margin: 18mm 16mm; }
  body { max-width: none; padding: 0; font-size: 9.5pt; line-height: 1.4; }
  nav { display: none; }
  h1 { font-size: 16pt; } h2 { font-size: 12.5pt; margin-top: 1.4rem; } h3 { font-size: 10.5pt; }
  h2, h3, caption { break-after: avoid; }
  figure, tr, pre { break-inside: avoid; }
  thead { display: table-header-group; break-after: avoid; }
  tbody tr:first-child { break-before: avoid; }
  .wide { overflow: visible; }
  table { font-size: 8.5pt; }
  figure.large svg { min-width: 0; width: 100%; max-height: 105mm; }
  figure.upright svg { max-height: 150mm; width: auto; }
  a { color: inherit; text-decoration: none; }
}
`;
