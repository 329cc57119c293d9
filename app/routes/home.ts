// The bare address: to the projects, or to the sign-in.
import { redirect } from 'react-router'
import { visitorContext } from '#app/http/context.ts'
import type { Route } from './+types/home'

export function loader({ context }: Route.LoaderArgs) {
  return redirect(context.get(visitorContext) ? '/projects' : '/sign-in')
}
