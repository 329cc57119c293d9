// Water by the engine's fitted series against two implementations of the IAPWS formulations that know nothing of them.
import { IAPWS97_EoS } from '@neutrium/thermo.eos.iapws97'
import { describe, expect, it } from 'vitest'
import { properties } from '#engine/fluids/index.ts'
import reference from './iapws-reference.json' with { type: 'json' }

const off = (value: number, wanted: number) => Math.abs(value / wanted - 1)

describe(`water against ${reference.source}`, () => {
  it.each(reference.rows)('at $T K', ({ T, ...wanted }) => {
    const [state] = properties('water', [T])
    expect(off(state.pressure, wanted.p)).toBeLessThan(2e-4)
    expect(off(state.liquidDensity, wanted.rhoL)).toBeLessThan(2e-4)
    expect(off(state.vapourDensity, wanted.rhoV)).toBeLessThan(3e-4)
    expect(off(state.latentHeat, wanted.hfg)).toBeLessThan(3e-4)
    expect(off(state.liquidSpecificHeat, wanted.cpL)).toBeLessThan(1e-3)
    expect(off(state.vapourSpecificHeat, wanted.cpV)).toBeLessThan(1e-3)
    expect(off(state.liquidViscosity, wanted.muL)).toBeLessThan(2e-3)
    expect(off(state.vapourViscosity, wanted.muV)).toBeLessThan(5e-3)
    expect(off(state.liquidConductivity, wanted.kL)).toBeLessThan(1e-2)
    expect(off(state.surfaceTension, wanted.sigma)).toBeLessThan(2e-3)
  })
})

describe('water against the IAPWS-IF97 package', () => {
  const eos = new IAPWS97_EoS()
  // The package takes pressure and temperature: a hair above and below saturation gives liquid and vapour.
  it.each([290, 320, 350, 380, 420, 470, 520, 570])('at %d K', (T) => {
    const [state] = properties('water', [T])
    const solve = (p: number) => eos.solve({ p, t: T }) as unknown as Record<'rho' | 'cp' | 'h', number>
    const liquid = solve(state.pressure * 1.001)
    const vapour = solve(state.pressure * 0.999)
    expect(off(state.liquidDensity, liquid.rho)).toBeLessThan(5e-4)
    // A thousandth of pressure is a thousandth of the vapour's density.
    expect(off(state.vapourDensity, vapour.rho)).toBeLessThan(3e-3)
    expect(off(state.liquidSpecificHeat, liquid.cp * 1000)).toBeLessThan(2e-3)
    expect(off(state.latentHeat, (vapour.h - liquid.h) * 1000)).toBeLessThan(2e-3)
  })
})
