// Signing in and out: the strategy, the person it leads to, and their session.
import * as oidc from 'openid-client'
import { redirect } from 'react-router'
import { Authenticator } from 'remix-auth'
import { db } from '#app/db.server.ts'
import { env } from '#app/env.server.ts'
import { AppError } from '#app/http/errors.ts'
import { recordAct } from '#app/modules/audit/audit.server.ts'
import { cookie, readCookie } from './cookies.server.ts'
import { personOfIdentity, roleOfGroups } from './people.server.ts'
import { provider } from './provider.server.ts'
import { beginSession, endSession, LONGEST_SECONDS } from './sessions.server.ts'
import { OpenIdConnectStrategy } from './strategy.server.ts'

export { localPath } from './strategy.server.ts'

type Session = { token: string; returnTo: string }

const authenticator = new Authenticator<Session>()
authenticator.use(
  new OpenIdConnectStrategy<Session>(async ({ request, identity, idToken, returnTo }) => {
    const role = roleOfGroups(identity.groups, env.ROLE_GROUPS)
    const signedIn = await personOfIdentity(identity, role)
    if (role === null)
      throw new AppError(
        'forbidden',
        `${identity.name} is known to the identity provider, and none of their groups has a role in Rowfall. Ask an administrator to map one.`,
      )
    const earlier = readCookie(request, 'session')
    if (earlier) await endSession(earlier)
    const token = await beginSession(signedIn.id, {
      userAgent: request.headers.get('user-agent') ?? '',
      idToken,
    })
    await recordAct(
      db,
      { personId: signedIn.id, name: signedIn.name, address: '' },
      { act: 'person.signIn', subject: 'person', subjectId: signedIn.id, projectId: null, after: { role } },
    )
    return { token, returnTo }
  }),
)

/** Begins (POST) or ends (GET, the provider's answer) a sign-in; the response to send. */
export async function signIn(request: Request): Promise<Response> {
  const { token, returnTo } = await authenticator.authenticate('openid-connect', request)
  const headers = new Headers()
  headers.append('Set-Cookie', cookie('session', token, LONGEST_SECONDS))
  headers.append('Set-Cookie', cookie('flow', '', 0))
  return redirect(returnTo, { headers })
}

/** Ends the session here and, where the provider can, there. */
export async function signOut(request: Request): Promise<Response> {
  const token = readCookie(request, 'session')
  const ended = token ? await endSession(token) : { idToken: null }
  const headers = { 'Set-Cookie': cookie('session', '', 0) }
  const home = '/sign-in?signedOut=1'
  if (ended.idToken === null) return redirect(home, { headers })
  try {
    const config = await provider()
    if (!config.serverMetadata().end_session_endpoint) return redirect(home, { headers })
    const url = oidc.buildEndSessionUrl(config, {
      id_token_hint: ended.idToken,
      post_logout_redirect_uri: `${env.BASE_URL}${home}`,
    })
    return redirect(url.href, { headers })
  } catch {
    // Signed out here; that the provider did not answer changes nothing about it.
    return redirect(home, { headers })
  }
}
