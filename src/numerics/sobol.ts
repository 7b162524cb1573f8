/** Scrambled Sobol points: uniform numbers that fill the unit cube more evenly than independent ones. */

/**
 * Degree s, coefficients a and initial numbers m_1 ... m_s of the primitive polynomials of dimensions 2, 3, ...
 * @see Joe & Kuo 2008, SIAM J. Sci. Comput. 30, 2635, set new-joe-kuo-6 (digits from the copy in SciPy 1.x)
 */
const POLYNOMIALS: readonly (readonly number[])[] = [
  [1, 0, 1],
  [2, 1, 1, 3],
  [3, 1, 1, 3, 1],
  [3, 2, 1, 1, 1],
  [4, 1, 1, 1, 3, 3],
  [4, 4, 1, 3, 5, 13],
  [5, 2, 1, 1, 5, 5, 17],
  [5, 4, 1, 1, 5, 5, 5],
  [5, 7, 1, 1, 7, 11, 19],
  [5, 11, 1, 1, 5, 1, 1],
  [5, 13, 1, 1, 1, 3, 11],
  [5, 14, 1, 3, 5, 5, 31],
  [6, 1, 1, 3, 3, 9, 7, 49],
  [6, 13, 1, 1, 1, 15, 21, 21],
  [6, 16, 1, 3, 1, 13, 27, 49],
  [6, 19, 1, 1, 1, 15, 7, 5],
  [6, 22, 1, 3, 1, 15, 13, 25],
  [6, 25, 1, 1, 5, 5, 19, 61],
  [7, 1, 1, 3, 7, 11, 23, 15, 103],
  [7, 4, 1, 3, 7, 13, 13, 15, 69],
  [7, 7, 1, 1, 3, 13, 7, 35, 63],
  [7, 8, 1, 3, 5, 9, 1, 25, 53],
  [7, 14, 1, 3, 1, 13, 9, 35, 107],
  [7, 19, 1, 3, 1, 5, 27, 61, 31],
  [7, 21, 1, 1, 5, 11, 19, 41, 61],
  [7, 28, 1, 3, 5, 3, 3, 13, 69],
  [7, 31, 1, 1, 7, 13, 1, 19, 1],
  [7, 32, 1, 3, 7, 5, 13, 19, 59],
  [7, 37, 1, 1, 3, 9, 25, 29, 41],
  [7, 41, 1, 3, 5, 13, 23, 1, 55],
  [7, 42, 1, 3, 7, 3, 13, 59, 17],
];

/** Number of dimensions there are. */
export const SOBOL_DIMENSIONS = POLYNOMIALS.length + 1;
const BITS = 32;

/** Direction numbers v_1 ... v_32 of a dimension, the first digit after the binary point as the highest bit. */
function directionNumbers(dimension: number): Uint32Array {
  const v = new Uint32Array(BITS);
  if (dimension === 0) {
    for (let i = 0; i < BITS; i++) v[i] = 2 ** (BITS - 1 - i);
    return v;
  }
  const [s, a, ...m] = POLYNOMIALS[dimension - 1];
  for (let i = 0; i < BITS; i++) {
    if (i < s) {
      v[i] = m[i] * 2 ** (BITS - 1 - i);
      continue;
    }
    v[i] = v[i - s] ^ (v[i - s] >>> s);
    for (let k = 1; k < s; k++) if ((a >>> (s - 1 - k)) & 1) v[i] ^= v[i - k];
  }
  return v;
}

const DIRECTIONS: Uint32Array[] = [];

/**
 * Digits of point `index` in one dimension as a 32-bit number.
 * @param index     0 to 2^32 - 1
 * @param dimension 0 to SOBOL_DIMENSIONS - 1
 * @throws {RangeError} outside these
 * @see Sobol 1967, USSR Comp. Math. Math. Phys. 7, 86
 */
export function sobolDigits(index: number, dimension: number): number {
  if (!(index >= 0 && index < 2 ** BITS && dimension >= 0 && dimension < SOBOL_DIMENSIONS))
    throw new RangeError(
      `Sobol point ${index} of dimension ${dimension}: there are 2^32 points, ${SOBOL_DIMENSIONS} dimensions`,
    );
  DIRECTIONS[dimension] ??= directionNumbers(dimension);
  const v = DIRECTIONS[dimension];
  let digits = 0;
  for (let bit = 0, rest = index; rest > 0; bit++, rest = Math.floor(rest / 2)) if (rest % 2 === 1) digits ^= v[bit];
  return digits >>> 0;
}

/** Mixes the bits of a 32-bit number. @see Appleby 2011, MurmurHash3, finaliser */
export function mixBits(x: number): number {
  let h = x | 0;
  h = Math.imul(h ^ (h >>> 16), 0x85ebca6b);
  h = Math.imul(h ^ (h >>> 13), 0xc2b2ae35);
  return (h ^ (h >>> 16)) >>> 0;
}

/**
 * Owen's nested scrambling: each digit is flipped or not by a coin that depends on the key and on all digits before it.
 * Every point becomes uniform, and any set of points keeps its evenness.
 * @param key one for each dimension and repetition
 * @see Owen 1995, in Monte Carlo and Quasi-Monte Carlo Methods, Lecture Notes in Statistics 106, 299
 */
export function owenScramble(digits: number, key: number): number {
  let flips = 0;
  for (let bit = 0; bit < BITS; bit++) {
    const before = bit === 0 ? 0 : digits >>> (BITS - bit);
    const coin = mixBits(before ^ mixBits(key + Math.imul(bit + 1, 0x9e3779b9))) & 1;
    flips |= coin << (BITS - 1 - bit);
  }
  return (digits ^ flips) >>> 0;
}

/** Scrambled point in one dimension, a uniform number in (0, 1). */
export function scrambledSobol(index: number, dimension: number, key: number): number {
  return (owenScramble(sobolDigits(index, dimension), key) + 0.5) / 2 ** BITS;
}
