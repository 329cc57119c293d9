// What the local mail catcher has taken instead of a mail server.
import { readdir, readFile } from 'node:fs/promises'
import { join } from 'node:path'
import PostalMime from 'postal-mime'
import { env } from '#app/env.server.ts'
import { AppError } from '#app/http/errors.ts'

const SHOWN = 100
const FILE = /^[\w-]+\.eml$/

function folder(): string {
  const kept = env.MAIL_CATCHER_FOLDER
  if (!kept) throw new AppError('not-found', 'A mail server is set; what it was given is with its receivers.')
  return kept
}

/** Caught e-mail, the latest first. */
export async function caughtMail() {
  const kept = folder()
  const names = (await readdir(kept)).filter((name) => FILE.test(name)).sort()
  return Promise.all(
    names
      .slice(-SHOWN)
      .reverse()
      .map(async (name) => {
        const mail = await PostalMime.parse(await readFile(join(kept, name)))
        return {
          name,
          to: mail.to?.map((to) => to.address ?? '').join(', ') ?? '',
          subject: mail.subject ?? '',
          text: (mail.text ?? '').trim(),
          at: mail.date ?? null,
        }
      }),
  )
}
