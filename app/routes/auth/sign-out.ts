import { signOut } from '#app/modules/accounts/sign-in.server.ts'
import type { Route } from './+types/sign-out'

export async function action({ request }: Route.ActionArgs) {
  return signOut(request)
}
