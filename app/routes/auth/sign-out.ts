import { visitorContext } from '#app/http/context.ts'
import { signOut } from '#app/modules/accounts/sign-in.server.ts'
import { actingOf } from '../acting.ts'
import type { Route } from './+types/sign-out'

export async function action({ request, context }: Route.ActionArgs) {
  return signOut(request, context.get(visitorContext) && actingOf(context))
}
