/**
 * A stream of uniform numbers from 0 up to, not with, 1 that is the same for the same seed on every machine.
 *
 * xoshiro128** (state seeded by splitmix32): period 2^128 − 1; good enough for simulation, not for secrets.
 * @param seed any whole number; its lower 32 bits count
 * @see D. Blackman, S. Vigna, Scrambled linear pseudorandom number generators, ACM TOMS 47 (2021) 36
 */
export function seededRandom(seed: number): () => number {
  let mix = seed >>> 0
  const nextSeed = (): number => {
    mix = (mix + 0x9e3779b9) >>> 0
    let z = mix
    z = Math.imul(z ^ (z >>> 16), 0x21f0aaad)
    z = Math.imul(z ^ (z >>> 15), 0x735a2d97)
    return (z ^ (z >>> 15)) >>> 0
  }
  let a = nextSeed()
  let b = nextSeed()
  let c = nextSeed()
  let d = nextSeed()
  return () => {
    const scrambled = Math.imul(rotate(Math.imul(b, 5), 7), 9) >>> 0
    const shifted = b << 9
    c ^= a
    d ^= b
    b ^= c
    a ^= d
    c ^= shifted
    d = rotate(d, 11)
    return scrambled / 4_294_967_296
  }
}

function rotate(word: number, by: number): number {
  return (word << by) | (word >>> (32 - by))
}
