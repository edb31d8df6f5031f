/**
 * Normal values with mean 0 and SD 1, two at a time, from uniform ones.
 *
 * Method  Marsaglia's polar method: a point in the unit disc, stretched by √(−2·ln q / q) with q its squared distance.
 * @param uniform draws from 0 (included) to 1 (excluded), such as those of `seededRandom`
 * @see G. Marsaglia, T. A. Bray, SIAM Review 6 (1964) 260–264 (cited from memory)
 */
export function normalDraws(uniform: () => number): () => number {
  let spare = 0
  let hasSpare = false
  return () => {
    if (hasSpare) {
      hasSpare = false
      return spare
    }
    for (;;) {
      const x = 2 * uniform() - 1
      const y = 2 * uniform() - 1
      const q = x * x + y * y
      if (q >= 1 || q === 0) continue
      const stretch = Math.sqrt((-2 * Math.log(q)) / q)
      spare = y * stretch
      hasSpare = true
      return x * stretch
    }
  }
}
