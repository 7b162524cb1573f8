/** Reads a folder of rates: ours beside the program, or a user's laid over it. Files are read when first needed. */
import { readdirSync, readFileSync, statSync } from "node:fs";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";
import { buildLibrary, type LibraryFiles, overlay, type RateLibrary } from "../nuclear/library.ts";
import { parseReactionId } from "../nuclear/reaction.ts";
import { InputError } from "../numerics/check.ts";

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
        throw new InputError("library", `${join(shownRoot, folder)}: cannot be read (${code})`);
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
          `${file}: cannot be read (${error instanceof TypeError ? "not UTF-8 text" : code})`,
        );
      }
    },
  };
}

let own: RateLibrary | undefined;

/**
 * The rate library. Without `folder` ours; with it the user's folder laid over ours, so that it may hold just the files
 * that differ. Reading is lazy: a run with twelve reactions reads twelve rate files.
 * @param folder a user's folder of rates, laid out as rates/ is
 * @throws {InputError} if the folder does not exist, holds nothing of a rate library, or names a reaction's folder wrongly
 */
export function loadRates(folder?: string): RateLibrary {
  own ??= buildLibrary(folderFiles(findRatesFolder(), "rates"));
  if (folder === undefined) return own;
  if (statSync(folder, { throwIfNoEntry: false })?.isDirectory() !== true)
    throw new InputError("library", `rates = ${folder}: no such folder`);
  const files = folderFiles(folder, folder);
  const entries = files.list("");
  const reactions = entries.filter((name) => name.includes("_") && !name.includes("."));
  for (const name of reactions) {
    const { id } = parseReactionId(name);
    if (id !== name) throw new InputError("library", `${join(folder, name)}: name this folder ${id}`);
  }
  if (reactions.length === 0 && !entries.includes("networks") && !entries.includes("nuclides.csv"))
    throw new InputError("library", `rates = ${folder}: holds no reaction folder, networks/ or nuclides.csv`);
  return overlay(own, buildLibrary(files));
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
