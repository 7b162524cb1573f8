/** Identities of the Gamma function of complex argument and of the dilogarithm. */
import { expect, test } from "vitest";
import { dilogarithm, gamma, logGamma } from "../../../src/numerics/special.ts";

const ORDINATES = [1e-3, 0.0073, 0.05, 0.3, 1, 2.5, 7, 20];

/** |Gamma(x + iy)|^2 from logGamma. */
const modulus2 = (x: number, y: number) => Math.exp(2 * logGamma(x, y).re);
const relative = (a: number, b: number) => Math.abs(a / b - 1);

test("Gamma(n) is (n - 1)! and Gamma(1/2) the root of pi", () => {
  let factorial = 1;
  for (let n = 1; n < 20; n++) {
    expect(relative(gamma(n), factorial), `n = ${n}`).toBeLessThan(1e-13);
    factorial *= n;
  }
  expect(relative(gamma(0.5), Math.sqrt(Math.PI))).toBeLessThan(1e-13);
});

test.each(ORDINATES)("|Gamma(1/2 + iy)|^2 = pi/cosh(pi y) at y = %f", (y) => {
  expect(relative(modulus2(0.5, y), Math.PI / Math.cosh(Math.PI * y))).toBeLessThan(1e-12);
});

test.each(ORDINATES)("|Gamma(1 + iy)|^2 = pi y/sinh(pi y) at y = %f", (y) => {
  expect(relative(modulus2(1, y), (Math.PI * y) / Math.sinh(Math.PI * y))).toBeLessThan(1e-12);
});

test.each(ORDINATES)("Gamma(z + 1) = z Gamma(z) in modulus and phase at y = %f", (y) => {
  const x = 0.9999;
  expect(relative(modulus2(x + 1, y), (x * x + y * y) * modulus2(x, y))).toBeLessThan(1e-12);
  const phase = logGamma(x + 1, y).im - logGamma(x, y).im - Math.atan2(y, x);
  expect(Math.abs(Math.sin(phase / 2))).toBeLessThan(1e-13 * (1 + 50 * y));
});

test("Gamma doubles: Gamma(2x) = 2^(2x - 1) Gamma(x) Gamma(x + 1/2)/sqrt(pi)", () => {
  for (const x of [0.6, 0.99997, 1.7, 3.2])
    expect(relative(gamma(2 * x), (2 ** (2 * x - 1) * gamma(x) * gamma(x + 0.5)) / Math.sqrt(Math.PI))).toBeLessThan(
      1e-13,
    );
});

test("Li2 at its special points: 0, 1, -1, 1/2, 1/golden ratio squared", () => {
  const zeta2 = Math.PI ** 2 / 6;
  const lnGolden = Math.log((1 + Math.sqrt(5)) / 2);
  expect(dilogarithm(0)).toBe(0);
  expect(Math.abs(dilogarithm(1) - zeta2)).toBeLessThan(1e-15);
  expect(Math.abs(dilogarithm(-1) + zeta2 / 2)).toBeLessThan(1e-15);
  expect(Math.abs(dilogarithm(0.5) - (zeta2 - Math.LN2 ** 2) / 2)).toBeLessThan(1e-15);
  // Lewin 1981, sec. 1.5: Li2((3 - sqrt 5)/2) = pi^2/15 - ln^2 phi
  expect(Math.abs(dilogarithm((3 - Math.sqrt(5)) / 2) - (Math.PI ** 2 / 15 - lnGolden ** 2))).toBeLessThan(1e-15);
});

test("Li2 inverts and reflects: three functional equations over the whole domain", () => {
  const zeta2 = Math.PI ** 2 / 6;
  for (const x of [0.001, 0.1, 0.3, 0.499, 0.5, 0.501, 0.8, 0.97, 0.9999]) {
    const reflected = zeta2 - Math.log(x) * Math.log1p(-x) - dilogarithm(1 - x);
    expect(Math.abs(dilogarithm(x) - reflected), `reflection at ${x}`).toBeLessThan(3e-15);
    const duplicated = 2 * (dilogarithm(x) + dilogarithm(-x));
    expect(Math.abs(dilogarithm(x * x) - duplicated), `duplication at ${x}`).toBeLessThan(3e-15);
  }
  for (const x of [-0.01, -0.4, -0.99, -1.01, -3, -50]) {
    const inverted = -zeta2 - Math.log(-x) ** 2 / 2 - dilogarithm(1 / x);
    expect(Math.abs(dilogarithm(x) - inverted), `inversion at ${x}`).toBeLessThan(1e-14);
  }
});

test("Li2 equals its power series", () => {
  for (const x of [-0.6, -0.2, 0.05, 0.45, 0.6]) {
    let series = 0;
    for (let n = 1; n < 200; n++) series += x ** n / (n * n);
    expect(Math.abs(dilogarithm(x) - series), `x = ${x}`).toBeLessThan(1e-15);
  }
});

test("Li2 refuses arguments above 1 and not-a-number", () => {
  expect(() => dilogarithm(1.0001)).toThrow("Li2(1.0001): real argument must be at most 1");
  expect(() => dilogarithm(Number.NaN)).toThrow(RangeError);
});
