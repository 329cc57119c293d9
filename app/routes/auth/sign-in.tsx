// Sign-in: what Rowfall is for, a real bundle as its picture, and the way in.
import { Form, redirect } from 'react-router'
import { BundleThumbnail } from '#app/components/bundle-drawing/bundle-drawing.tsx'
import { bundleGeometry } from '#app/components/bundle-drawing/layout.ts'
import { Mark } from '#app/components/shell/mark.tsx'
import { Button } from '#app/components/ui/button.tsx'
import { MarginNote } from '#app/components/ui/margin-note.tsx'
import { env } from '#app/env.server.ts'
import { visitorContext } from '#app/http/context.ts'
import { localPath } from '#app/modules/accounts/sign-in.server.ts'
import { parseCase } from '#engine/case.ts'
import { evaluate } from '#engine/evaluate.ts'
import { formatQuantity } from '#engine/units.ts'
import type { Route } from './+types/sign-in'

export const meta: Route.MetaFunction = () => [
  { title: 'Sign in · Rowfall' },
  { name: 'description', content: 'Rowfall settles the tube bundle of a condenser before anyone draws it.' },
]

const DEMO_PEOPLE = [
  { role: 'Engineer', email: 'engineer@example.com', does: 'defines, runs and explores studies' },
  { role: 'Lead', email: 'lead@example.com', does: 'does all that, and decides on projects and members' },
  { role: 'Analyst', email: 'analyst@example.com', does: 'reads, compares and exports' },
  {
    role: 'Administrator',
    email: 'administrator@example.com',
    does: 'may do everything in every project of theirs',
  },
]

/** The picture: a refrigerant condenser in which every row works under what the rows above let fall. */
const PICTURE = {
  fluid: 'r134a',
  saturationTemperature: '40 degC',
  duty: '300 kW',
  drive: {
    kind: 'coolant',
    coolant: 'water',
    inletTemperature: '30 degC',
    velocity: 1.5,
    foulingResistance: 1.76e-4,
  },
  tube: {
    outsideDiameter: '19.05 mm',
    wallThickness: '1.245 mm',
    material: 'copper',
    surface: { kind: 'plain' },
  },
  bundle: { layout: 'triangular30', pitchRatio: 1.25, rows: 12, tubesPerRow: 12, passes: 4 },
}

let drawn: ReturnType<typeof draw> | undefined

function draw() {
  const parsed = parseCase(PICTURE)
  if (!parsed.ok) throw new Error(parsed.faults.map(({ path, problem }) => `${path} ${problem}`).join('; '))
  const { rows } = evaluate(parsed.case)
  return {
    geometry: bundleGeometry(parsed.case),
    rows,
    first: rows[0].coefficient,
    last: rows[rows.length - 1].coefficient,
  }
}

export function loader({ request, context }: Route.LoaderArgs) {
  const { searchParams } = new URL(request.url)
  const returnTo = localPath(searchParams.get('returnTo'))
  if (context.get(visitorContext)) throw redirect(returnTo)
  drawn ??= draw()
  return {
    returnTo,
    signedOut: searchParams.has('signedOut'),
    people: env.LOCAL_DEMO ? DEMO_PEOPLE : null,
    picture: drawn,
  }
}

export default function SignIn({ loaderData }: Route.ComponentProps) {
  const { returnTo, signedOut, people, picture } = loaderData
  const per = (value: number | null) => formatQuantity(value, 'heatTransferCoefficient', 'si', { digits: 3 })
  return (
    <main id="main" className="grid min-h-dvh lg:grid-cols-[minmax(0,1fr)_28rem]">
      <div className="flex flex-col justify-between gap-8 px-6 py-8 sm:px-12 lg:py-12">
        <p className="flex items-center gap-2.5 text-lead font-extrabold">
          <Mark />
          Rowfall
        </p>
        <div className="max-w-[44rem]">
          <p className="text-display font-bold leading-tight tracking-tight">
            Each row drains onto the next. Find the bundle that still works under it.
          </p>
          <p className="mt-3 max-w-[56ch] text-lead text-soft">
            Sweep tube size, rows, layout and fluid; find the least area that meets every limit; see which
            limit binds and where each method and number comes from.
          </p>
        </div>
        <figure className="hidden max-w-[26rem] lg:block">
          <BundleThumbnail
            geometry={picture.geometry}
            rows={picture.rows}
            name="A bundle of twelve rows condensing R134a"
            width={400}
            height={300}
          />
          <figcaption className="mt-3 text-note text-soft">
            R134a at 40 °C, 300 kW on 144 tubes: {per(picture.first)} in the top row, {per(picture.last)} in
            the twelfth.
          </figcaption>
        </figure>
        <p className="text-note text-soft">
          Screening results, not a certified design: pressure equipment, refrigerant charge and ventilation
          follow local codes and licensed practice.
        </p>
      </div>
      <section
        aria-labelledby="page-title"
        className="flex flex-col justify-center gap-5 border-line bg-sheet px-6 py-10 max-lg:border-t sm:px-12 lg:border-s lg:px-10"
      >
        <h1 id="page-title" tabIndex={-1} className="text-head">
          Sign in
        </h1>
        {signedOut ? <MarginNote title="You are signed out.">Your drafts are kept.</MarginNote> : null}
        {people ? (
          <>
            <p className="text-soft">
              This is the demo on your own machine: choose who to be. People, projects and figures are
              invented.
            </p>
            <ul className="grid gap-2.5">
              {people.map(({ role, email, does }) => (
                <li key={email}>
                  <SignInForm returnTo={returnTo} loginHint={email}>
                    <Button type="submit" className="w-full justify-start! text-start!">
                      <span className="grid">
                        {role}
                        <span className="text-note font-medium text-soft">{does}</span>
                      </span>
                    </Button>
                  </SignInForm>
                </li>
              ))}
            </ul>
          </>
        ) : (
          <>
            <p className="text-soft">
              You sign in with your company account; Rowfall keeps no password. Your role follows from your
              groups there.
            </p>
            <SignInForm returnTo={returnTo}>
              <Button type="submit" look="main" className="w-full">
                Sign in with your company account
              </Button>
            </SignInForm>
          </>
        )}
      </section>
    </main>
  )
}

/** A plain form: the answer leads to another site, which only a whole page load may follow. */
function SignInForm({
  returnTo,
  loginHint,
  children,
}: {
  returnTo: string
  loginHint?: string
  children: React.ReactNode
}) {
  return (
    <Form method="post" action="/auth/start" reloadDocument>
      <input type="hidden" name="returnTo" value={returnTo} />
      {loginHint ? <input type="hidden" name="loginHint" value={loginHint} /> : null}
      {children}
    </Form>
  )
}
