// Off to the identity provider.
import { addressContext } from '#app/http/context.ts'
import { signIn } from '#app/modules/accounts/sign-in.server.ts'
import type { Route } from './+types/start'

export async function action({ request, context }: Route.ActionArgs) {
  return signIn(request, context.get(addressContext))
}
