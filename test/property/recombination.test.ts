// Recombination over random cosmologies in the whole of the accepted ranges: finite, within bounds, continuous.
import { expect, test } from "vitest";
import { computeLineOfSight } from "../../src/lineofsight/summary.ts";
import { adaptiveTable, tableAt } from "../../src/lineofsight/table.ts";
import { InputError } from "../../src/numerics/check.ts";
import { seededUniform } from "../../src/numerics/random.ts";
import { RANGES } from "../../src/parameters/cosmology.ts";
import { heliumToHydrogen } from "../../src/parameters/helium.ts";
import { computeIonisationHistory } from "../../src/recombination/history.ts";
import type { RecombinationInputs } from "../../src/recombination/inputs.ts";
import { RECOMBINATION_SWITCH_NAMES } from "../../src/recombination/switches.ts";

const SEED = 20260305;
const ACCEPTED = 600;
const random = seededUniform(SEED);

/** In range, on its very ends one time in four. */
function share(): number {
  const u = random();
  return u < 0.12 ? 0 : u > 0.88 ? 1 : random();
}
const linear = (key: string) => RANGES[key].min + (RANGES[key].max - RANGES[key].min) * share();
const logarithmic = (key: string) => RANGES[key].min * (RANGES[key].max / RANGES[key].min) ** share();

function randomInputs(): RecombinationInputs {
  return {
    omegaB: logarithmic("omegaB"),
    omegaC: linear("omegaC"),
    h0: linear("h0"),
    tCmb: linear("tCmb"),
    nEff: linear("nEff"),
    sumMnu: linear("sumMnu"),
    fHe: heliumToHydrogen(linear("ypMass")),
    alphaFactor: linear("alphaFactor"),
    model: random() < 0.2 ? "saha" : "three-level",
    without: [],
    ...(random() < 0.3 ? { zReion: linear("zReion") } : {}),
    ...(random() < 0.3 ? { tolerance: 10 ** (-9 + 7 * random()) } : {}),
  };
}

/** Three-level inputs lose one ingredient now and then. */
function withSwitch(inputs: RecombinationInputs): RecombinationInputs {
  if (inputs.model === "saha" || random() > 0.3) return inputs;
  return { ...inputs, without: [RECOMBINATION_SWITCH_NAMES[Math.floor(random() * RECOMBINATION_SWITCH_NAMES.length)]] };
}

test(`${ACCEPTED} random cosmologies: every number is finite, x_e and T_m within their bounds, no step is lost`, () => {
  let accepted = 0;
  for (let trial = 0; accepted < ACCEPTED; trial++) {
    const inputs = withSwitch(randomInputs());
    const where = `seed ${SEED}, trial ${trial}: ${JSON.stringify(inputs)}`;
    let history: ReturnType<typeof computeIonisationHistory>;
    try {
      history = computeIonisationHistory(inputs);
    } catch (error) {
      // Only a flat Universe that would need negative Lambda is refused.
      expect(error, where).toBeInstanceOf(InputError);
      expect((error as InputError).code, where).toBe("flatness");
      continue;
    }
    accepted++;
    const { summary, sight } = computeLineOfSight(inputs, history);
    JSON.stringify(summary, (key, value) => {
      if (typeof value === "number" && !Number.isFinite(value)) throw new Error(`${key} = ${value}; ${where}`);
      return value;
    });
    expect(summary.zDrag, where).toBeGreaterThan(0);
    expect(summary.zStar, where).toBeGreaterThan(0);
    // Every redshift of a random set, and for one in ten the adaptive table too.
    const electrons = (1 + 2 * inputs.fHe) * (1 + 1e-9);
    const redshifts = Array.from({ length: 60 }, () => Math.expm1(Math.log(10001) * random()));
    const table = accepted % 10 === 0 ? adaptiveTable(sight) : tableAt(sight, redshifts);
    for (const row of table.rows as readonly (readonly number[])[]) {
      const [, xe, Tm, Tr, depth] = row;
      const sound = xe >= 0 && xe <= electrons && Tm > 0 && Tm <= Tr * (1 + 1e-12) && depth >= 0;
      if (!row.every(Number.isFinite) || !sound) throw new Error(`row ${row}; ${where}`);
    }
    expect(history.counts.steps, where).toBeLessThan(3000);
  }
});

test("60 random cosmologies: x_e and T_m at the default tolerance within 1e-6 of a tight one", () => {
  for (let accepted = 0; accepted < 60; ) {
    const inputs = { ...randomInputs(), model: "three-level" as const, tolerance: undefined };
    let history: ReturnType<typeof computeIonisationHistory>;
    try {
      history = computeIonisationHistory(inputs);
    } catch {
      continue;
    }
    accepted++;
    const tight = computeIonisationHistory({ ...inputs, tolerance: 1e-9 });
    for (let i = 0; i < 200; i++) {
      const x = Math.log(10001) * random();
      const where = `z = ${Math.expm1(x)}, seed ${SEED}: ${JSON.stringify(inputs)}`;
      expect(Math.abs(history.xeAt(x) / tight.xeAt(x) - 1), `x_e, ${where}`).toBeLessThan(1e-6);
      const ratio = history.temperatureRatioAt(x) / tight.temperatureRatioAt(x);
      expect(Math.abs(ratio - 1), `T_m, ${where}`).toBeLessThan(1e-6);
    }
  }
});
