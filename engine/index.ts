/** The engine's public surface. */
export { KEY_RESULT_INDEX, KEY_RESULTS, OUTCOME_INDEX, OUTCOMES } from './bundle/key-results.ts'
export { PointSolver, type SweepPath } from './bundle/point-solver.ts'
export {
  type Case,
  type CaseInput,
  caseSchema,
  type Fault,
  faultLine,
  METHOD_CHOICES,
  parseCase,
} from './case.ts'
export type { Card } from './correlations/card.ts'
export { cards, findCard, findCards } from './correlations/registry.ts'
export { evaluate } from './evaluate.ts'
export { coolants, findCoolant, findFluid, fluids } from './fluids/index.ts'
export { NOTE_CODES, NOTE_LABELS, type Note, type NoteCode, noteCodes, type Severity } from './notes.ts'
export type { DrainageMode, PassResult, Result, RowResult } from './result.ts'
export { ENGINE_VERSION } from './version.ts'
