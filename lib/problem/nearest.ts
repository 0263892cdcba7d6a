/** Number of single-character insertions, deletions, substitutions and exchanges of neighbours between two words. */
export function editDistance(a: string, b: string): number {
  let before: number[] = []
  let last = Array.from({ length: b.length + 1 }, (_, j) => j)
  for (let i = 1; i <= a.length; i += 1) {
    const row = [i]
    for (let j = 1; j <= b.length; j += 1) {
      const same = a[i - 1] === b[j - 1] ? 0 : 1
      let least = Math.min((last[j] ?? 0) + 1, (row[j - 1] ?? 0) + 1, (last[j - 1] ?? 0) + same)
      if (i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1]) least = Math.min(least, (before[j - 2] ?? 0) + 1)
      row.push(least)
    }
    before = last
    last = row
  }
  return last[b.length] ?? 0
}

/** The known word nearest to what was typed, or null where nothing is near. */
export function nearest(typed: string, known: readonly string[]): string | null {
  const word = typed.slice(0, 60).toLowerCase().replaceAll('-', '_')
  let best: string | null = null
  let least = Math.max(2, Math.floor(word.length / 2))
  for (const candidate of known) {
    const lower = candidate.toLowerCase()
    const distance = word.length >= 3 && (lower.startsWith(word) || word.startsWith(lower)) ? 1 : editDistance(word, lower)
    if (distance < least || (distance === least && best === null)) {
      best = candidate
      least = distance
    }
  }
  return best
}
