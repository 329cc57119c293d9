// The settings of this process, read from its environment once, on first use.
import { type Purpose, type Role, readSettings, type Settings } from './settings.ts'

let read: Settings | undefined

function settings(): Settings {
  if (read) return read
  // As a worker needs least, this reading fails only for what is wrong, not for what another process needs.
  const reading = readSettings(process.env, 'worker')
  if (!reading.ok) throw new Error(`The settings are not usable:\n${reading.faults.join('\n')}`)
  read = reading.settings
  return read
}

function required<Name extends keyof Settings>(name: Name): NonNullable<Settings[Name]> {
  const value = settings()[name]
  if (value === undefined) throw new Error(`${name}: is not given, and this process needs it`)
  return value as NonNullable<Settings[Name]>
}

/** Reading a setting that was not given throws, except those typed `| undefined`. */
export const env = {
  get DATABASE_URL(): string {
    return required('DATABASE_URL')
  },
  get OIDC_ISSUER(): string {
    return required('OIDC_ISSUER')
  },
  get OIDC_CLIENT_ID(): string {
    return required('OIDC_CLIENT_ID')
  },
  get OIDC_CLIENT_SECRET(): string {
    return required('OIDC_CLIENT_SECRET')
  },
  /** Group claim -> role. */
  get ROLE_GROUPS(): Record<string, Role> {
    return required('ROLE_GROUPS')
  },
  get SMTP_URL(): string | undefined {
    return settings().SMTP_URL
  },
  get MAIL_FROM(): string {
    return settings().MAIL_FROM
  },
  /** The local mail catcher's folder; undefined where a mail server is given. */
  get MAIL_CATCHER_FOLDER(): string | undefined {
    return settings().MAIL_CATCHER_FOLDER
  },
  /** Origin people open, without a trailing slash. */
  get BASE_URL(): string {
    return required('BASE_URL')
  },
  get HOST(): string {
    return settings().HOST
  },
  get PORT(): number {
    return required('PORT')
  },
  get SESSION_SECRET(): string {
    return required('SESSION_SECRET')
  },
  /** undefined is one thread per core. */
  get WORKER_THREADS(): number | undefined {
    return settings().WORKER_THREADS
  },
  /** The identity provider is the local one: demo people may be offered. Never true away from loopback. */
  get LOCAL_DEMO(): boolean {
    return settings().LOCAL_DEMO
  },
  /** Cookies carry `Secure` unless people come over plain http, which only loopback is for. */
  get SECURE_COOKIES(): boolean {
    return required('BASE_URL').startsWith('https:')
  },
}

/** Ends the process with one line per fault when its settings do not fit what it is for. */
export function requireSettings(purpose: Exclude<Purpose, 'start'>): void {
  const reading = readSettings(process.env, purpose)
  if (reading.ok) {
    read = reading.settings
    return
  }
  for (const fault of reading.faults) process.stderr.write(`${fault}\n`)
  process.exit(2)
}
