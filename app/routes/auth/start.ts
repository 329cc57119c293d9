// Off to the identity provider.
import { signIn } from '#app/modules/accounts/sign-in.server.ts'
import type { Route } from './+types/start'

export async function action({ request }: Route.ActionArgs) {
  return signIn(request)
}
