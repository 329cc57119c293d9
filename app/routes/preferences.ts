// A person's unit system and theme, set from any page and back to it.
import { redirect } from 'react-router'
import { z } from 'zod'
import { readForm } from '#app/http/body.ts'
import { viewerContext } from '#app/http/context.ts'
import { AppError } from '#app/http/errors.ts'
import { setPreferences } from '#app/modules/accounts/people.server.ts'
import { localPath } from '#app/modules/accounts/sign-in.server.ts'
import { THEMES, UNIT_SYSTEMS } from '#drizzle/schema/person.ts'
import type { Route } from './+types/preferences'

const choice = z.object({ units: z.enum(UNIT_SYSTEMS).optional(), theme: z.enum(THEMES).optional() })

export async function action({ request, context }: Route.ActionArgs) {
  const form = await readForm(request)
  const read = choice.safeParse({
    units: form.get('units') ?? undefined,
    theme: form.get('theme') ?? undefined,
  })
  if (!read.success) throw new AppError('invalid', 'Units are si or us, the theme is system, light or dark.')
  await setPreferences(context.get(viewerContext).personId, read.data)
  return redirect(localPath(form.get('returnTo')))
}
