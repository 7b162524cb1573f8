/** A digest of the rate files that a request uses: tells whether two runs had the same rates. */
import type { RateLibrary } from "../nuclear/library.ts";
import { DEFAULTS, type Keys } from "../parameters/cosmology.ts";

/** Lower-case hexadecimal SHA-256 of a text in UTF-8. */
export async function sha256(text: string): Promise<string> {
  const digest = await globalThis.crypto.subtle.digest("SHA-256", new TextEncoder().encode(text));
  return Array.from(new Uint8Array(digest), (byte) => byte.toString(16).padStart(2, "0")).join("");
}

/**
 * SHA-256 of the nuclide table, the network and the rate files that these keys select.
 * @throws {InputError} for an unknown network, reaction or evaluation
 */
export function ratesDigest(library: RateLibrary, keys: Keys): Promise<string> {
  const network = keys.network ?? DEFAULTS.network;
  const chosen = new Map(
    Object.entries(keys.evaluations ?? {}).map(([name, evaluation]) => [library.reactionId(name), evaluation]),
  );
  const files = library
    .network(network)
    .map(({ reaction, evaluation }) => `${reaction}/${chosen.get(reaction) ?? evaluation}.ecsv`);
  const texts = ["nuclides.csv", `networks/${network}.csv`, ...files].map((path) => library.files.read(path)?.text);
  return sha256(texts.map((text) => text ?? "").join("\0"));
}
