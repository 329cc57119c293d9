// A card's equation, kept as plain text in the engine, taken apart for setting: Greek letters, sub- and superscripts.

export type Part = { kind: 'text' | 'sub' | 'sup'; text: string }

const GREEK: Record<string, string> = {
  alpha: 'α',
  beta: 'β',
  gam: 'γ',
  gamma: 'γ',
  Gam: 'Γ',
  Gamma: 'Γ',
  delta: 'δ',
  Delta: 'Δ',
  eps: 'ε',
  epsilon: 'ε',
  eta: 'η',
  theta: 'θ',
  kappa: 'κ',
  lambda: 'λ',
  mu: 'μ',
  nu: 'ν',
  xi: 'ξ',
  pi: 'π',
  rho: 'ρ',
  sigma: 'σ',
  tau: 'τ',
  phi: 'φ',
  Phi: 'Φ',
  chi: 'χ',
  psi: 'ψ',
  omega: 'ω',
}

/** Names of Greek letters as letters, differences with a delta, and proper signs. */
function signs(text: string): string {
  return text
    .replace(/(?<!\/)\bd(?=[Tp]\b)/g, 'Δ')
    .replace(/[A-Za-z]+/g, (word) => GREEK[word] ?? word)
    .replace(/(?<!\de)(?<![a-z]{2}(?=-[a-z]{2}))-/g, '−')
    .replace(/<=/g, '≤')
    .replace(/>=/g, '≥')
    .replace(/ \* /g, ' · ')
}

/** The end of what stands in the script beginning at `from`: a bracket, or a sign and a run of letters and digits. */
function scriptEnd(text: string, from: number): number {
  if (text[from] === '(') {
    let depth = 0
    for (let i = from; i < text.length; i++) {
      if (text[i] === '(') depth++
      if (text[i] === ')' && --depth === 0) return i + 1
    }
    return text.length
  }
  const run = /^[-−+]?[\p{L}\d]+(?:\.\d+)?(?:,[a-z]+)?/u.exec(text.slice(from))
  return from + (run?.[0].length ?? 0)
}

export function formulaParts(equation: string): Part[] {
  const parts: Part[] = []
  let plain = ''
  const flush = () => {
    if (plain !== '') parts.push({ kind: 'text', text: signs(plain) })
    plain = ''
  }
  for (let i = 0; i < equation.length; ) {
    const mark = equation[i]
    const end = mark === '^' || mark === '_' ? scriptEnd(equation, i + 1) : 0
    if (end > i + 1) {
      flush()
      const inner = equation.slice(i + 1, end)
      const bare = /^\(([^()]*)\)$/.exec(inner)?.[1] ?? inner
      parts.push({ kind: mark === '^' ? 'sup' : 'sub', text: signs(bare) })
      i = end
    } else {
      plain += mark
      i++
    }
  }
  flush()
  return parts
}
