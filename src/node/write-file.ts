/** Writes a file whole or not at all: a temporary file in the same folder, synchronised, then renamed. */
import { constants } from "node:fs";
import { access, open, readdir, realpath, rename, stat, unlink, writeFile } from "node:fs/promises";
import { basename, dirname, join } from "node:path";
import { InputError } from "../numerics/check.ts";

const REASONS: Readonly<Record<string, string>> = {
  EACCES: "no permission",
  EDQUOT: "disk quota used up",
  EISDIR: "is a folder",
  ENAMETOOLONG: "the name is too long",
  ENOENT: "no such folder",
  ENOSPC: "no space left on the device",
  ENOTDIR: "part of the path is not a folder",
  EPERM: "not permitted",
  EROFS: "read-only file system",
};

/** One line about a file that cannot be written. */
export function refusal(path: string, error: unknown): InputError {
  const code = (error as NodeJS.ErrnoException).code ?? "";
  const reason = REASONS[code] ?? (error instanceof Error ? error.message : String(error));
  return new InputError("unwritable", `${path}: cannot be written: ${reason}; choose another file or folder`);
}

/**
 * Finds out before a long calculation whether a file can be written there. Creates nothing.
 * @throws {InputError} if the folder is missing or not writable, or the path is a folder
 */
export async function requireWritable(path: string): Promise<void> {
  try {
    if (path === "") throw Object.assign(new Error("the name is empty"), { code: "EMPTY" });
    const found = await stat(path).catch((error) => {
      if (error.code === "ENOENT") return undefined;
      throw error;
    });
    if (found?.isDirectory()) throw Object.assign(new Error(), { code: "EISDIR" });
    const folder = await stat(dirname(path));
    if (!folder.isDirectory()) throw Object.assign(new Error(), { code: "ENOTDIR" });
    await access(dirname(path), constants.W_OK);
    if (found !== undefined) await access(path, constants.W_OK);
  } catch (error) {
    throw refusal(path, error);
  }
}

/** What the names of a file's temporary files begin with. */
function temporaryStem(path: string): string {
  return `.${basename(path).slice(0, 200)}.`;
}

/** Removes temporary files of this output that killed runs left. Only for who has the output to himself. */
export async function removeLeftovers(path: string): Promise<void> {
  const folder = dirname(path);
  const stem = temporaryStem(path);
  for (const name of await readdir(folder))
    if (name.startsWith(stem) && /^\d+\.part$/.test(name.slice(stem.length)))
      await unlink(join(folder, name)).catch(() => undefined);
}

/**
 * Writes the whole content or leaves what was there. A device or pipe is written directly; a link keeps pointing.
 * @throws {InputError} if the file cannot be written; no temporary file remains
 */
export async function writeWhole(path: string, content: string | Uint8Array | AsyncIterable<string>): Promise<void> {
  await requireWritable(path);
  const existing = await stat(path).catch(() => undefined);
  const direct = existing !== undefined && !existing.isFile();
  const final = existing === undefined || direct ? path : await realpath(path);
  const target = direct ? path : join(dirname(final), `${temporaryStem(final)}${process.pid}.part`);
  let created = false;
  try {
    const file = await open(target, direct ? "w" : "wx", existing?.isFile() ? existing.mode & 0o777 : 0o666);
    created = !direct;
    try {
      await writeFile(file, content);
      if (!direct) await file.sync();
    } finally {
      await file.close();
    }
    if (!direct) await rename(target, final);
  } catch (error) {
    if (created) await unlink(target).catch(() => undefined);
    throw refusal(path, error);
  }
}
