// The form's text with its history: typing on in one field is one step to undo, a choice is one, too.
import { useCallback, useEffect, useReducer, useRef } from 'react'
import type { UnitSystem } from '#engine/units.ts'
import { type Definition, definitionFromFields, type Fields, fieldsFromDefinition } from './form-fields.ts'

type History = { fields: Fields; past: { fields: Fields; by: string }[] }

type Change =
  | { kind: 'set'; changes: Record<string, string>; by: string }
  | { kind: 'undo' }
  | { kind: 'replace'; fields: Fields; keepHistory: boolean }

const STEPS = 200

export function historyAfter(history: History, change: Change): History {
  if (change.kind === 'undo') {
    const last = history.past.at(-1)
    return last ? { fields: last.fields, past: history.past.slice(0, -1) } : history
  }
  if (change.kind === 'replace') {
    const past = change.keepHistory ? [...history.past, { fields: history.fields, by: '' }] : []
    return { fields: change.fields, past }
  }
  const same = Object.entries(change.changes).every(([name, value]) => (history.fields[name] ?? '') === value)
  if (same) return history
  const typingOn = change.by !== '' && history.past.at(-1)?.by === change.by
  const past = typingOn
    ? history.past
    : [...history.past, { fields: history.fields, by: change.by }].slice(-STEPS)
  return { fields: { ...history.fields, ...change.changes }, past }
}

export function useFields(initial: Definition, units: UnitSystem) {
  const [history, dispatch] = useReducer(historyAfter, undefined, () => ({
    fields: fieldsFromDefinition(initial, units),
    past: [],
  }))
  // Another unit system shows the same study: text typed with its own unit stays, bare numbers keep their meaning.
  const shownIn = useRef(units)
  useEffect(() => {
    if (shownIn.current === units) return
    const definition = definitionFromFields(history.fields, shownIn.current)
    shownIn.current = units
    dispatch({ kind: 'replace', fields: fieldsFromDefinition(definition, units), keepHistory: false })
  }, [units, history.fields])

  return {
    fields: history.fields,
    canUndo: history.past.length > 0,
    set: useCallback(
      (name: string, value: string) => dispatch({ kind: 'set', changes: { [name]: value }, by: name }),
      [],
    ),
    setAll: useCallback((changes: Record<string, string>) => dispatch({ kind: 'set', changes, by: '' }), []),
    undo: useCallback(() => dispatch({ kind: 'undo' }), []),
    replace: useCallback(
      (definition: Definition) =>
        dispatch({
          kind: 'replace',
          fields: fieldsFromDefinition(definition, shownIn.current),
          keepHistory: true,
        }),
      [],
    ),
  }
}
