// The words of an e-mail, as text and as HTML.
import type { Letter } from '#drizzle/schema/message.ts'

export function composeMail(happening: {
  sentence: string
  href: string
  details?: readonly string[]
}): Letter {
  return {
    subject: `Rowfall: ${happening.sentence}`.replace(/\s+/g, ' ').slice(0, 180),
    paragraphs: [happening.sentence, ...(happening.details ?? [])],
    href: happening.href,
  }
}

/** Both forms of a letter, with its links made whole. `stops` says what the stop link switches off. */
export function writeOut(
  letter: Letter,
  { baseUrl, stopUrl, stops }: { baseUrl: string; stopUrl: string; stops: string },
): { text: string; html: string } {
  const page = `${baseUrl}${letter.href}`
  const settings = `${baseUrl}/account`
  const text = [
    ...letter.paragraphs,
    page,
    '--',
    `No more e-mail about ${stops}: ${stopUrl}`,
    `All e-mail settings: ${settings}`,
  ].join('\n\n')
  const html = `<!doctype html><html lang="en"><body style="font-family:Manrope,system-ui,sans-serif;font-size:15px;line-height:1.5">
${letter.paragraphs.map((words) => `<p>${escaped(words).replaceAll('\n', '<br>')}</p>`).join('\n')}
<p><a href="${escaped(page)}">Open it in Rowfall</a></p>
<p style="font-size:13px"><a href="${escaped(stopUrl)}">No more e-mail about ${escaped(stops)}</a> · <a href="${escaped(settings)}">All e-mail settings</a></p>
</body></html>`
  return { text, html }
}

const ENTITIES: Record<string, string> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
  "'": '&#39;',
}

const escaped = (text: string) => text.replace(/[&<>"']/g, (sign) => ENTITIES[sign])
