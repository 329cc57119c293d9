import { createElement } from 'react'
import { renderToString } from 'react-dom/server'
import { expect, test } from 'vitest'
import { Entries } from './entries.tsx'
import { LimitNotes, marginText } from './limit-notes.tsx'
import { RowsTable } from './rows-table.tsx'
import { Said } from './said.tsx'

const text = (page: string) => page.replaceAll('<!-- -->', '').replace(/<[^>]*>/g, '')

test('long numbers of a sentence are grouped by style; what is read or copied is unchanged', () => {
  const sentence = 'Least of 48000 points within 60 kPa: 41.8 m², R1234ze(E), point 17402.'
  // biome-ignore lint/correctness/noChildrenProp: createElement's third argument does not type a required child
  const page = renderToString(createElement(Said, { children: sentence }))
  expect(text(page)).toBe(sentence)
  expect(page.match(/digit-group/g)).toHaveLength(4)
  expect(page).toContain('R1234ze(E)')
})

test('given values keep their own digits, computed ones get as many as asked for', () => {
  const entries = [
    {
      label: 'Outside diameter',
      symbol: 'D_o',
      value: 0.01905,
      dimension: 'length',
      hint: 'tube',
    },
    { label: 'Fluid', text: 'R134a' },
  ] as const
  const given = text(renderToString(createElement(Entries, { title: 'Tube', entries })))
  expect(given).toContain('Outside diameterDo19.05mm')
  const computed = renderToString(
    createElement(Entries, {
      title: 'Results',
      entries: [{ label: 'Area', symbol: 'A', value: 41.823456, dimension: 'area', from: 'A = π D_o L N' }],
      digits: 5,
      from: true,
    }),
  )
  expect(text(computed)).toContain('41.823m²A = π Do L N')
  expect(computed).toContain('<sub>o</sub>')
})

const standing = {
  id: 'coolantPressureDrop',
  label: 'Coolant pressure drop',
  dimension: 'pressure' as const,
  value: 59700,
  max: 60000,
  met: true as boolean | null,
  margin: 0.005 as number | null,
}

test('a limit says its value, its bound and what is to spare or beyond', () => {
  expect(text(renderToString(createElement(LimitNotes, { standings: [standing] })))).toBe(
    'Coolant pressure drop 59.7kPa.Limit: at most 60kPa, 0.5 % to spare.',
  )
  expect(marginText({ ...standing, met: false, margin: -0.3 })).toBe('30 % beyond')
  expect(marginText({ ...standing, margin: 0.0001 })).toBe('at the limit')
  expect(marginText({ ...standing, met: null, margin: null })).toBe('no value, counts as not met')
})

test('rows are listed with what they have, and their heat is summed', () => {
  const row = {
    row: 1,
    tubes: 10,
    saturationTemperature: 313.15,
    wallTemperature: 308.15,
    coolantTemperature: null,
    coefficient: 2000,
    wallSubcooling: 5,
    heatFlux: 10000,
    condensateIn: 0,
    vapourVelocity: null,
    gasMoleFraction: 0,
    filmReynolds: 30,
    galileo: null,
    drainageMode: 'droplet' as const,
    factors: { inundation: 1, shear: 1.2, gas: 1, surface: 1 },
  }
  const page = renderToString(
    createElement(RowsTable, {
      rows: [row, { ...row, row: 2 }],
      heat: [1500, 1250],
      passOf: (n: number) => 3 - n,
    }),
  )
  const plain = text(page)
  expect(plain).toContain('40.00')
  expect(plain).toContain('droplets')
  expect(plain).toContain('Shear')
  expect(plain).not.toContain('Inundation')
  expect(plain).not.toContain('Coolant')
  expect(text(/<tfoot>.*<\/tfoot>/s.exec(page)?.[0] ?? '')).toBe('Sum2.7500')
})
