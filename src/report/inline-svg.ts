/** A chart's SVG file as part of a page: a name and a description to read, ids of its own, no byte too many. */
import { escapeText, type Markup } from "./html.ts";

/** Digits behind the point of a coordinate [px]: 0.01 px is below what is seen or printed. */
const DECIMALS = 2;

/** Parameters of the path commands. */
const PARAMETERS: Readonly<Record<string, number>> = { M: 2, L: 2, H: 1, V: 1, C: 6, Q: 4, Z: 0 };

function figure(value: number): string {
  const text = String(Number(value.toFixed(DECIMALS)));
  return text === "-0" ? "0" : text.replace(/^(-?)0\./, "$1.");
}

/**
 * The same path in relative coordinates to {@link DECIMALS} digits. Rounding does not add up along the path: each step
 * starts from where the written one ended. A path with other commands than M L H V C Q Z stays as it is.
 */
export function shortPath(path: string): string {
  const words = path.match(/[A-Za-z]|-?(?:\d+\.?\d*|\.\d+)(?:e[-+]?\d+)?/g) ?? [];
  let out = "";
  let x = 0;
  let y = 0;
  let start = { x: 0, y: 0 };
  let command = "";
  let written = "";
  for (let i = 0; i < words.length; ) {
    if (/[A-Za-z]/.test(words[i])) command = words[i++];
    const count = PARAMETERS[command];
    if (count === undefined) return path;
    const values = words.slice(i, i + count).map(Number);
    if (values.length < count) return path;
    i += count;
    if (command === "Z") {
      out += "z";
      ({ x, y } = start);
      written = "z";
      continue;
    }
    const base = command === "V" ? [y] : [x, y];
    const steps = values.map((value, k) => Number((value - base[k % base.length]).toFixed(DECIMALS)));
    if (command !== "V") x += steps[command === "H" ? 0 : count - 2];
    if (command !== "H") y += steps[count - 1];
    if (command === "M") start = { x, y };
    const letter = command.toLowerCase();
    let text = written === letter ? "" : letter;
    for (const [k, step] of steps.entries()) {
      const digits = figure(step);
      text += (k === 0 && written !== letter) || digits.startsWith("-") ? digits : ` ${digits}`;
    }
    out += text;
    written = letter;
  }
  return out;
}

/** A chart to be shown. */
export interface ChartPicture {
  /** The content of an svg file. */
  readonly svg: string;
  /** Its name, short. */
  readonly title: string;
  /** What it shows, in words and numbers, for those who do not see it. */
  readonly description: string;
}

/**
 * The chart as an element of the page.
 * @param id    what its ids begin with; one a page
 * @throws {RangeError} if the text is no svg file with a width and a height
 */
export function inlineSvg({ svg, title, description }: ChartPicture, id: string): Markup {
  const opening = /<svg\b[^>]*>/.exec(svg);
  const size = /\bwidth="([\d.]+)"[^>]*\bheight="([\d.]+)"/.exec(opening?.[0] ?? "");
  if (opening === null || size === null) throw new RangeError(`chart ${id}: not an svg of known size`);
  const inner = svg
    .slice(opening.index + opening[0].length, svg.lastIndexOf("</svg>"))
    .replace(/<title>[\s\S]*?<\/title>/g, "")
    .replace(/\bd="([^"]*)"/g, (_, path: string) => `d="${shortPath(path)}"`)
    .replace(/\bid="([^"]+)"/g, `id="${id}-$1"`)
    .replace(/url\(#([^)]+)\)/g, `url(#${id}-$1)`)
    .replace(/\b(xlink:)?href="#([^"]+)"/g, `href="#${id}-$2"`)
    .replace(/ stroke-miterlimit="10"| stroke-width="1"(?=[ />])/g, "")
    .replace(/ transform="translate\(0 0\)"/g, "")
    .replace(/>\s+</g, "><");
  const text = `<title id="${id}-name">${escapeText(title)}</title><desc id="${id}-text">${escapeText(description)}</desc>`;
  return {
    html:
      `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${size[1]} ${size[2]}" width="${size[1]}" height="${size[2]}" ` +
      `role="img" aria-labelledby="${id}-name" aria-describedby="${id}-text">${text}${inner}</svg>`,
  };
}
