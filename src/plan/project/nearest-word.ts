/** The word that someone probably meant. */

/**
 * The word with the fewest edits (a letter put in, left out or changed, or two swapped: Damerau 1964) from what was typed,
 * if they are at most a third of the letters, one in short words; else null.
 */
export function nearestWord(typed: string, words: readonly string[]): string | null {
  let best: string | null = null
  let least = Infinity
  for (const word of words) {
    const count = edits(typed.toLowerCase(), word.toLowerCase())
    if (count < least) {
      least = count
      best = word
    }
  }
  return best !== null && least <= Math.max(1, Math.floor(Math.max(typed.length, best.length) / 3)) ? best : null
}

/** The least number of edits, no letter edited twice. */
function edits(a: string, b: string): number {
  if (Math.abs(a.length - b.length) > 8) return Infinity
  let before: number[] = []
  let row = Array.from({ length: b.length + 1 }, (_, j) => j)
  for (let i = 1; i <= a.length; i += 1) {
    const next = [i]
    for (let j = 1; j <= b.length; j += 1) {
      const same = a[i - 1] === b[j - 1]
      const swapped = i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1]
      next.push(Math.min(row[j] + 1, next[j - 1] + 1, row[j - 1] + (same ? 0 : 1), swapped ? before[j - 2] + 1 : Infinity))
    }
    before = row
    row = next
  }
  return row[b.length]
}
