// Signing in and out: the strategy, the person it leads to, and their session.
import * as oidc from 'openid-client'
import { redirect } from 'react-router'
import { Authenticator } from 'remix-auth'
import { db } from '#app/db.server.ts'
import { env } from '#app/env.server.ts'
import { AppError } from '#app/http/errors.ts'
import { type Acting, recordAct } from '#app/modules/audit/audit.server.ts'
import { cookie, readCookie } from './cookies.server.ts'
import { personOfIdentity, roleOfGroups } from './people.server.ts'
import { provider } from './provider.server.ts'
import { roleMap } from './roles.server.ts'
import { beginSession, endSession, LONGEST_SECONDS } from './sessions.server.ts'
import { OpenIdConnectStrategy, type SignedIn } from './strategy.server.ts'

export { localPath } from './strategy.server.ts'

const authenticator = new Authenticator<SignedIn>()
authenticator.use(new OpenIdConnectStrategy<SignedIn>(async (signedIn) => signedIn))

/** Begins (POST) or ends (GET, the provider's answer) a sign-in; the response to send. */
export async function signIn(request: Request, address: string): Promise<Response> {
  const { identity, idToken, returnTo } = await authenticator.authenticate('openid-connect', request)
  const { token, removed } = await db.transaction(async (tx) => {
    const role = roleOfGroups(identity.groups, await roleMap(tx))
    const { id, name, removedAt } = await personOfIdentity(tx, identity, role)
    const removed = removedAt !== null
    const refused = role === null || removed
    const earlier = readCookie(request, 'session')
    if (earlier) await endSession(earlier, tx)
    await recordAct(
      tx,
      { personId: id, name, address },
      {
        act: refused ? 'person.signInRefused' : 'person.signIn',
        subject: 'person',
        subjectId: id,
        projectId: null,
        after: { role, ...(removed ? { removed } : {}) },
      },
    )
    if (refused) return { token: null, removed }
    const userAgent = request.headers.get('user-agent') ?? ''
    return { token: await beginSession(id, { userAgent, idToken }, tx), removed }
  })
  if (token === null)
    throw new AppError(
      'forbidden',
      removed
        ? `An administrator has removed ${identity.name} from Rowfall. Ask one if that should not be.`
        : `${identity.name} is known to the identity provider, and none of their groups has a role in Rowfall. Ask an administrator to map one.`,
    )
  const headers = new Headers()
  headers.append('Set-Cookie', cookie('session', token, LONGEST_SECONDS))
  headers.append('Set-Cookie', cookie('flow', '', 0))
  return redirect(returnTo, { headers })
}

/** Ends the session here and, where the provider can, there. */
export async function signOut(request: Request, acting: Acting | null): Promise<Response> {
  const token = readCookie(request, 'session')
  const ended = token ? await close(token, acting) : null
  const headers = { 'Set-Cookie': cookie('session', '', 0) }
  const home = '/sign-in?signedOut=1'
  if (!ended?.idToken) return redirect(home, { headers })
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

function close(token: string, acting: Acting | null) {
  return db.transaction(async (tx) => {
    const ended = await endSession(token, tx)
    if (ended && acting)
      await recordAct(tx, acting, {
        act: 'person.signOut',
        subject: 'person',
        subjectId: ended.personId,
        projectId: null,
      })
    return ended
  })
}
