import { type Fault, faultLine } from '#engine/fault.ts'

/** The refusal of an input, with every fault found in it. */
export function invalid(what: string, faults: readonly Fault[]): Response {
  const message = `${what} has ${faults.length === 1 ? 'a fault' : `${faults.length} faults`}: ${faults.map(faultLine).join('. ')}.`
  return Response.json({ error: 'invalid', message, faults }, { status: 400 })
}
