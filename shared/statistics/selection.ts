/**
 * Moves the value of rank `rank` (counted from 0) to its place, smaller ones before it and larger ones after it; reorders `values`.
 *
 * Hoare's selection with a median-of-three pivot: linear time on average, no allocation, so the median of a
 * million weights costs a tenth of sorting them.
 * @param values finite numbers, unit kept
 * @param rank a whole number from 0 to `values.length` − 1, guarded by the caller
 * @returns the value of that rank
 * @see C. A. R. Hoare, Communications of the ACM 4 (1961) 321, algorithm 65 (cited from memory)
 */
export function selectInPlace(values: Float64Array, rank: number): number {
  let left = 0
  let right = values.length - 1
  while (left < right) {
    const pivot = medianOfThree(values[left]!, values[(left + right) >> 1]!, values[right]!)
    let low = left
    let high = right
    while (low <= high) {
      while (values[low]! < pivot) low++
      while (values[high]! > pivot) high--
      if (low > high) break
      const swapped = values[low]!
      values[low++] = values[high]!
      values[high--] = swapped
    }
    if (rank <= high) right = high
    else if (rank >= low) left = low
    else break
  }
  return values[rank]!
}

function medianOfThree(a: number, b: number, c: number): number {
  if (a < b) return b < c ? b : Math.max(a, c)
  return a < c ? a : Math.max(b, c)
}

/**
 * The middle value, or the mean of the two middle ones; leaves `values` as they are.
 * @param values at least one finite number, unit kept
 * @returns the median in the unit of the values
 */
export function medianOf(values: ArrayLike<number>): number {
  const copy = new Float64Array(values)
  const middle = copy.length >> 1
  const upper = selectInPlace(copy, middle)
  if (copy.length % 2 === 1) return upper
  let lower = copy[0]!
  for (let place = 1; place < middle; place++) if (copy[place]! > lower) lower = copy[place]!
  // Half of each, since the sum of two large values could overflow.
  return lower + (upper - lower) / 2
}
