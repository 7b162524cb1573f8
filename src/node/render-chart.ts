/** Figure -> png, svg or pdf: chart.js through chartjs-node-canvas on a sheet of our own. */
import { createRequire } from "node:module";
import { dirname, join } from "node:path";
import { GlobalFonts } from "@napi-rs/canvas";
import type { ChartConfiguration } from "chart.js";
import { ChartJSNodeCanvas } from "chartjs-node-canvas";
import { type AnyChart, type Figure, NOTE_HEIGHT } from "../charts/figure.ts";
import { FONT_FAMILY, MUTED, SIZES } from "../charts/style.ts";
import { CalculationError, InputError } from "../numerics/check.ts";
import { type ImageFormat, openSurface, type RegionCanvas } from "./surface.ts";

/** Faces of the font, so that figures do not depend on what the machine has. */
const FONT_FILES = ["DejaVuSansCondensed.ttf", "DejaVuSansCondensed-Bold.ttf"];

function registerFonts(): void {
  const folder = join(dirname(createRequire(import.meta.url).resolve("dejavu-fonts-ttf/package.json")), "ttf");
  for (const file of FONT_FILES)
    if (GlobalFonts.registerFromPath(join(folder, file), FONT_FAMILY) === null)
      throw new CalculationError("font", `${join(folder, file)}: cannot be read as a font; reinstall the package`);
}

interface Renderer {
  readonly charts: ChartJSNodeCanvas;
  /** Where the next chart is drawn. */
  target?: RegionCanvas;
}

let shared: Renderer | undefined;

/** One renderer a process: each new one loads chart.js again. */
function theRenderer(): Renderer {
  if (shared !== undefined) return shared;
  registerFonts();
  const charts = new ChartJSNodeCanvas({
    width: 1,
    height: 1,
    // By name: importing the plugin would bring a second copy of chart.js.
    plugins: { modern: ["chartjs-plugin-annotation"] },
    chartCallback: (chart) => {
      chart.defaults.font.family = FONT_FAMILY;
    },
  });
  const made: Renderer = { charts };
  // It makes its canvas with this private function: hand it a rectangle of our sheet.
  Object.assign(charts, { _createCanvas: () => made.target });
  shared = made;
  return made;
}

/** @throws {InputError} unless the file ends in .png, .svg or .pdf */
export function imageFormat(file: string): ImageFormat {
  const ending = /\.(png|svg|pdf)$/i.exec(file)?.[1].toLowerCase();
  if (ending === undefined) throw new InputError("choice", `${file}: a chart must end in .png, .svg or .pdf`);
  return ending as ImageFormat;
}

/**
 * Draws a figure.
 * @param file name whose ending chooses the format; nothing is written
 * @returns the content of the file, the same at every call with the same figure
 * @throws {InputError} for another ending
 */
export function renderFigure(figure: Figure<AnyChart>, file: string): Buffer {
  const surface = openSurface(imageFormat(file), figure.width, figure.height, figure.title, MUTED.paper);
  const renderer = theRenderer();
  for (const panel of figure.panels) {
    renderer.target = surface.region(panel.x, panel.y, panel.width, panel.height);
    renderer.charts.renderToBufferSync(panel.chart as unknown as ChartConfiguration);
  }
  surface.whole();
  const { context } = surface;
  context.font = `${SIZES.text - 1}px "${FONT_FAMILY}"`;
  context.fillStyle = MUTED.text;
  context.textAlign = "right";
  context.textBaseline = "middle";
  context.fillText(figure.note, figure.width - 12, figure.height - NOTE_HEIGHT / 2);
  return surface.finish();
}
