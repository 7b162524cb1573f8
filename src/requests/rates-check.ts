/** The request `rates check`: everything that is wrong or worth knowing in a library, with file and line. */
import { checkLibrary, type Finding } from "../nuclear/check-library.ts";
import type { RateLibrary } from "../nuclear/library.ts";
import { OUR_FOLDER } from "../output/rates-check-output.ts";
import type { RatesCheckResults } from "../output/rates-result.ts";
import type { Envelope } from "./envelope.ts";
import { ratesEnvelope } from "./rates-envelope.ts";

/** What is checked. */
export interface CheckRequest {
  /** How the folder is named in messages. */
  readonly folder: string;
  /**
   * Names at the top of a user's folder that is laid over the library: only its reactions are checked, and what is only
   * worth knowing about the files underneath is left out.
   */
  readonly entries?: readonly string[];
}

/** A finding about a folder names it from the top of the library: its place in the folder that is checked. */
function withFolder(file: string, folder: string): string {
  return [folder, OUR_FOLDER].some((root) => file.startsWith(`${root}/`)) ? file : `${folder}/${file}`;
}

/** What lies in a folder of rates besides reactions. */
const KNOWN_ENTRIES = ["networks", "observations", "nuclides.csv", "README.md"];

/** Names at the top of a folder that nothing reads, most likely mistyped reactions. */
function strangers(folder: string, entries: readonly string[]): Finding[] {
  return entries
    .filter(
      (name) => !KNOWN_ENTRIES.includes(name) && !name.startsWith(".") && (name.includes(".") || !name.includes("_")),
    )
    .map((name) => ({
      severity: "warning",
      file: `${folder}/${name}`,
      line: 0,
      problem: "not read: a reaction's folder is named like t-d_n-he4",
    }));
}

/**
 * Answers `rates check`. Whether anything fails stands in `results.errors`; nothing is thrown for it.
 * @param library the library, or a user's folder laid over it
 */
export function checkRates({ folder, entries }: CheckRequest, library: RateLibrary): Envelope<RatesCheckResults> {
  const check = checkLibrary(library, entries);
  const isOwn = (finding: Finding) => entries === undefined || finding.file.startsWith(`${folder}/`);
  const findings = [
    ...strangers(folder, entries ?? []),
    ...check.findings
      .map((finding) => ({ ...finding, file: withFolder(finding.file, folder) }))
      .filter((finding) => finding.severity === "error" || isOwn(finding)),
  ];
  const count = (severity: Finding["severity"]) => findings.filter((finding) => finding.severity === severity).length;
  return ratesEnvelope({}, {
    action: "check",
    folder,
    files: check.files,
    networks: check.networks,
    errors: count("error"),
    warnings: count("warning"),
    notes: count("note"),
    findings,
    table: {
      columns: ["severity", "file", "line", "problem"],
      units: ["", "", "1", ""],
      rows: findings.map(({ severity, file, line, problem }) => [severity, file, line, problem]),
    },
  } satisfies RatesCheckResults);
}
