/** Pumping power and yearly cost. */
import type { Card } from './card.ts'

/** Capital recovery factor i (1+i)^n/((1+i)^n − 1), 1/year; 1/n at zero interest. */
export function capitalRecoveryFactor(interest: number, years: number): number {
  if (Math.abs(interest) < 1e-12) return 1 / years
  const growth = (1 + interest) ** years
  return (interest * growth) / (growth - 1)
}

/** Power taken by the coolant pump, Δp ṁ/(ρ η), W. */
export function pumpingPower(
  pressureDrop: number,
  massFlow: number,
  density: number,
  efficiency: number,
): number {
  return (pressureDrop * massFlow) / (density * efficiency)
}

/** Yearly cost CRF A c_A + P hours c_e/1000 in the currency of the prices; energy price per kWh, area price per m². */
export function yearlyCost(
  area: number,
  tubePrice: number,
  recoveryFactor: number,
  power: number,
  hoursPerYear: number,
  energyPrice: number,
): number {
  return recoveryFactor * area * tubePrice + (power * hoursPerYear * energyPrice) / 1000
}

export const economicsCards = [
  {
    id: 'economics.yearlyCost',
    choice: 'economics',
    name: 'Yearly cost of the tube field and the pump',
    equation: 'J = CRF c_A A + P h c_e/1000, CRF = i (1+i)^n/((1+i)^n - 1), P = dp m/(rho eta)',
    symbols: {
      c_A: 'price of tube field per outside area, per m2',
      P: 'pumping power, W',
      h: 'hours per year',
      c_e: 'energy price, per kWh',
      i: 'interest rate',
      n: 'years',
    },
    source: ['annuity formula'],
    range: { interestRate: 'not stated' },
    scatter: 'prices are assumptions to be replaced',
    sigmaLn: null,
    evidence: 'assumption',
    requires: [],
    available: true,
  },
] as const satisfies readonly Card[]
