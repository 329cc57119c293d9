// A run as files: its stored columns, streamed.
import { PassThrough, Readable } from 'node:stream'
import { createReadableStreamFromReadable } from '@react-router/node'
import { AppError } from '#app/http/errors.ts'
import { readTable } from '#app/modules/points/column-copy.server.ts'
import type { PointFilters } from '#app/modules/points/point-types.ts'
import { columnsOfPoints, pointSheet, refinedBest } from '#app/modules/points/points.server.ts'
import { planOfRevision } from '#app/modules/runs/run-plan.server.ts'
import { getRun } from '#app/modules/runs/runs.server.ts'
import { getRevision, getStudy } from '#app/modules/studies/studies.server.ts'
import type { Run } from '#drizzle/schema/run.ts'
import { KEY_RESULTS } from '#engine/bundle/key-results.ts'
import { csvLines } from './csv.ts'
import { attachment } from './file-name.ts'
import type { ReportedPoint, StudyReport } from './report.ts'
import { WORKBOOK_POINTS, writeWorkbook } from './workbook.ts'

/** Everything a file of this run says. */
async function reportOfRun(runId: string): Promise<{ name: string; report: StudyReport }> {
  const run = await getRun(runId)
  const [study, revision, plan] = await Promise.all([
    getStudy(run.studyId),
    getRevision(run.revisionId),
    planOfRevision(run.revisionId),
  ])
  const best: ReportedPoint[] = []
  if (run.bestPoint !== null) {
    const { case: kase, result, band } = await pointSheet(runId, run.bestPoint)
    best.push({ label: 'Best point', point: run.bestPoint, case: kase, result, band })
    const refined = await refinedBest(runId)
    if (refined?.improved === true)
      best.push({
        label: 'Refined point',
        point: null,
        case: refined.case,
        result: refined.result,
        band: refined.band,
        statement: typeof refined.statement === 'string' ? refined.statement : undefined,
      })
  }
  const when = (date: Date | null) => date?.toISOString() ?? ''
  return {
    name: study.name,
    report: {
      plan,
      invented: study.invented,
      origin: [
        ['Study', study.name],
        ['Revision', String(revision.number)],
        ['Run', run.id],
        ['State', run.state],
        ['Planned', when(run.plannedAt)],
        ['Ended', when(run.endedAt)],
        ['Engine version', run.engineVersion],
        ['Content hash (SHA-256)', run.contentHash ?? 'none: the run did not finish'],
        ['Units', 'SI: K, Pa, W, m, kg, s'],
      ],
      points: run.points,
      table: (first, count) => tableOf(run, first, count),
      best,
    },
  }
}

/** Key results of any stretch of points, cut out of the chunks that hold it. */
async function tableOf(run: Run, first: number, count: number): Promise<Float64Array> {
  const fromChunk = Math.floor(first / run.chunkPoints)
  const toChunk = Math.floor((first + count - 1) / run.chunkPoints)
  const begin = fromChunk * run.chunkPoints
  const held = Math.min((toChunk + 1) * run.chunkPoints, run.points) - begin
  const whole = await readTable(run, fromChunk, toChunk, begin, held)
  if (held === count) return whole
  const cut = new Float64Array(KEY_RESULTS.length * count)
  for (let c = 0; c < KEY_RESULTS.length; c++) {
    const at = c * held + (first - begin)
    cut.set(whole.subarray(at, at + count), c * count)
  }
  return cut
}

const NO_STORE = { 'Cache-Control': 'no-store' }

export async function workbookResponse(runId: string): Promise<Response> {
  const { name, report } = await reportOfRun(runId)
  if (report.points > WORKBOOK_POINTS)
    throw new AppError(
      'too-large',
      `A workbook takes at most ${WORKBOOK_POINTS} points and this run has ${report.points}; take the CSV file.`,
    )
  const stream = new PassThrough()
  // Whoever stops the download ends the writing; that is no fault of ours.
  stream.on('error', () => {})
  writeWorkbook(stream, report).catch((error) => stream.destroy(error))
  return new Response(createReadableStreamFromReadable(stream), {
    headers: {
      'Content-Type': 'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet',
      'Content-Disposition': attachment(name, 'xlsx'),
      ...NO_STORE,
    },
  })
}

/** All points, or those that pass the filters. */
export async function csvResponse(runId: string, filters: PointFilters = {}): Promise<Response> {
  const { name, report } = await reportOfRun(runId)
  const only = isFilter(filters) ? await markOf(runId, report.points, filters) : undefined
  return new Response(createReadableStreamFromReadable(Readable.from(csvLines({ ...report, only }))), {
    headers: {
      'Content-Type': 'text/csv; charset=utf-8',
      'Content-Disposition': attachment(name, 'csv'),
      ...NO_STORE,
    },
  })
}

const isFilter = ({ outcome, meetingLimits, ranges = {}, inputs = {} }: PointFilters): boolean =>
  outcome !== undefined ||
  meetingLimits === true ||
  Object.keys(ranges).length > 0 ||
  Object.keys(inputs).length > 0

async function markOf(runId: string, points: number, filters: PointFilters): Promise<Uint8Array> {
  const { points: found } = await columnsOfPoints(runId, [], filters)
  const mark = new Uint8Array(points)
  for (const point of found) mark[point] = 1
  return mark
}
