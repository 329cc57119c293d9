// The known name nearest to one that is not known, for "did you mean".

/** Edits (insert, delete, replace, swap neighbours) between two words. */
export function editDistance(a: string, b: string): number {
  let before = new Array<number>(b.length + 1).fill(0)
  let previous = Array.from({ length: b.length + 1 }, (_, j) => j)
  for (let i = 1; i <= a.length; i++) {
    const current = [i]
    for (let j = 1; j <= b.length; j++) {
      const replace = previous[j - 1] + (a[i - 1] === b[j - 1] ? 0 : 1)
      current[j] = Math.min(replace, previous[j] + 1, current[j - 1] + 1)
      if (i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1])
        current[j] = Math.min(current[j], before[j - 2] + 1)
    }
    before = previous
    previous = current
  }
  return previous[b.length]
}

/** The candidate nearest to `name`, also by its last dotted part; null when none is near. */
export function nearest(name: string, candidates: readonly string[]): string | null {
  const wanted = name.toLowerCase().trim()
  const lastPart = (text: string) => text.slice(text.lastIndexOf('.') + 1)
  let best: string | null = null
  let bestDistance = Number.POSITIVE_INFINITY
  for (const candidate of candidates) {
    const known = candidate.toLowerCase()
    const whole = editDistance(wanted, known)
    const part = editDistance(lastPart(wanted), lastPart(known)) + 0.5
    const inside = wanted.length >= 3 && known.includes(wanted) ? 1.5 : Number.POSITIVE_INFINITY
    const distance = Math.min(whole, part, inside)
    if (distance < bestDistance) {
      best = candidate
      bestDistance = distance
    }
  }
  return bestDistance <= Math.max(2, wanted.length * 0.34) ? best : null
}
