/** Dense elimination, seeded random numbers, argument checks. */
import { describe, expect, test } from "vitest";
import {
  CalculationError,
  InputError,
  requireFinite,
  requirePositive,
  requireRange,
} from "../../../src/numerics/check.ts";
import { luFactor, luSolve } from "../../../src/numerics/linear.ts";
import { seededUniform } from "../../../src/numerics/random.ts";

describe("LU with partial pivoting", () => {
  test("A x = b over random matrices of every size up to 26, residual at rounding", () => {
    const random = seededUniform(20260306);
    for (let n = 1; n <= 26; n++)
      for (let trial = 0; trial < 10; trial++) {
        const A = Float64Array.from({ length: n * n }, () => random() - 0.5);
        const x = Float64Array.from({ length: n }, () => random() - 0.5);
        const b = Float64Array.from({ length: n }, (_, i) => x.reduce((s, v, j) => s + A[i * n + j] * v, 0));
        const factors = Float64Array.from(A);
        const pivots = new Int32Array(n);
        expect(luFactor(factors, n, pivots)).toBe(true);
        const y = Float64Array.from(b);
        luSolve(factors, n, pivots, y);
        for (let i = 0; i < n; i++) {
          const residual = y.reduce((s, v, j) => s + A[i * n + j] * v, 0) - b[i];
          const size = y.reduce((s, v, j) => s + Math.abs(A[i * n + j] * v), 0);
          expect(Math.abs(residual), `n = ${n}, trial ${trial}`).toBeLessThan(1e-13 * size + 1e-15);
        }
      }
  });

  test("a zero pivot is exchanged, a singular or broken matrix reported", () => {
    const pivots = new Int32Array(2);
    const swap = Float64Array.of(0, 1, 1, 0);
    expect(luFactor(swap, 2, pivots)).toBe(true);
    const b = Float64Array.of(3, 5);
    luSolve(swap, 2, pivots, b);
    expect([...b]).toEqual([5, 3]);
    expect(luFactor(Float64Array.of(1, 2, 2, 4), 2, pivots)).toBe(false);
    expect(luFactor(Float64Array.of(0, 0, 0, 0), 2, pivots)).toBe(false);
    expect(luFactor(Float64Array.of(Number.NaN, 1, 1, 1), 2, pivots)).toBe(false);
  });
});

describe("seeded random numbers", () => {
  /** The published algorithm written out in 64-bit integers: xoshiro256** behind splitmix64. */
  function reference(seed: number): () => number {
    const mask = (1n << 64n) - 1n;
    let z = BigInt(seed);
    const split = () => {
      z = (z + 0x9e3779b97f4a7c15n) & mask;
      let r = z;
      r = ((r ^ (r >> 30n)) * 0xbf58476d1ce4e5b9n) & mask;
      r = ((r ^ (r >> 27n)) * 0x94d049bb133111ebn) & mask;
      return r ^ (r >> 31n);
    };
    const s = [split(), split(), split(), split()];
    const rotate = (v: bigint, k: bigint) => ((v << k) | (v >> (64n - k))) & mask;
    return () => {
      const result = (rotate((s[1] * 5n) & mask, 7n) * 9n) & mask;
      const t = (s[1] << 17n) & mask;
      s[2] ^= s[0];
      s[3] ^= s[1];
      s[1] ^= s[2];
      s[0] ^= s[3];
      s[2] ^= t;
      s[3] = rotate(s[3], 45n);
      return (Number(result >> 11n) + 0.5) / 2 ** 53;
    };
  }

  // Blackman & Vigna 2021, ACM Trans. Math. Softw. 47, 36.
  test.each([0, 1, 1234567, 2 ** 40 + 3])("seed %i is the published sequence, 2000 draws", (seed) => {
    const ours = seededUniform(seed);
    const published = reference(seed);
    expect(Array.from({ length: 2000 }, ours)).toEqual(Array.from({ length: 2000 }, published));
  });

  test("moments of a million draws", () => {
    const random = seededUniform(42);
    const n = 1e6;
    let mean = 0;
    let square = 0;
    let lag = 0;
    let last = random();
    let outside = 0;
    for (let i = 0; i < n; i++) {
      const u = random();
      if (!(u > 0 && u < 1)) outside++;
      mean += u / n;
      square += (u - 0.5) ** 2 / n;
      lag += ((u - 0.5) * (last - 0.5)) / n;
      last = u;
    }
    expect(outside).toBe(0);
    // Five standard errors: 1/sqrt(12 n), sqrt(1/180)/sqrt(n), 1/(12 sqrt(n)).
    expect(Math.abs(mean - 0.5)).toBeLessThan(5 / Math.sqrt(12 * n));
    expect(Math.abs(square - 1 / 12)).toBeLessThan(5 / Math.sqrt(180 * n));
    expect(Math.abs(lag)).toBeLessThan(5 / 12 / Math.sqrt(n));
  });
});

describe("checks", () => {
  test("messages name quantity, value, unit and what is accepted", () => {
    for (const bad of [0, -3, Number.NaN, Number.POSITIVE_INFINITY])
      expect(() => requirePositive("T", bad, "K")).toThrow(`T = ${bad} K: must be positive and finite`);
    expect(() => requirePositive("T", 1e-300, "K")).not.toThrow();
    expect(() => requireFinite("x", Number.NaN, "1")).toThrow("x = NaN 1: must be finite");
    expect(() => requireRange("h0", 0, "km/s/Mpc", 20, 150)).toThrow(
      "h0 = 0 km/s/Mpc: accepted are 20 to 150 km/s/Mpc",
    );
    expect(() => requireRange("nEff", Number.NaN, "", 0, 30)).toThrow("nEff = NaN: accepted are 0 to 30");
    expect(() => requireRange("nEff", 30, "", 0, 30)).not.toThrow();
  });

  test("classes carry code and exit status", () => {
    expect(new InputError("range", "x")).toMatchObject({ name: "InputError", code: "range", exitCode: 2 });
    expect(new CalculationError("steps", "x")).toMatchObject({ name: "CalculationError", code: "steps", exitCode: 1 });
  });
});
