// The people of the local identity provider. They exist only with it, and it only on loopback.
export const DEMO_GROUPS = {
  'condenser-engineers': 'engineer',
  'condenser-leads': 'lead',
  'condenser-analysts': 'analyst',
  'condenser-administrators': 'administrator',
} as const

export const DEMO_PEOPLE = [
  { email: 'engineer@example.com', name: 'Engineer', groups: ['condenser-engineers'] },
  { email: 'lead@example.com', name: 'Lead', groups: ['condenser-leads'] },
  { email: 'analyst@example.com', name: 'Analyst', groups: ['condenser-analysts'] },
  { email: 'administrator@example.com', name: 'Administrator', groups: ['condenser-administrators'] },
] as const

/** Group claim to role, as ROLE_GROUPS spells it. */
export const DEMO_ROLE_GROUPS = Object.entries(DEMO_GROUPS)
  .map(([group, role]) => `${group}=${role}`)
  .join(',')
