import { deflateRawSync } from 'node:zlib'
import { desc } from 'drizzle-orm'
import ExcelJS from 'exceljs'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { db, pool } from '#app/db.server.ts'
import { createProject } from '#app/modules/projects/projects.server.ts'
import { createStudy, getDraft, keepRevision } from '#app/modules/studies/studies.server.ts'
import { auditEntry, person } from '#drizzle/schema/index.ts'
import {
  applyFit,
  benchParity,
  deleteBenchData,
  fitBenchData,
  getBenchData,
  listBenchData,
  mapBenchData,
  removeCorrection,
  uploadBenchData,
} from './bench-data.server.ts'

const definition = {
  name: 'Stand',
  case: {
    fluid: 'r134a',
    saturationTemperature: '40 degC',
    duty: '20 kW',
    drive: { kind: 'coolant', coolant: 'water', inletTemperature: '27 degC', velocity: '1.5 m/s' },
    tube: { outsideDiameter: '19.05 mm', wallThickness: '1.245 mm', material: 'copper' },
    bundle: { pitchRatio: 1.25, rows: 5, tubesPerRow: 5 },
  },
  sweep: { variables: [{ path: 'drive.velocity', values: ['1 m/s', '2 m/s'] }] },
}
let acting: { personId: string; name: string; address: string }
let colleague: typeof acting
let projectId = ''
let studyId = ''
beforeAll(async () => {
  const made = await db
    .insert(person)
    .values([
      { name: 'Engineer', email: 'bench-engineer@example.com', role: 'engineer' },
      { name: 'Colleague', email: 'bench-colleague@example.com', role: 'engineer' },
    ])
    .returning()
  ;[acting, colleague] = made.map(({ id, name }) => ({ personId: id, name, address: '' }))
  projectId = (await createProject('Bench', '', acting)).id
  studyId = (await createStudy(projectId, { name: 'Stand', definition }, acting)).id
  expect((await keepRevision(studyId, definition, acting)).ok).toBe(true)
})
afterAll(() => pool.end())

const upload = (name: string, file: Buffer | string, more: { studyId?: string } = {}) =>
  uploadBenchData(
    projectId,
    { name, fileName: 'stand.csv', file: Buffer.from(file), studyId, ...more },
    acting,
  )
const latestAct = async () => (await db.select().from(auditEntry).orderBy(desc(auditEntry.id)).limit(1))[0]
const rows = Array.from(
  { length: 8 },
  (_, k) => `P${k};${(1 + k / 10).toFixed(1).replace('.', ',')};${60 + 2 * k}`,
)
const FILE = `Test;Water velocity [m/s];Duty [kW]\r\n${rows.join('\r\n')}\r\nbad;x;1\r\n`

describe('measured points', () => {
  it('are kept, mapped, fitted and applied to a study, and taken out again', async () => {
    const { id } = await upload('Stand B, May', FILE)
    expect(await latestAct()).toMatchObject({ act: 'benchData.upload', projectId, after: { rows: 9 } })
    const fresh = await getBenchData(projectId, id)
    expect(fresh.original.toString()).toBe(FILE)
    const { columns } = fresh.mapping
    expect(columns).toEqual([
      { target: 'name', unit: '' },
      { target: 'drive.velocity', unit: 'm/s' },
      { target: 'measured.duty', unit: 'kW' },
    ])
    const unitless = columns.map((column) => ({ ...column, unit: '' }))
    expect(
      (await mapBenchData(projectId, id, { columns: unitless, length: '2 m' }, acting)).faults,
    ).toHaveLength(2)
    expect((await mapBenchData(projectId, id, { columns, length: '2 m' }, acting)).faults).toEqual([])
    const mapped = await getBenchData(projectId, id)
    expect(mapped.points).toHaveLength(8)
    expect(mapped.points[1]).toMatchObject({
      name: 'P1',
      given: { 'drive.velocity': 1.1 },
      measured: { duty: 62_000 },
    })
    expect(mapped.mapping.faults).toMatchObject([{ line: 10, column: 'Water velocity [m/s]' }])
    expect((await benchParity(mapped, 'duty')).points.every(({ predicted }) => (predicted ?? 0) > 0)).toBe(
      true,
    )

    await expect(fitBenchData(projectId, id, 'duty', 'vapourDrop', acting)).rejects.toMatchObject({
      code: 'invalid',
    })
    await fitBenchData(projectId, id, 'duty', 'film', acting)
    expect(await latestAct()).toMatchObject({ act: 'benchData.fit', after: { group: 'film' } })
    const { fit } = await getBenchData(projectId, id)
    expect(fit?.fit.used).toBeGreaterThan(2)

    await applyFit(projectId, id, studyId, acting)
    await applyFit(projectId, id, studyId, acting)
    const draft = await getDraft(studyId, acting.personId)
    expect(draft?.definition).toMatchObject({
      case: { corrections: [{ name: 'Stand B, May', group: 'film' }] },
      sweep: definition.sweep,
    })
    expect((await keepRevision(studyId, draft?.definition ?? {}, acting)).ok).toBe(true)
    await removeCorrection(projectId, 'Stand B, May', studyId, acting)
    expect((await getDraft(studyId, acting.personId))?.definition).toEqual(definition)
  })

  it('are of a workbook’s first sheet, formulas by their saved values', async () => {
    const book = new ExcelJS.Workbook()
    const sheet = book.addWorksheet('Points')
    sheet.addRow(['Test', 'Velocity [m/s]', 'Duty [kW]'])
    sheet.addRow(['A', { formula: '1+0.5', result: 1.5 }, 70])
    sheet.addRow(['B', { formula: '1+0.5' }, 70])
    const { id } = await upload('Workbook', Buffer.from(await book.xlsx.writeBuffer()))
    const { mapping } = await getBenchData(projectId, id)
    await mapBenchData(projectId, id, { columns: mapping.columns, length: '2 m' }, acting)
    const read = await getBenchData(projectId, id)
    expect(read.points.map(({ name }) => name)).toEqual(['A'])
    expect(read.mapping.faults[0].problem).toMatch(/formula/)
  })

  it('are deleted by who uploaded them alone', async () => {
    const { id } = await upload('Gone', FILE)
    await expect(deleteBenchData(projectId, id, colleague)).rejects.toMatchObject({ code: 'forbidden' })
    await deleteBenchData(projectId, id, acting)
    expect((await listBenchData(projectId)).some((entry) => entry.id === id)).toBe(false)
    expect(await latestAct()).toMatchObject({ act: 'benchData.delete', before: { name: 'Gone' } })
  })

  it.each([
    ['no study of the project', 'A', FILE, { studyId: 'x' }, /Study: choose/],
    ['no name', ' ', FILE, {}, /Name: give/],
    ['an empty file', 'B', '', {}, /File: it is empty/],
    ['bytes', 'C', 'a\0b', {}, /neither text nor a workbook/],
    ['a broken archive', 'D', 'PK\u0003\u0004 and no more', {}, /no workbook/],
    ['50 000 rows', 'E', `a\n${'1\n'.repeat(50_000)}`, {}, /more than 5000 rows/],
    ['a zip bomb', 'F', zipOf(Buffer.alloc(200_000_000)), {}, /larger than 24 MB/],
  ])('are not of %s', async (_, name, file, more, why) => {
    await expect(upload(name, file, more)).rejects.toThrow(why)
  })

  it('have a name of their own in the project and are no one else’s', async () => {
    const { id } = await upload('Twice', FILE)
    await expect(upload('TWICE', FILE)).rejects.toMatchObject({ code: 'conflict' })
    const other = await createProject('Other bench', '', acting)
    await expect(getBenchData(other.id, id)).rejects.toMatchObject({ code: 'not-found' })
  })

  it('above a hundred are not fitted in one request', async () => {
    const many = Array.from({ length: 101 }, (_, k) => `${1 + k / 100},70`).join('\n')
    const { id } = await upload('Many', `Velocity [m/s],Duty [kW]\n${many}`)
    const { mapping } = await getBenchData(projectId, id)
    await mapBenchData(projectId, id, { columns: mapping.columns, length: '2 m' }, acting)
    await expect(fitBenchData(projectId, id, 'duty', 'film', acting)).rejects.toThrow(
      /101 points.*at most 100/,
    )
  })
})

/** An archive of one entry. */
function zipOf(content: Buffer): Buffer {
  const packed = deflateRawSync(content)
  const name = Buffer.from('xl/workbook.xml')
  const local = Buffer.alloc(30)
  local.writeUInt32LE(0x04034b50, 0)
  local.writeUInt16LE(8, 8)
  local.writeUInt32LE(packed.length, 18)
  // Says that it unfolds to little.
  local.writeUInt32LE(10, 22)
  local.writeUInt16LE(name.length, 26)
  const entry = Buffer.alloc(46)
  entry.writeUInt32LE(0x02014b50, 0)
  entry.writeUInt16LE(8, 10)
  entry.writeUInt32LE(packed.length, 20)
  entry.writeUInt32LE(10, 24)
  entry.writeUInt16LE(name.length, 28)
  const end = Buffer.alloc(22)
  end.writeUInt32LE(0x06054b50, 0)
  end.writeUInt16LE(1, 8)
  end.writeUInt16LE(1, 10)
  end.writeUInt32LE(entry.length + name.length, 12)
  end.writeUInt32LE(local.length + name.length + packed.length, 16)
  return Buffer.concat([local, name, packed, entry, name, end])
}
