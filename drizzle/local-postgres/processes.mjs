// Running programs, finding ports and recognising processes, with Node's built-ins only.
import { spawn } from 'node:child_process'
import { mkdirSync, readFileSync, readlinkSync, rmSync, writeFileSync } from 'node:fs'
import { createServer } from 'node:net'
import { dirname } from 'node:path'

/** @type {Set<import('node:child_process').ChildProcess>} */
const running = new Set()

/**
 * Runs a program to its end. Its output goes to standard error, or is collected when `quiet`.
 *
 * `silent` ignores the output altogether: needed for programs that leave a daemon behind, which would
 * otherwise hold the pipe open.
 *
 * @param {string} command
 * @param {string[]} args
 * @param {{ cwd?: string, env?: NodeJS.ProcessEnv, uid?: number, gid?: number, output?: 'show' | 'quiet' | 'silent' }} [options]
 * @returns {Promise<{ code: number, output: string }>}
 */
export function run(command, args, options = {}) {
  const { cwd = '/', env = process.env, uid, gid, output = 'show' } = options
  return new Promise((resolve) => {
    const child = spawn(command, args, {
      cwd,
      env,
      ...(uid === undefined ? {} : { uid, gid }),
      detached: true,
      stdio: [
        'ignore',
        output === 'show' ? 2 : output === 'quiet' ? 'pipe' : 'ignore',
        output === 'show' ? 2 : output === 'quiet' ? 'pipe' : 'ignore',
      ],
    })
    running.add(child)
    let text = ''
    child.stdout?.on('data', (data) => {
      text += data
    })
    child.stderr?.on('data', (data) => {
      text += data
    })
    child.on('error', (error) => {
      running.delete(child)
      resolve({ code: 127, output: error.message })
    })
    child.on('close', (code, signal) => {
      running.delete(child)
      resolve({ code: code ?? (signal ? 128 : 1), output: text })
    })
  })
}

/** Ends what `run` started and has not ended yet, with everything it started in turn. */
export function stopRunning() {
  for (const child of running) {
    try {
      process.kill(-(/** @type {number} */ (child.pid)), 'SIGTERM')
    } catch {
      // It ended meanwhile.
    }
  }
}

/** Passes SIGTERM, SIGINT and SIGHUP on to the programs under way, then ends. */
export function endOnSignal() {
  for (const [signal, code] of /** @type {const} */ ([
    ['SIGINT', 130],
    ['SIGTERM', 143],
    ['SIGHUP', 129],
  ])) {
    process.once(signal, () => {
      stopRunning()
      process.exit(code)
    })
  }
}

/**
 * The wanted port when it is free on the host, otherwise null.
 * @param {number} port 0 asks for any free port
 * @param {string} [host]
 * @returns {Promise<number | null>}
 */
export function freePort(port, host = '127.0.0.1') {
  return new Promise((resolve) => {
    const probe = createServer()
    probe.unref()
    probe.on('error', () => resolve(null))
    probe.listen({ port, host, exclusive: true }, () => {
      const address = probe.address()
      probe.close(() => resolve(address && typeof address === 'object' ? address.port : null))
    })
  })
}

/**
 * The first free port from `first` on, or any free one when the twenty from there are taken.
 * @param {number} first
 * @param {string} [host]
 */
export async function firstFreePort(first, host = '127.0.0.1') {
  for (let port = first; port < first + 20; port += 1) {
    if (await freePort(port, host)) return port
  }
  const any = await freePort(0, host)
  if (!any) throw new Error(`No free port on ${host}.`)
  return any
}

/**
 * Distinguishes a process from a later one with the same id. Null when there is no such process.
 * @param {number} pid
 * @returns {string | null}
 */
export function processMark(pid) {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, 'utf8')
    // After the command's closing bracket: state is field 3, the start time field 22.
    const fields = stat.slice(stat.lastIndexOf(')') + 2).split(' ')
    return fields[0] === 'Z' ? null : `${pid}:${fields[19]}`
  } catch {
    return null
  }
}

/**
 * The folder a process works in, or null when there is no such process or it is another user's.
 * @param {number} pid
 */
export function processFolder(pid) {
  try {
    return readlinkSync(`/proc/${pid}/cwd`)
  } catch {
    return null
  }
}

/**
 * Takes a lock file for this process. Returns null, or what the living holder wrote into it.
 * A lock whose holder died, however it died, is free.
 * @param {string} file
 * @param {Record<string, unknown>} [content]
 * @returns {Record<string, unknown> | null}
 */
export function takeLock(file, content = {}) {
  mkdirSync(dirname(file), { recursive: true })
  const text = JSON.stringify({ ...content, process: processMark(process.pid) })
  for (let attempt = 0; attempt < 5; attempt += 1) {
    try {
      writeFileSync(file, text, { flag: 'wx', mode: 0o600 })
      return null
    } catch (error) {
      if (/** @type {NodeJS.ErrnoException} */ (error).code !== 'EEXIST') throw error
    }
    const holder = readLock(file)
    if (holder) return holder
    rmSync(file, { force: true })
  }
  throw new Error(`The lock ${file} could not be taken; remove the file when nothing uses it.`)
}

/**
 * What the living holder of a lock wrote into it, or null when nobody holds it.
 * @param {string} file
 * @returns {Record<string, unknown> | null}
 */
export function readLock(file) {
  try {
    const holder = JSON.parse(readFileSync(file, 'utf8'))
    const pid = Number(String(holder.process).split(':')[0])
    return holder.process && processMark(pid) === holder.process ? holder : null
  } catch {
    return null
  }
}

/** @param {number} milliseconds */
export const pause = (milliseconds) => new Promise((resolve) => setTimeout(resolve, milliseconds))

/** Tells the person what is going on; standard output is kept for the result. @param {string} line */
export const say = (line) => void process.stderr.write(`${line}\n`)

/** A problem the person can act on: shown as it is, without a stack. */
export class SetUpError extends Error {}
