/** Seeded pseudo-random numbers: the same seed gives the same numbers on every machine. */

/** A source of numbers; always passed in, never global. */
export interface Random {
  /** Uniform in [0, 1). */
  uniform(): number;
  /** Normal with mean 0 and standard deviation 1 (Box and Muller, Ann. Math. Stat. 1958, 29, 610). */
  normal(): number;
  /** Integer in [0, n). */
  below(n: number): number;
}

/**
 * Creates a generator: xoshiro128** (Blackman and Vigna, ACM Trans. Math. Softw. 2021, 47, 36), its state
 * filled from the seed by the splitmix32 mixing steps.
 */
export function createRandom(seed: number): Random {
  let mixer = seed | 0;
  const nextMixed = (): number => {
    mixer = (mixer + 0x9e3779b9) | 0;
    let z = mixer;
    z = Math.imul(z ^ (z >>> 16), 0x21f0aaad);
    z = Math.imul(z ^ (z >>> 15), 0x735a2d97);
    return z ^ (z >>> 15);
  };
  let s0 = nextMixed();
  let s1 = nextMixed();
  let s2 = nextMixed();
  let s3 = nextMixed();

  const nextBits = (): number => {
    const scrambled = Math.imul(s1, 5);
    const result = Math.imul((scrambled << 7) | (scrambled >>> 25), 9);
    const t = s1 << 9;
    s2 ^= s0;
    s3 ^= s1;
    s1 ^= s2;
    s0 ^= s3;
    s2 ^= t;
    s3 = (s3 << 11) | (s3 >>> 21);
    return result >>> 0;
  };

  const uniform = (): number => nextBits() / 4294967296;
  return {
    uniform,
    normal: () => Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform()),
    below: (n) => Math.floor(uniform() * n),
  };
}
