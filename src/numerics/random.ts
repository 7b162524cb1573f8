/** Seeded random numbers: the same seed gives the same sequence on every machine. */

/**
 * Uniform numbers in (0, 1) with 53 random bits: xoshiro256** seeded through splitmix64.
 * @param seed integer
 * @see Blackman & Vigna 2021, ACM Trans. Math. Softw. 47, 36
 */
export function seededUniform(seed: number): () => number {
  const mask = (1n << 64n) - 1n;
  let z = BigInt(Math.trunc(seed)) & mask;
  const next = () => {
    z = (z + 0x9e3779b97f4a7c15n) & mask;
    let r = z;
    r = ((r ^ (r >> 30n)) * 0xbf58476d1ce4e5b9n) & mask;
    r = ((r ^ (r >> 27n)) * 0x94d049bb133111ebn) & mask;
    return r ^ (r >> 31n);
  };
  const s = new Uint32Array(8);
  for (let i = 0; i < 4; i++) {
    const v = next();
    s[2 * i] = Number(v & 0xffffffffn);
    s[2 * i + 1] = Number(v >> 32n);
  }
  return () => {
    const hi = xoshiro(s);
    return (hi.high * 2097152 + (hi.low >>> 11) + 0.5) / 9007199254740992;
  };
}

const out = { low: 0, high: 0 };

/** One step of xoshiro256** on 32-bit halves (low word first). */
function xoshiro(s: Uint32Array): { low: number; high: number } {
  // result = rotl(s1 * 5, 7) * 9
  let [lo, hi] = multiply(s[2], s[3], 5);
  [lo, hi] = rotate(lo, hi, 7);
  [lo, hi] = multiply(lo, hi, 9);
  out.low = lo;
  out.high = hi;
  const tLo = (s[2] << 17) >>> 0;
  const tHi = ((s[3] << 17) | (s[2] >>> 15)) >>> 0;
  s[4] ^= s[0];
  s[5] ^= s[1];
  s[6] ^= s[2];
  s[7] ^= s[3];
  s[2] ^= s[4];
  s[3] ^= s[5];
  s[0] ^= s[6];
  s[1] ^= s[7];
  s[4] ^= tLo;
  s[5] ^= tHi;
  [s[6], s[7]] = rotate(s[6], s[7], 45);
  return out;
}

function multiply(lo: number, hi: number, m: number): [number, number] {
  const low = lo * m;
  const carry = Math.floor(low / 4294967296);
  return [low >>> 0, (Math.imul(hi, m) + carry) >>> 0];
}

function rotate(lo: number, hi: number, k: number): [number, number] {
  if (k >= 32) return rotate(hi, lo, k - 32);
  if (k === 0) return [lo >>> 0, hi >>> 0];
  return [((lo << k) | (hi >>> (32 - k))) >>> 0, ((hi << k) | (lo >>> (32 - k))) >>> 0];
}
