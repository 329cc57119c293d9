import type { RouterContextProvider } from 'react-router'
import { addressContext, viewerContext } from '#app/http/context.ts'

/** Who acts, as modules want to know it for the audit trail. */
export function actingOf(context: Readonly<RouterContextProvider>) {
  const { personId, name } = context.get(viewerContext)
  return { personId, name, address: context.get(addressContext) }
}
