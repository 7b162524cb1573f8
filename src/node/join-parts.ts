/** Joins the parts of a grid to the file that a single run writes, row by row, whatever its size. */
import { createHash } from "node:crypto";
import { createReadStream } from "node:fs";
import { createInterface } from "node:readline";
import { InputError } from "../numerics/check.ts";
import { warningKind } from "../requests/sweep.ts";
import { orderParts, type PartHeader, parsePartHeader, wholeHeader } from "../sweep/grid-part.ts";
import { fileReason } from "./file-reason.ts";
import { printResult } from "./print.ts";
import { requireWritable, writeWhole } from "./write-file.ts";

/** Characters of rows written at once. */
const BLOCK = 1 << 16;

/** Lines of a file. @throws {InputError} if it cannot be read */
async function* linesOf(file: string): AsyncGenerator<string> {
  try {
    yield* createInterface({ input: createReadStream(file, "utf8"), crlfDelay: Number.POSITIVE_INFINITY });
  } catch (error) {
    throw new InputError("unreadable", `${file}: cannot be read (${fileReason(error)}); give the files of the parts`);
  }
}

async function readHeader(file: string): Promise<PartHeader> {
  const lines: string[] = [];
  for await (const line of linesOf(file)) {
    if (!line.startsWith("#")) break;
    lines.push(line);
  }
  return parsePartHeader(file, lines);
}

/** The lines of a part that are no comments: column names first, then rows. */
async function* tableLines(file: string): AsyncGenerator<string> {
  for await (const line of linesOf(file)) if (!line.startsWith("#") && line !== "") yield line;
}

/** Checks every part against its checksum and number of rows. @returns the checksum of the whole */
async function verify(parts: readonly PartHeader[]): Promise<string> {
  const whole = createHash("sha256");
  let names: string | undefined;
  for (const part of parts) {
    const own = createHash("sha256");
    let rows = -1;
    for await (const line of tableLines(part.file)) {
      own.update(`${line}\n`);
      if (rows++ < 0) {
        if (names === undefined) whole.update(`${line}\n`);
        names ??= line;
        if (line !== names) throw new InputError("part", `${part.file}: has other columns than ${parts[0].file}`);
      } else whole.update(`${line}\n`);
    }
    if (rows !== part.to - part.from + 1 || own.digest("hex") !== part.checksum)
      throw new InputError("part", `${part.file}: damaged, its rows do not agree with its checksum; compute it again`);
  }
  return whole.digest("hex");
}

async function* content(parts: readonly PartHeader[], header: readonly string[]): AsyncGenerator<string> {
  let block = `${header.join("\n")}\n`;
  for (const [p, part] of parts.entries()) {
    let first = true;
    for await (const line of tableLines(part.file)) {
      if (!first || p === 0) block += `${line}\n`;
      first = false;
      if (block.length < BLOCK) continue;
      yield block;
      block = "";
    }
  }
  yield block;
}

/**
 * Joins parts written by `grid --part K/N`, in any order, in their format.
 * @param out file; standard output without
 * @throws {InputError} for parts that are damaged, missing, given twice, or of different requests or versions
 */
export async function joinParts(files: readonly string[], out: string | undefined): Promise<void> {
  if (files.length === 0) throw new InputError("part", "--join: give the files of the parts");
  if (out !== undefined) await requireWritable(out);
  const parts = orderParts(await Promise.all(files.map(readHeader)));
  const header = wholeHeader(parts, warningKind, await verify(parts));
  if (out !== undefined) return writeWhole(out, content(parts, header));
  for await (const block of content(parts, header)) await printResult(block);
}
