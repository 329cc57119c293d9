// Back from the identity provider.
import { signIn } from '#app/modules/accounts/sign-in.server.ts'
import type { Route } from './+types/callback'

export async function loader({ request }: Route.LoaderArgs) {
  return signIn(request)
}
