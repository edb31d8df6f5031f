/** A test for lines of statistics that some balances print among or below the weights. */
export function summaryLineTest(words: readonly string[]): (firstCell: string) => boolean {
  const alternatives = [...words]
    .sort((a, b) => b.length - a.length)
    .map((word) => {
      const escaped = word.toLowerCase().replace(/[.*+?^${}()|[\]\\]/g, String.raw`\$&`)
      // One letter alone may be a mark (N for net, S for stable), so it needs a sign after it.
      return word.length === 1 ? `${escaped}(?=\\s*[:=])` : `${escaped}(?=\\s*(?:$|[:=.(\\[%]|\\s[\\d.,+-]))`
    })
  if (alternatives.length === 0) return () => false
  const pattern = new RegExp(`^\\s*(?:${alternatives.join('|')})`, 'i')
  return (firstCell) => firstCell.length <= 200 && pattern.test(firstCell)
}
