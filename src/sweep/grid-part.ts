/** The header of a grid part as text: what it says, what all parts must share, and the header of the whole. */
import { InputError } from "../numerics/check.ts";

/** A part's header, taken apart. */
export interface PartHeader {
  readonly file: string;
  readonly k: number;
  readonly n: number;
  /** Numbers of its points, both included, and the points of the whole. */
  readonly from: number;
  readonly to: number;
  readonly points: number;
  readonly checksum: string;
  readonly warnings: readonly string[];
  /** Every line, without its end. */
  readonly lines: readonly string[];
}

/** Keys whose lines differ from part to part. */
const OWN = ["part", "warnings", "checksum"];
const ENTRY = /^# {1,3}([A-Za-z0-9_]+):(?: (.*))?$/;
const ITEM = /^# {3}- (.*)$/;

/** The value as it was before it was quoted. */
function plain(text: string): string {
  return text.startsWith('"') ? (JSON.parse(text) as string) : text;
}

/** Header lines by key, in order; an item of a list belongs to the key above it. */
function entries(lines: readonly string[]): { key: string; value?: string; line: string }[] {
  let last = "";
  return lines.map((line) => {
    const item = ITEM.exec(line);
    if (item !== null) return { key: last, value: plain(item[1]), line };
    const found = ENTRY.exec(line);
    if (found === null) return { key: "", line };
    last = found[1];
    return { key: last, ...(found[2] ? { value: plain(found[2]) } : {}), line };
  });
}

/**
 * Reads the header of a part.
 * @param file  how it is named in messages
 * @param lines its comment lines, the first lines of the file
 * @throws {InputError} if this is no part of a grid
 */
export function parsePartHeader(file: string, lines: readonly string[]): PartHeader {
  const all = entries(lines);
  const value = (key: string) => all.find((entry) => entry.key === key && entry.value !== undefined)?.value ?? "";
  if (!/^emberline \S+ grid$/.test(value("command")))
    throw new InputError("part", `${file}: not a grid of this program; give files written by grid --part`);
  const found = /^(\d+)\/(\d+), points (\d+) to (\d+) of (\d+)$/.exec(value("part"));
  if (found === null)
    throw new InputError("part", `${file}: not a part but a whole grid; give files written by grid --part`);
  const checksum = /^sha256 ([0-9a-f]{64})$/.exec(value("checksum"))?.[1];
  if (checksum === undefined) throw new InputError("part", `${file}: its checksum is missing; compute this part again`);
  const [k, n, from, to, points] = found.slice(1).map(Number);
  const warnings = all.flatMap((entry) => (entry.key === "warnings" && entry.value !== undefined ? [entry.value] : []));
  return { file, k, n, from, to, points, checksum, warnings, lines };
}

/** What all parts must have in common, line by line: everything but what is a part's own. */
function shared(header: PartHeader): string[] {
  return entries(header.lines).flatMap(({ key, line }) => (OWN.includes(key) ? [] : [line]));
}

/**
 * Checks that parts belong together and that none is missing.
 * @returns the parts in order
 * @throws {InputError} naming the files and what is wrong
 */
export function orderParts(headers: readonly PartHeader[]): PartHeader[] {
  const [first] = headers;
  const wanted = shared(first);
  for (const header of headers.slice(1)) {
    const lines = shared(header);
    const at = lines.findIndex((line, i) => line !== wanted[i]);
    if (at >= 0 || lines.length !== wanted.length) {
      const [here, there] = [lines[at] ?? "(nothing)", wanted[at] ?? "(nothing)"].map((line) => line.slice(0, 100));
      throw new InputError(
        "part",
        `${header.file} and ${first.file} do not belong together: "${here}" against "${there}"`,
      );
    }
    if (header.n !== first.n || header.points !== first.points)
      throw new InputError(
        "part",
        `${header.file} is part ${header.k}/${header.n}, ${first.file} ${first.k}/${first.n}: from different divisions`,
      );
  }
  const sorted = [...headers].sort((a, b) => a.k - b.k);
  const missing: number[] = [];
  for (let k = 1, i = 0; k <= first.n; k++) {
    if (sorted[i]?.k !== k) missing.push(k);
    else i++;
    while (sorted[i]?.k === k)
      throw new InputError("part", `${sorted[i].file} and ${sorted[i - 1].file} are both part ${k}; give each once`);
  }
  if (missing.length > 0) {
    const named = `${missing.slice(0, 20).join(", ")}${missing.length > 20 ? ", ..." : ""}`;
    throw new InputError("part", `missing ${missing.length} of ${first.n} parts: ${named}`);
  }
  let next = 1;
  for (const part of sorted) {
    if (part.from !== next)
      throw new InputError("part", `${part.file}: starts at point ${part.from}, but ${next} is next; compute it again`);
    next = part.to + 1;
  }
  if (next !== first.points + 1) throw new InputError("part", `the parts end at point ${next - 1} of ${first.points}`);
  return sorted;
}

/**
 * The header of the whole grid, as a single run writes it.
 * @param parts    in order
 * @param kind     a warning without what differs from point to point
 * @param checksum of all rows
 */
export function wholeHeader(
  parts: readonly PartHeader[],
  kind: (warning: string) => string,
  checksum: string,
): string[] {
  const ecsv = parts[0].lines[0].startsWith("# %ECSV");
  const warnings = new Map<string, string>();
  for (const part of parts)
    for (const text of part.warnings) if (!warnings.has(kind(text))) warnings.set(kind(text), text);
  const texts = [...warnings.values()];
  const quoted = (text: string) => (ecsv ? JSON.stringify(text) : text);
  const indent = ecsv ? "#   " : "# ";
  const own: Readonly<Record<string, readonly string[]>> = {
    part: [],
    warnings:
      texts.length === 0
        ? []
        : ecsv
          ? [`${indent}warnings:`, ...texts.map((text) => `${indent}- ${quoted(text)}`)]
          : texts.map((text) => `${indent}warnings: ${text}`),
    checksum: [`${indent}checksum: ${quoted(`sha256 ${checksum}`)}`],
  };
  const list = entries(parts[0].lines);
  const lines: string[] = [];
  // Warnings stand before the checksum, whether or not the first part has any.
  for (const { key, line } of list) {
    if (key === "checksum") lines.push(...own.warnings, ...own.checksum);
    else if (!OWN.includes(key)) lines.push(line);
  }
  return lines;
}
