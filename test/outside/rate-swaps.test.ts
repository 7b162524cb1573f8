/** SciPy integrates the network with one evaluation swapped: the abundances move as ours do. */
import { expect, test } from "vitest";
import { finalAbundances } from "../../src/nucleosynthesis/abundances.ts";
import { runNetwork } from "../../src/nucleosynthesis/run.ts";
import { exportNetwork } from "./export-network.ts";
import { runPython } from "./python.ts";

const OBSERVED = ["dToH", "he3ToH", "li7ToH"] as const;

/** D/H, 3He/H and 7Li/H of the classic reactions with some evaluations: ours and SciPy's. */
function both(evaluations: Record<string, string>) {
  const { context, inputs, input } = exportNetwork("twelve", 6.1, 878.4, { evaluations });
  const solve = { ...input, method: "Radau", rtol: 1e-8, atol: 1e-26 };
  const { Y } = runPython<{ Y: Record<string, number> }>("integrate_network.py", ["scipy"], solve);
  const species = context.data.nuclides;
  return {
    ours: finalAbundances(species, runNetwork(context, inputs).Y, false),
    theirs: finalAbundances(
      species,
      species.map(({ id }) => Y[id]),
      false,
    ),
  };
}

const standing = both({});

test.each([
  ["d-p_gamma-he3", "mossa2020"],
  ["be7-n_p-li7", "damone2018"],
  ["he3-d_p-he4", "descouvemont2004"],
  ["t-d_n-he4", "descouvemont2004"],
])("%s by %s: every shift agrees to 1e-5 of the abundance, 30 times better than asked", (reaction, evaluation) => {
  const swapped = both({ [reaction]: evaluation });
  let moved = 0;
  for (const name of OBSERVED) {
    const ours = swapped.ours[name]! / standing.ours[name]! - 1;
    const theirs = swapped.theirs[name]! / standing.theirs[name]! - 1;
    expect(Math.abs(ours - theirs), `${name}: ours ${ours}, SciPy ${theirs}`).toBeLessThan(1e-5);
    moved = Math.max(moved, Math.abs(theirs));
  }
  // t(d,n)4He sets the small amount of tritium that is left: hardly any of 3He/H or 7Li/H.
  expect(moved).toBeGreaterThan(reaction === "t-d_n-he4" ? 1e-5 : 1e-3);
});
