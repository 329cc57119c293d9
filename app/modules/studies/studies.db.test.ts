import { readFileSync } from 'node:fs'
import { desc, eq } from 'drizzle-orm'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { db, pool } from '#app/db.server.ts'
import { createProject } from '#app/modules/projects/projects.server.ts'
import { auditEntry, person, studyRevision } from '#drizzle/schema/index.ts'
import {
  archiveStudy,
  copyStudy,
  createStudy,
  discardDraft,
  getDraft,
  getStudy,
  keepRevision,
  latestRevision,
  listStudies,
  readStudyFile,
  renameStudy,
  restoreStudy,
  saveDraft,
} from './studies.server.ts'

const example = JSON.parse(
  readFileSync(new URL('../../../studies/ammonia-condenser.json', import.meta.url), 'utf8'),
)
let acting: { personId: string; name: string; address: string }
let colleague: typeof acting
let projectId = ''
beforeAll(async () => {
  const made = await db
    .insert(person)
    .values([
      { name: 'Engineer', email: 'an-engineer@example.com', role: 'engineer' },
      { name: 'Colleague', email: 'a-colleague@example.com', role: 'engineer' },
    ])
    .returning()
  ;[acting, colleague] = made.map(({ id, name }) => ({ personId: id, name, address: '' }))
  projectId = (await createProject('Studies', '', acting)).id
})
afterAll(() => pool.end())

const make = (name: string, definition: Record<string, unknown> = example) =>
  createStudy(projectId, { name, definition }, acting)
const names = async (options?: Parameters<typeof listStudies>[1]) =>
  (await listStudies(projectId, options)).map(({ name }) => name)
const acts = async (studyId: string) =>
  db.select().from(auditEntry).where(eq(auditEntry.subjectId, studyId)).orderBy(desc(auditEntry.id))

describe('the list', () => {
  it('has the latest changed first and finds names by any part, signs of the pattern language too', async () => {
    const first = await make('Tubes 100 % copper')
    await make('Tubes_steel')
    await renameStudy(first.id, 'Tubes 100 % brass', acting)
    expect((await names()).slice(0, 2)).toEqual(['Tubes 100 % brass', 'Tubes_steel'])
    expect(await names({ search: ' TUBES ' })).toHaveLength(2)
    expect(await names({ search: '0 %' })).toEqual(['Tubes 100 % brass'])
    expect(await names({ search: 's_s' })).toEqual(['Tubes_steel'])
    expect(await names({ search: '\\' })).toEqual([])
    expect(await names({ search: '\0' })).toHaveLength((await names()).length)
  })

  it('leaves out what is archived, until it is restored', async () => {
    const { id } = await make('To be archived')
    await archiveStudy(id, acting)
    expect(await names()).not.toContain('To be archived')
    expect(await names({ archived: true })).toEqual(['To be archived'])
    expect(await keepRevision(id, example, acting).catch((error) => error)).toMatchObject({
      code: 'conflict',
    })
    await restoreStudy(id, acting)
    expect(await names()).toContain('To be archived')
    expect((await acts(id)).map(({ act }) => act)).toEqual(['study.restore', 'study.archive', 'study.create'])
  })
})

describe('a name', () => {
  it('is tidied, changed, and the trail says from what to what', async () => {
    const { id } = await make(' A  name ')
    await renameStudy(id, 'Another name', acting)
    expect((await getStudy(id)).name).toBe('Another name')
    expect((await acts(id))[0]).toMatchObject({
      act: 'study.rename',
      before: { name: 'A name' },
      after: { name: 'Another name' },
      projectId,
    })
  })

  it.each(['', ' \n ', 'x'.repeat(201), 'a\0b'])('is not %j', async (name) => {
    const { id } = await make('Keeps its name')
    await expect(renameStudy(id, name, acting)).rejects.toMatchObject({ code: 'invalid' })
    await expect(make(name)).rejects.toMatchObject({ code: 'invalid' })
    expect(await acts(id)).toHaveLength(1)
  })
})

describe('a copy', () => {
  it('has the latest revision’s definition, says what it is of, and takes no run along', async () => {
    const { id } = await make('Original')
    await keepRevision(id, { ...example, name: 'Original' }, acting)
    const copy = await copyStudy(id, colleague)
    expect(copy).toMatchObject({ name: 'Original (copy)', origin: 'copy of Original', projectId })
    expect((await getDraft(copy.id, colleague.personId))?.definition).toEqual({
      ...example,
      name: 'Original (copy)',
    })
    expect(await latestRevision(copy.id)).toBeNull()
  })

  it('of the longest name fits too', async () => {
    const { id } = await make(`${'x'.repeat(192)}🧊 and s`)
    expect((await copyStudy(id, acting)).name).toBe(`${'x'.repeat(192)} (copy)`)
  })
})

describe('a draft', () => {
  it('is kept as typed, valid or not, for each person apart', async () => {
    const { id } = await make('Drafts', {})
    const typed = { name: 'Drafts', case: { duty: 'a lot' }, 'no field of ours': [1, 'two', null] }
    expect(await saveDraft(id, acting.personId, typed, 1)).toMatchObject({ saved: true, version: 2 })
    expect((await getDraft(id, acting.personId))?.definition).toEqual(typed)
    expect(await getDraft(id, colleague.personId)).toBeNull()
    expect(await saveDraft(id, colleague.personId, {}, 0)).toMatchObject({ saved: true, version: 1 })
  })

  it('is not overwritten by a tab that has not seen its latest version', async () => {
    const { id } = await make('Two tabs', {})
    await saveDraft(id, acting.personId, { from: 'one tab' }, 1)
    expect(await saveDraft(id, acting.personId, { from: 'the other' }, 1)).toMatchObject({
      saved: false,
      version: 2,
    })
    expect(await saveDraft(id, acting.personId, { from: 'a third' }, 0)).toMatchObject({ saved: false })
    expect((await getDraft(id, acting.personId))?.definition).toEqual({ from: 'one tab' })
  })

  it('saved by two tabs at once is that of one of them, and the other is told', async () => {
    const { id } = await make('At once', {})
    const answers = await Promise.all(
      ['a', 'b', 'c'].map((from) => saveDraft(id, acting.personId, { from }, 1)),
    )
    expect(answers.filter(({ saved }) => saved)).toHaveLength(1)
    expect(answers.map(({ version }) => version)).toEqual([2, 2, 2])
  })

  it('that was discarded is not brought back by a tab that still shows it', async () => {
    const { id } = await make('Discarded', {})
    await discardDraft(id, acting.personId)
    expect(await saveDraft(id, acting.personId, { from: 'an old tab' }, 1)).toMatchObject({
      saved: false,
      version: 0,
    })
    expect(await getDraft(id, acting.personId)).toBeNull()
  })

  it('is refused with its reason when it cannot be stored', async () => {
    const { id } = await make('Refused', {})
    const save = (definition: Record<string, unknown>) => saveDraft(id, acting.personId, definition, 1)
    await expect(save({ long: 'x'.repeat(2_000_001) })).rejects.toMatchObject({ code: 'too-large' })
    await expect(save({ name: 'a\0b' })).rejects.toMatchObject({ code: 'invalid' })
    await expect(save({ name: '\ud800' })).rejects.toMatchObject({ code: 'invalid' })
    expect(await getDraft(id, acting.personId)).toMatchObject({ version: 1 })
  })
})

describe('a revision', () => {
  it('is added for a changed definition only, takes its name over and the draft away', async () => {
    const { id } = await make('Revised')
    const first = await keepRevision(id, { ...example, name: 'Revised once' }, acting)
    expect(first).toMatchObject({ ok: true, isNew: true, revision: { number: 1 } })
    expect((await getStudy(id)).name).toBe('Revised once')
    expect(await getDraft(id, acting.personId)).toBeNull()
    const turned = Object.fromEntries(Object.entries({ ...example, name: 'Revised once' }).reverse())
    expect(await keepRevision(id, turned, acting)).toMatchObject({ isNew: false, revision: { number: 1 } })
    expect(
      await keepRevision(id, { ...example, name: 'Revised once', objective: 'tubeMass' }, acting),
    ).toMatchObject({ isNew: true, revision: { number: 2 } })
    expect((await acts(id))[0]).toMatchObject({
      act: 'study.revise',
      before: { revision: 1 },
      after: { revision: 2 },
    })
  })

  it('is not made of what cannot run: each fault names field, problem and remedy', async () => {
    const { id } = await make('Faulty')
    const faulty = { ...example, case: { ...example.case, fluid: 'unobtainium' }, objective: 'beauty' }
    const kept = await keepRevision(id, faulty, acting)
    expect(kept.ok).toBe(false)
    const faults = kept.ok ? [] : kept.faults
    expect(faults.map(({ path }) => path)).toEqual(expect.arrayContaining(['case.fluid', 'objective']))
    for (const { problem, remedy } of faults) expect(problem.length && remedy.length).toBeGreaterThan(0)
    expect(await latestRevision(id)).toBeNull()
    expect(await getDraft(id, acting.personId)).not.toBeNull()
  })

  it('kept by two at once has two numbers or is one', async () => {
    const { id } = await make('Kept at once')
    await Promise.all(
      ['tubeMass', 'outsideArea', 'tubeMass'].map((objective) =>
        keepRevision(id, { ...example, name: 'Kept at once', objective }, acting),
      ),
    )
    const kept = await db.select().from(studyRevision).where(eq(studyRevision.studyId, id))
    const numbers = kept.map(({ number }) => number).sort()
    expect(numbers).toEqual(numbers.map((_, i) => i + 1))
    expect(kept.length).toBeGreaterThanOrEqual(2)
  })
})

it.each([
  ['', /not JSON/],
  ['{"name": ', /not JSON/],
  ['[]', /holds no study/],
  ['null', /holds no study/],
  ['"text"', /holds no study/],
  [`"${'x'.repeat(2_000_001)}"`, /larger than 2 MB/],
])('a study file of %.20j is refused with its reason', (text, reason) => {
  const read = readStudyFile(text)
  expect(read.ok ? '' : read.problem).toMatch(reason)
})
