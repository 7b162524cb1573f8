/** A sheet to draw charts on, as png, svg or pdf: one native canvas, of which each chart gets a rectangle. */
import { createHash } from "node:crypto";
import { createCanvas, PDFDocument, type SKRSContext2D, SvgExportFlag } from "@napi-rs/canvas";

/** File formats of a figure. */
export type ImageFormat = "png" | "svg" | "pdf";

/** Pixels of a png for each px of the layout. */
const PNG_SCALE = 2;
/** Points of a pdf for each px of the layout: 72 to 96 an inch. */
const PDF_SCALE = 0.75;

/** The part of a node canvas that chartjs-node-canvas asks for. */
export interface RegionCanvas {
  width: number;
  height: number;
  style: Record<string, string>;
  getContext(): SKRSContext2D;
  toBuffer(): Buffer;
}

export interface Surface {
  readonly context: SKRSContext2D;
  /** A canvas that is a rectangle of the sheet [px]; draw one region after the other. */
  region(x: number, y: number, width: number, height: number): RegionCanvas;
  /** Back to the coordinates of the whole sheet. */
  whole(): void;
  /** The finished file. */
  finish(): Buffer;
}

function open(format: ImageFormat, width: number, height: number, title: string) {
  if (format === "pdf") {
    const document = new PDFDocument({ title, creator: "emberline" });
    const context = document.beginPage(width * PDF_SCALE, height * PDF_SCALE) as unknown as SKRSContext2D;
    return {
      context,
      scale: PDF_SCALE,
      finish: () => {
        document.endPage();
        return document.close();
      },
    };
  }
  if (format === "svg") {
    // Letters become outlines: the file looks the same where the font is not installed.
    const canvas = createCanvas(width, height, SvgExportFlag.ConvertTextToPaths);
    return {
      context: canvas.getContext("2d"),
      scale: 1,
      finish: () => completeSvg(canvas.getContent(), title, width, height),
    };
  }
  const canvas = createCanvas(width * PNG_SCALE, height * PNG_SCALE);
  return { context: canvas.getContext("2d"), scale: PNG_SCALE, finish: () => canvas.toBuffer("image/png") };
}

/**
 * The svg with a title, which screen readers and browsers show, a viewBox, so that it scales, and names of its own for
 * its clip paths: the canvas numbers them through the whole process, and two figures on one page must not share any.
 */
function completeSvg(svg: Buffer, title: string, width: number, height: number): Buffer {
  const escaped = title.replaceAll("&", "&amp;").replaceAll("<", "&lt;");
  const names = new Map<string, string>();
  const numbered = svg.toString("utf8").replace(/\bcl_[0-9a-f]+\b/g, (name) => {
    if (!names.has(name)) names.set(name, `clip-${names.size + 1}`);
    return names.get(name) as string;
  });
  const own = createHash("sha256").update(numbered).digest("hex").slice(0, 8);
  return Buffer.from(
    numbered
      .replace(/\bclip-(?=\d+\b)/g, `clip-${own}-`)
      .replace(/<svg([^>]*)>/, `<svg$1 viewBox="0 0 ${width} ${height}"><title>${escaped}</title>`),
  );
}

/**
 * Opens a sheet filled with the paper's colour.
 *
 * chart.js sets the transform of its canvas absolutely and wipes it before drawing and when destroyed. On a sheet shared
 * by several charts both are made relative: setTransform starts from the rectangle's corner, clearRect does nothing
 * since each rectangle is drawn once.
 * @param width, height of the sheet [px]
 */
export function openSurface(format: ImageFormat, width: number, height: number, title: string, paper: string): Surface {
  const { context, scale, finish } = open(format, width, height, title);
  const setNative = context.setTransform.bind(context) as (...m: number[]) => void;
  let corner = { x: 0, y: 0 };
  const setTransform = (a: number, b: number, c: number, d: number, e: number, f: number) =>
    setNative(scale * a, scale * b, scale * c, scale * d, scale * (e + corner.x), scale * (f + corner.y));
  const own = (name: string, value: unknown) =>
    Object.defineProperty(context, name, { value, configurable: true, writable: true });
  own("setTransform", setTransform);
  own("resetTransform", () => setTransform(1, 0, 0, 1, 0, 0));
  own("clearRect", () => {});
  const moveTo = (x: number, y: number) => {
    corner = { x, y };
    setTransform(1, 0, 0, 1, 0, 0);
  };
  moveTo(0, 0);
  context.fillStyle = paper;
  context.fillRect(0, 0, width, height);
  return {
    context,
    region(x, y, regionWidth, regionHeight) {
      moveTo(x, y);
      const canvas: RegionCanvas = {
        width: regionWidth,
        height: regionHeight,
        style: {},
        getContext: () => context,
        toBuffer: () => Buffer.alloc(0),
      };
      own("canvas", canvas);
      return canvas;
    },
    whole: () => moveTo(0, 0),
    finish,
  };
}
