import { describe, expect, it } from 'vitest'
import { cards } from '#engine/correlations/registry.ts'
import { formulaParts } from './formula.ts'

const set = (equation: string) =>
  formulaParts(equation)
    .map(({ kind, text }) => (kind === 'text' ? text : kind === 'sub' ? `[${text}]` : `{${text}}`))
    .join('')

describe('formulaParts', () => {
  it('sets indices, exponents and Greek letters', () => {
    expect(set('h_n = h_1 (Gam_n/gam_n)^-s, s = 0.16')).toBe('h[n] = h[1] (Γ[n]/γ[n]){−s}, s = 0.16')
    expect(set('h = 0.728 (k/D) G4^(1/4)')).toBe('h = 0.728 (k/D) G4{1/4}')
    expect(set('g rho_l (rho_l - rho_v) D^3/(mu_l k dT)')).toBe('g ρ[l] (ρ[l] − ρ[v]) D{3}/(μ[l] k ΔT)')
    expect(set('dTs/dp = (rho_l-rho_v) dp, in-line, 5.82e-6 (a-0.85)')).toBe(
      'dTs/dp = (ρ[l]−ρ[v]) Δp, in-line, 5.82e-6 (a−0.85)',
    )
    expect(set('Re^0.8 Pr^(0.4 + x)')).toBe('Re{0.8} Pr{0.4 + x}')
  })
  it('keeps a bracket inside an exponent whole', () => {
    expect(set('x^(1/(4 - 3 s)) y')).toBe('x{(1/(4 − 3 s))} y')
  })
  it('loses nothing of any equation in the registry', () => {
    const digits = (text: string) => text.replace(/\D/g, '')
    for (const card of cards) {
      const parts = formulaParts(card.equation)
      expect(digits(parts.map(({ text }) => text).join('')), card.id).toBe(digits(card.equation))
    }
  })
})
