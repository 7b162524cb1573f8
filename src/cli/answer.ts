/** What every command does: keys and rates in, one request, then charts and the result out. */
import type { AnyChart, Figure } from "../charts/figure.ts";
import { loadRates } from "../node/load-rates.ts";
import { printNotice, printResult } from "../node/print.ts";
import { requireWritable, writeWhole } from "../node/write-file.ts";
import type { RateLibrary } from "../nuclear/library.ts";
import type { Table } from "../numerics/table.ts";
import { toCsv } from "../output/csv.ts";
import { toEcsv } from "../output/ecsv.ts";
import { toJson } from "../output/json.ts";
import { provenanceNotes } from "../output/provenance-text.ts";
import type { Keys } from "../parameters/cosmology.ts";
import { type Envelope, type Progress, withWallTime } from "../requests/envelope.ts";
import { type Options, toKeys } from "./options.ts";
import { progressLine } from "./progress.ts";

/** How one command computes and shows its answer. */
export interface AnswerSpec<Results> {
  readonly compute: (keys: Keys, library: RateLibrary, progress?: Progress) => Promise<Envelope<Results>>;
  readonly text: (answer: Envelope<Results>) => string;
  readonly table: (results: Results) => Table;
  readonly describe?: (results: Results) => Readonly<Record<string, string>>;
  /** Header of CSV and ECSV, where it is not the provenance alone. */
  readonly notes?: (answer: Envelope<Results>) => Notes;
  /** The command's figure: all panels, or the one of that name. */
  readonly figure?: (answer: Envelope<Results>, name?: string) => Figure<AnyChart>;
}

type Notes = Readonly<Record<string, string | readonly string[]>>;

function noteLines(notes: Notes): string[] {
  return Object.entries(notes).flatMap(([key, value]) =>
    typeof value === "string" ? [`${key}: ${value}`] : value.map((item) => `${key}: ${item}`),
  );
}

/** The answer in the format asked for. */
export function render<Results>(answer: Envelope<Results>, spec: AnswerSpec<Results>, options: Options): string {
  const notes = spec.notes ?? provenanceNotes;
  switch (options.format) {
    case "text":
      return spec.text(answer);
    case "json":
      return toJson(answer);
    case "csv":
      return toCsv(spec.table(answer.results), noteLines(notes(answer)));
    case "ecsv":
      return toEcsv(spec.table(answer.results), notes(answer), spec.describe?.(answer.results));
  }
}

/**
 * Computes and writes one answer. Files are checked before the calculation starts.
 * @throws {InputError | CalculationError} with one clear line
 */
export async function answerCommand<Results>(options: Options, spec: AnswerSpec<Results>): Promise<void> {
  const charts = options.chart ?? [];
  for (const path of [options.out, ...charts.map((chart) => chart.file)])
    if (path !== undefined) await requireWritable(path);
  const library = await loadRates(options.rates);
  const progress = progressLine(options.quiet === true);
  const start = performance.now();
  const computed = await spec.compute(toKeys(options), library, progress.report).finally(progress.clear);
  const answer = withWallTime(computed, performance.now() - start);
  const result = render(answer, spec, options);
  if (charts.length > 0 && spec.figure !== undefined) {
    const { renderFigure } = await import("../node/render-chart.ts");
    for (const { name, file } of charts) await writeWhole(file, await renderFigure(spec.figure(answer, name), file));
  }
  if (options.out === undefined) await printResult(result);
  else await writeWhole(options.out, result);
  if (options.format !== "text" || options.out !== undefined)
    for (const warning of answer.warnings) await printNotice(`emberline: warning: ${warning}`);
}
