// Takes the e-mail that would go out, when no mail server is configured, and keeps it as files to look at.
import { mkdirSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { SMTPServer } from 'smtp-server'

export type MailCatcher = { url: string; stop: () => Promise<void> }

/** A message larger than this is refused, as a mail server would. */
const LARGEST = 5_000_000

export function startMailCatcher({ port, folder }: { port: number; folder: string }): Promise<MailCatcher> {
  mkdirSync(folder, { recursive: true })
  let received = 0
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    size: LARGEST,
    logger: false,
    onData(stream, _session, done) {
      const parts: Buffer[] = []
      stream.on('data', (part: Buffer) => parts.push(part))
      stream.on('error', done)
      stream.on('end', () => {
        if (stream.sizeExceeded) return done(new Error('The message is larger than 5 MB.'))
        received += 1
        const name = `${new Date().toISOString().replace(/[:.]/g, '-')}-${received}.eml`
        writeFileSync(join(folder, name), Buffer.concat(parts))
        done()
      })
    },
  })
  server.on('error', () => {
    // A client that hangs up mid-message is its own loss.
  })
  return new Promise((resolve, reject) => {
    server.once('error', reject)
    server.listen(port, '127.0.0.1', () =>
      resolve({
        url: `smtp://127.0.0.1:${port}`,
        stop: () => new Promise<void>((stopped) => server.close(() => stopped())),
      }),
    )
  })
}
