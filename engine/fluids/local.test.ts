import { describe, expect, it } from 'vitest'
import {
  COOLANT_CP,
  COOLANT_K,
  COOLANT_LENGTH,
  COOLANT_LINE,
  COOLANT_MU,
  COOLANT_RHO,
  CP_L,
  coolantModel,
  coolants,
  FILM_LINE,
  fillCoolant,
  fillCoolantLine,
  fillFilm,
  fillFilmLine,
  fillVapour,
  fillVapourLine,
  fluidModel,
  fluids,
  H_FG,
  K_L,
  LINE_CP,
  LINE_CP_L,
  LINE_H_FG,
  LINE_K,
  LINE_K_L,
  LINE_MU,
  LINE_MU_L,
  LINE_MU_V,
  LINE_P,
  LINE_RHO,
  LINE_RHO_L,
  LINE_RHO_V,
  LINE_T,
  MU_L,
  MU_V,
  P,
  RHO_L,
  RHO_V,
  SATURATION_LENGTH,
  VAPOUR_LINE,
} from './index.ts'

const state = new Float64Array(SATURATION_LENGTH)
const near = (value: number, expected: number, share: number, what: string) =>
  expect(Math.abs(value / expected - 1), what).toBeLessThan(share)

describe.each(fluids.map((fluid) => fluid.id))('the series about one temperature: %s', (id) => {
  const model = fluidModel(id)
  const { minTemperature, maxTemperature } = model
  // Between joints, below the last degrees to the critical point.
  const temperatures = [0.07, 0.31, 0.53, 0.77, 0.93].map(
    (share) => minTemperature + share * (maxTemperature - minTemperature),
  )

  it('follow the film as far as its window', () => {
    const line = new Float64Array(3 + FILM_LINE)
    for (const T of temperatures) {
      fillFilmLine(model, T, line, 3)
      for (const off of [0, 1e-3, -1e-3]) {
        fillFilm(model, T + off, state)
        for (const [place, at] of [
          [RHO_L, LINE_RHO_L],
          [CP_L, LINE_CP_L],
          [MU_L, LINE_MU_L],
          [K_L, LINE_K_L],
        ])
          near(line[3 + at] + off * line[4 + at], state[place], 5e-9, `place ${place} at ${T} + ${off} K`)
      }
    }
  })

  it('follow the vapour along its saturation line', () => {
    const line = new Float64Array(VAPOUR_LINE)
    for (const T of temperatures) {
      fillVapourLine(model, T, line, 0)
      for (const off of [0, 0.01, -0.01]) {
        fillVapour(model, T + off, state)
        const d = Math.log(state[P] / line[LINE_P])
        const along = (at: number) => d * (line[at + 1] + d * line[at + 2])
        near(line[LINE_T] + along(LINE_T), T + off, 1e-11, `temperature at ${T} + ${off} K`)
        near(
          line[LINE_RHO_V] * Math.exp(along(LINE_RHO_V)),
          state[RHO_V],
          1e-10,
          `density at ${T} + ${off} K`,
        )
        near(line[LINE_H_FG] + along(LINE_H_FG), state[H_FG], 1e-10, `latent heat at ${T} + ${off} K`)
        near(line[LINE_MU_V] + along(LINE_MU_V), state[MU_V], 1e-10, `viscosity at ${T} + ${off} K`)
      }
    }
  })

  it('stay with the table’s ends beyond them', () => {
    const line = new Float64Array(VAPOUR_LINE)
    for (const [T, off] of [
      [minTemperature - 2, -0.01],
      [maxTemperature + 0.5, 0.01],
    ]) {
      fillVapourLine(model, T, line, 0)
      fillVapour(model, T + off, state)
      const d = Math.log(state[P] / line[LINE_P])
      near(
        line[LINE_T] + d * (line[LINE_T + 1] + d * line[LINE_T + 2]),
        T + off,
        1e-11,
        `temperature at ${T} K`,
      )
      near(line[LINE_RHO_V], state[RHO_V], 1e-14, `density at ${T} K`)
      expect([line[LINE_RHO_V + 1], line[LINE_H_FG + 1], line[LINE_MU_V + 2]].map(Math.abs)).toEqual([
        0, 0, 0,
      ])
      const film = new Float64Array(FILM_LINE)
      fillFilmLine(model, T, film, 0)
      expect([film[LINE_RHO_L + 1], film[LINE_MU_L + 1]].map(Math.abs)).toEqual([0, 0])
    }
  })
})

describe.each(coolants.map((coolant) => coolant.id))('a coolant’s series about one temperature: %s', (id) => {
  const model = coolantModel(id)
  const line = new Float64Array(COOLANT_LINE)
  const water = new Float64Array(COOLANT_LENGTH)

  it('follow its properties as far as their window', () => {
    for (const share of [0.03, 0.27, 0.52, 0.88]) {
      const T = model.minTemperature + share * (model.maxTemperature - model.minTemperature)
      fillCoolantLine(model, T, line, 0)
      for (const off of [0, 3e-4, -3e-4]) {
        fillCoolant(model, T + off, water)
        for (const [place, at] of [
          [COOLANT_RHO, LINE_RHO],
          [COOLANT_CP, LINE_CP],
          [COOLANT_MU, LINE_MU],
          [COOLANT_K, LINE_K],
        ])
          near(line[at] + off * line[at + 1], water[place], 1e-9, `place ${place} at ${T} + ${off} K`)
      }
    }
  })
})
