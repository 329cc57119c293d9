// People and roles: which group of the identity provider gives which role, and who may use Rowfall at all.
import { data, Form } from 'react-router'
import { Button } from '#app/components/ui/button.tsx'
import { SelectField, TextField } from '#app/components/ui/field.tsx'
import { plural } from '#app/components/ui/number-format.ts'
import { PageHead, PlainPage, Scroll, Sheet } from '#app/components/ui/page.tsx'
import { Tag } from '#app/components/ui/tag.tsx'
import { useFaultFocus } from '#app/components/ui/use-fault-focus.ts'
import { When } from '#app/components/ui/when.tsx'
import { readForm } from '#app/http/body.ts'
import { viewerContext } from '#app/http/context.ts'
import { AppError, failureOf } from '#app/http/errors.ts'
import { isId } from '#app/http/ids.ts'
import {
  listPeople,
  mapGroup,
  removePerson,
  restorePerson,
  roleMap,
} from '#app/modules/accounts/roles.server.ts'
import { ROLES } from '#drizzle/schema/person.ts'
import { actingOf } from '../acting.ts'
import type { Route } from './+types/people'

export const meta: Route.MetaFunction = () => [{ title: 'People · Rowfall' }]

export async function loader({ context }: Route.LoaderArgs) {
  const [people, map] = await Promise.all([listPeople(), roleMap()])
  return {
    viewerId: context.get(viewerContext).personId,
    groups: Object.entries(map).map(([group, role]) => ({ group, role })),
    people: people.map(({ signedInAt, removedAt, ...person }) => ({
      ...person,
      signedInAt: signedInAt?.toISOString() ?? null,
      removedAt: removedAt?.toISOString() ?? null,
    })),
  }
}

export async function action({ request, context }: Route.ActionArgs) {
  const form = await readForm(request)
  const acting = actingOf(context)
  const text = (name: string) => String(form.get(name) ?? '')
  const intent = text('intent')
  try {
    switch (intent) {
      case 'map':
        await mapGroup(text('group'), text('role'), acting)
        break
      case 'unmap':
        await mapGroup(text('group'), null, acting)
        break
      case 'remove':
      case 'restore': {
        const id = text('person')
        if (!isId(id)) throw new AppError('invalid', 'There is no such person; reload the page.')
        await (intent === 'remove' ? removePerson : restorePerson)(id, acting)
        break
      }
      default:
        throw new AppError('bad-request', 'This page does not know that act; reload it and try again.')
    }
    return null
  } catch (error) {
    const failure = failureOf(error)
    if (!failure) throw error
    return data({ intent, group: text('group').slice(0, 200), fault: failure.message }, 400)
  }
}

export default function People({ loaderData, actionData }: Route.ComponentProps) {
  const { people, groups, viewerId } = loaderData
  const active = people.filter(({ removedAt, signedInAt }) => !removedAt && signedInAt).length
  const mapping = actionData?.intent === 'map' ? actionData : null
  const form = useFaultFocus(mapping)
  return (
    <PlainPage>
      <PageHead
        title={`${active} ${plural(active, 'person', 'people')} with access, ${groups.length} mapped ${plural(groups.length, 'group')}`}
        reason="People appear by signing in. Their role is the highest that one of their groups gives; a change is in force at their next request."
      />
      {actionData && !mapping ? (
        <p role="alert" className="font-semibold text-red-ink">
          {actionData.fault}
        </p>
      ) : null}
      <Sheet title="Groups of the identity provider" className="max-w-3xl">
        <ul className="divide-y divide-line">
          {groups.map(({ group, role }) => (
            <li key={group} className="flex flex-wrap items-center justify-between gap-x-4 gap-y-1 py-2">
              <span className="[overflow-wrap:anywhere]">{group}</span>
              <span className="flex items-center gap-2">
                <Tag tone="sound">{role}</Tag>
                <Form method="post">
                  <input type="hidden" name="group" value={group} />
                  <Button type="submit" name="intent" value="unmap" small aria-label={`Take ${group} out`}>
                    Take out
                  </Button>
                </Form>
              </span>
            </li>
          ))}
        </ul>
        <Form method="post" ref={form} className="mt-3 flex flex-wrap items-start gap-3" key={groups.length}>
          <TextField
            label="Group"
            name="group"
            required
            maxLength={200}
            className="grow basis-60"
            defaultValue={mapping?.group}
            fault={mapping?.fault}
            hint="As the groups claim spells it. A group that is mapped already gets the new role."
          />
          <SelectField
            label="Role"
            name="role"
            className="w-44"
            defaultValue="engineer"
            options={ROLES.map((role) => ({ value: role, label: role }))}
          />
          <Button type="submit" name="intent" value="map" className="mt-6">
            Map it
          </Button>
        </Form>
      </Sheet>
      <Scroll label="People" className="sheet">
        <table className="data-table">
          <caption className="visually-hidden">People</caption>
          <thead>
            <tr>
              <th scope="col">Name</th>
              <th scope="col">Role</th>
              <th scope="col">Groups at the last sign-in</th>
              <th scope="col" className="numeric">
                Projects
              </th>
              <th scope="col" className="numeric">
                Open sessions
              </th>
              <th scope="col">Last sign-in</th>
              <th scope="col">
                <span className="visually-hidden">Acts</span>
              </th>
            </tr>
          </thead>
          <tbody>
            {people.map((person) => (
              <tr key={person.id}>
                <th scope="row">
                  {person.name}
                  <span className="block text-note font-normal text-soft">{person.email}</span>
                </th>
                <td>
                  {person.removedAt ? (
                    <Tag tone="failed">removed</Tag>
                  ) : (
                    <Tag tone={person.role ? 'sound' : 'attention'}>{person.role ?? 'no role'}</Tag>
                  )}
                </td>
                <td className="text-note">{person.groups.join(', ')}</td>
                <td className="numeric">{person.projects}</td>
                <td className="numeric">{person.sessions}</td>
                <td>{person.signedInAt ? <When at={person.signedInAt} /> : 'never'}</td>
                <td>
                  {person.removedAt ? (
                    <Form method="post">
                      <input type="hidden" name="person" value={person.id} />
                      <Button
                        type="submit"
                        name="intent"
                        value="restore"
                        small
                        aria-label={`Let ${person.name} in again`}
                      >
                        Let in again
                      </Button>
                    </Form>
                  ) : person.id === viewerId ? null : (
                    <Remove person={person} />
                  )}
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      </Scroll>
    </PlainPage>
  )
}

/** Asks once, naming the person and what follows. */
function Remove({ person }: { person: { id: string; name: string } }) {
  return (
    <details>
      <summary className="button button-quiet button-small list-none" aria-label={`Remove ${person.name}`}>
        Remove
      </summary>
      <Form method="post" className="mt-2 grid w-64 gap-2">
        <input type="hidden" name="person" value={person.id} />
        <p className="text-note">
          {person.name} is refused from the next request on, in open tabs too. What they made stays.
        </p>
        <Button type="submit" name="intent" value="remove" look="danger" small className="justify-self-start">
          Remove {person.name}
        </Button>
      </Form>
    </details>
  )
}
