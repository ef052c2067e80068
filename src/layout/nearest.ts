/** The known word that was probably meant. */

const longestWord = 60

/** The known word nearest to `word` by edit distance, if it is near enough to be a slip. */
export function nearest(word: string, known: Iterable<string>): string | undefined {
  if (word.length > longestWord) return undefined
  let best: string | undefined
  let least = Number.POSITIVE_INFINITY
  for (const candidate of known) {
    if (candidate.length > longestWord) continue
    const same = plain(candidate) === plain(word)
    const distance = same ? 0.5 : editDistance(word.toLowerCase(), candidate.toLowerCase())
    const allowed = Math.floor(Math.max(word.length, candidate.length) / 3)
    if (distance < least && (same || distance <= allowed)) {
      best = candidate
      least = distance
    }
  }
  return best
}

const plain = (word: string): string => word.toLowerCase().replace(/[-_ ]/g, '')

/** Insertions, deletions, replacements and swaps of neighbours (optimal string alignment). */
function editDistance(a: string, b: string): number {
  let older: number[] = []
  let old = Array.from({ length: b.length + 1 }, (_, j) => j)
  for (let i = 1; i <= a.length; i++) {
    const row = [i]
    for (let j = 1; j <= b.length; j++) {
      const cost = a[i - 1] === b[j - 1] ? 0 : 1
      let least = Math.min((old[j] ?? 0) + 1, (row[j - 1] ?? 0) + 1, (old[j - 1] ?? 0) + cost)
      if (i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1])
        least = Math.min(least, (older[j - 2] ?? 0) + 1)
      row.push(least)
    }
    older = old
    old = row
  }
  return old[b.length] ?? 0
}
