/** Why a file or folder cannot be used, in words instead of the codes of the operating system. */

const REASONS: Readonly<Record<string, string>> = {
  EACCES: "permission denied",
  EDQUOT: "disk quota used up",
  EISDIR: "is a directory",
  ELOOP: "too many symbolic links",
  EMFILE: "too many open files",
  ENAMETOOLONG: "the name is too long",
  ENOENT: "no such file",
  ENOSPC: "no space left on the device",
  ENOTDIR: "part of the path is not a folder",
  EPERM: "not permitted",
  EROFS: "read-only file system",
};

/** The reason of an error of the file system; the message of any other error. */
export function fileReason(error: unknown): string {
  const code = (error as NodeJS.ErrnoException).code ?? "";
  return REASONS[code] ?? (error instanceof Error ? error.message : String(error));
}
