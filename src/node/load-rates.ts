/** Reads a folder of rates: ours beside the program, or a user's laid over it. Files are read when first needed. */
import { readdirSync, readFileSync, statSync } from "node:fs";
import { basename, dirname, join } from "node:path";
import { fileURLToPath } from "node:url";
import type { TextFile } from "../nuclear/csv-rows.ts";
import { buildLibrary, type LibraryFiles, overlay, type RateLibrary } from "../nuclear/library.ts";
import { parseReactionId } from "../nuclear/reaction.ts";
import { InputError } from "../numerics/check.ts";
import { fileReason } from "./file-reason.ts";

/**
 * The folder rates/ of this package: found by walking up from this file.
 * @throws {InputError} if there is none, i.e. the installation is damaged
 */
export function findRatesFolder(): string {
  const start = dirname(fileURLToPath(import.meta.url));
  for (let folder = start; ; folder = dirname(folder)) {
    const candidate = join(folder, "rates");
    if (isFile(join(candidate, "nuclides.csv"))) return candidate;
    if (dirname(folder) === folder)
      throw new InputError("library", `rates/nuclides.csv not found above ${start}: reinstall the package`);
  }
}

function isFile(path: string): boolean {
  return statSync(path, { throwIfNoEntry: false })?.isFile() === true;
}

/**
 * The files of a folder, read on demand.
 * @param root path of the folder
 * @param shownRoot how it is named in messages
 */
export function folderFiles(root: string, shownRoot: string): LibraryFiles {
  return {
    list(folder) {
      try {
        return readdirSync(join(root, folder)).sort();
      } catch (error) {
        const code = (error as NodeJS.ErrnoException).code;
        if (code === "ENOENT" || code === "ENOTDIR") return [];
        throw new InputError("library", `${join(shownRoot, folder)}: cannot be read (${fileReason(error)})`);
      }
    },
    read(path) {
      const file = join(shownRoot, path);
      try {
        return { file, text: new TextDecoder("utf-8", { fatal: true }).decode(readFileSync(join(root, path))) };
      } catch (error) {
        const code = (error as NodeJS.ErrnoException).code;
        if (code === "ENOENT" || code === "ENOTDIR") return undefined;
        throw new InputError(
          "library",
          `${file}: cannot be read (${error instanceof TypeError ? "not UTF-8 text" : fileReason(error)})`,
        );
      }
    },
  };
}

let own: RateLibrary | undefined;

/** A user's folder laid over our library, nothing in it looked at yet. */
export interface OpenedFolder {
  readonly library: RateLibrary;
  /** How its files are named in messages: this, then their path in the folder. */
  readonly prefix: string;
  /** Names at its top. */
  readonly entries: readonly string[];
}

function isReactionFolder(name: string): boolean {
  return name.includes("_") && !name.includes(".");
}

/** What stands at a path; undefined if nothing does. @throws {InputError} if that cannot be found out */
function statOf(path: string, shown: string) {
  try {
    return statSync(path, { throwIfNoEntry: false });
  } catch (error) {
    throw new InputError("unreadable", `${shown}: cannot be read (${fileReason(error)})`);
  }
}

/**
 * Opens a user's folder of rates.
 * @param given how the folder is named in messages: the key it stands for, or itself
 * @throws {InputError} if there is no such folder, or it holds nothing of a rate library
 */
export function openFolder(folder: string, given = `rates = ${folder}`): OpenedFolder {
  const found = folder === "" ? undefined : statOf(folder, given);
  if (found?.isDirectory() !== true) {
    const problem = found === undefined ? "no such folder" : "is a file, not a folder";
    throw new InputError("library", `${given}${folder === "" ? '""' : ""}: ${problem}`);
  }
  const files = folderFiles(folder, folder);
  const entries = files.list("");
  if (!entries.some((name) => isReactionFolder(name) || name === "networks" || name === "nuclides.csv"))
    throw new InputError("library", `${given}: holds no reaction folder, networks/ or nuclides.csv`);
  return { library: overlay(loadRates(), buildLibrary(files)), prefix: join(folder, "."), entries };
}

/**
 * The rate library. Without `folder` ours; with it the user's folder laid over ours, so that it may hold just the files
 * that differ. Reading is lazy: a run with twelve reactions reads twelve rate files.
 * @param folder a user's folder of rates, laid out as rates/ is
 * @throws {InputError} if the folder does not exist, holds nothing of a rate library, or names a reaction's folder wrongly
 */
export function loadRates(folder?: string): RateLibrary {
  own ??= buildLibrary(folderFiles(findRatesFolder(), "rates"));
  if (folder === undefined) return own;
  const { library, entries } = openFolder(folder);
  for (const name of entries.filter(isReactionFolder)) {
    const { id } = parseReactionId(name);
    if (id !== name) throw new InputError("library", `${join(folder, name)}: name this folder ${id}`);
  }
  return library;
}

/**
 * A text file that a user names.
 * @param option how it was given, for messages: `from`
 * @throws {InputError} if it cannot be read or is no UTF-8 text
 */
export function readText(path: string, option: string): TextFile {
  if (statOf(path, `${option} = ${path}`)?.isDirectory())
    throw new InputError("unreadable", `${option} = ${path}: is a directory; give a file`);
  const found = folderFiles(dirname(path), dirname(path)).read(basename(path));
  if (found === undefined) throw new InputError("unreadable", `${option} = ${path}: no such file`);
  return { file: path, text: found.text };
}

/** All texts of a folder of rates by path, for a page or a bundle that has no file access. @throws {InputError} as {@link loadRates} */
export function readRateTexts(folder = findRatesFolder()): Map<string, string> {
  const texts = new Map<string, string>();
  const files = folderFiles(folder, "rates");
  const visit = (path: string): void => {
    for (const name of files.list(path)) {
      const inner = path === "" ? name : `${path}/${name}`;
      if (name.endsWith(".csv") || name.endsWith(".ecsv")) texts.set(inner, files.read(inner)!.text);
      else if (!name.includes(".")) visit(inner);
    }
  };
  visit("");
  return texts;
}
