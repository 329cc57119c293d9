// The form's state as its fields see it: text by field name, what is wrong where, and what there is to choose from.
import { createContext, useContext } from 'react'
import type { UnitSystem } from '#engine/units.ts'
import type { Fields } from './form-fields.ts'
import type { FormOptions } from './options.ts'

export type FormState = {
  fields: Fields
  set: (name: string, value: string) => void
  /** Several at once, undone as one step. */
  setAll: (changes: Record<string, string>) => void
  /** What is wrong in a field that was left or submitted. */
  fault: (name: string) => string | undefined
  /** The field was left: from now on its fault is shown. */
  leave: (name: string) => void
  units: UnitSystem
  options: FormOptions
  disabled: boolean
}

export const FormContext = createContext<FormState | null>(null)

export function useForm(): FormState {
  const state = useContext(FormContext)
  if (!state) throw new Error('a field of the Define form stands outside the form')
  return state
}
