// What each role may do within the projects it belongs to. Pure: pages use it to leave out what would be refused.
import type { Role } from '#drizzle/schema/person.ts'

export const PERMISSIONS = [
  'study.read',
  'study.edit',
  'study.run',
  'study.accept',
  'project.manage',
  'admin',
] as const
export type Permission = (typeof PERMISSIONS)[number]

const GRANTED: Record<Role, readonly Permission[]> = {
  analyst: ['study.read'],
  engineer: ['study.read', 'study.edit', 'study.run'],
  lead: ['study.read', 'study.edit', 'study.run', 'study.accept', 'project.manage'],
  administrator: PERMISSIONS,
}

export function can(role: Role, permission: Permission): boolean {
  return GRANTED[role].includes(permission)
}
