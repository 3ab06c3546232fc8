/** A seeded stream of random numbers. The same seed gives the same numbers on every machine. */
export interface RandomStream {
  /** Uniform in [0, 1), 53 bits. */
  uniform(): number;
  /** Standard normal. */
  normal(): number;
  /** Unsigned 32-bit integer. */
  bits(): number;
  /** Whole number from 0 to n - 1. */
  below(n: number): number;
  /** An independent stream for a task; depends only on this stream's seed and the key, not on what was drawn so far. */
  fork(key: number): RandomStream;
}

/**
 * A stream of the generator xoshiro128** with a state filled by a mixing function from the seed.
 * @param seed any finite number; its fraction counts too
 * Source: Blackman & Vigna 2021, ACM Trans. Math. Softw. 47, 36 (generator); polar method of Marsaglia & Bray 1964 (normal).
 */
export function randomStream(seed: number): RandomStream {
  if (!Number.isFinite(seed)) throw new RangeError(`randomStream: seed must be a finite number, got ${seed}.`);
  const words = new Uint32Array(new Float64Array([seed]).buffer);
  return makeStream(words[0], words[1]);
}

/** Mixes a 32-bit word (finaliser of MurmurHash3, public domain, A. Appleby). */
function mix(word: number): number {
  let h = word >>> 0;
  h = Math.imul(h ^ (h >>> 16), 0x85ebca6b);
  h = Math.imul(h ^ (h >>> 13), 0xc2b2ae35);
  return (h ^ (h >>> 16)) >>> 0;
}

function makeStream(low: number, high: number): RandomStream {
  let a = mix(low + 0x9e3779b9);
  let b = mix(high ^ a ^ 0x243f6a88);
  let c = mix(a + Math.imul(b, 3) + 0xb7e15162);
  let d = mix(b + Math.imul(c, 5) + 0x1f83d9ab) | 1;
  const keyLow = mix(a ^ c);
  const keyHigh = mix(b ^ d);
  let spare = Number.NaN;

  function bits(): number {
    const t = Math.imul(b, 5);
    const result = Math.imul((t << 7) | (t >>> 25), 9);
    const shifted = b << 9;
    c ^= a;
    d ^= b;
    b ^= c;
    a ^= d;
    c ^= shifted;
    d = (d << 11) | (d >>> 21);
    return result >>> 0;
  }
  function uniform(): number {
    return ((bits() >>> 5) * 67108864 + (bits() >>> 6)) / 9007199254740992;
  }
  function normal(): number {
    if (!Number.isNaN(spare)) {
      const out = spare;
      spare = Number.NaN;
      return out;
    }
    for (;;) {
      const x = 2 * uniform() - 1;
      const y = 2 * uniform() - 1;
      const r = x * x + y * y;
      if (r > 0 && r < 1) {
        const scale = Math.sqrt((-2 * Math.log(r)) / r);
        spare = y * scale;
        return x * scale;
      }
    }
  }
  return {
    bits,
    uniform,
    normal,
    below: (n) => Math.floor(uniform() * n),
    fork: (key) => makeStream(mix(keyLow ^ mix(key >>> 0)), mix(keyHigh + Math.imul(mix(~key >>> 0), 7))),
  };
}
