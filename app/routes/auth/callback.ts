// Back from the identity provider.
import { addressContext } from '#app/http/context.ts'
import { signIn } from '#app/modules/accounts/sign-in.server.ts'
import type { Route } from './+types/callback'

export async function loader({ request, context }: Route.LoaderArgs) {
  return signIn(request, context.get(addressContext))
}
