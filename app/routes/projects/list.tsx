// The projects a person belongs to.
import { data, Form, Link, redirect, useNavigation } from 'react-router'
import { StatusButton } from '#app/components/ui/button.tsx'
import { TextAreaField, TextField } from '#app/components/ui/field.tsx'
import { plural } from '#app/components/ui/number-format.ts'
import { EmptyState, PageHead, PlainPage, Sheet } from '#app/components/ui/page.tsx'
import { Tag } from '#app/components/ui/tag.tsx'
import { useFaultFocus } from '#app/components/ui/use-fault-focus.ts'
import { When } from '#app/components/ui/when.tsx'
import { readForm } from '#app/http/body.ts'
import { viewerContext } from '#app/http/context.ts'
import { failureOf } from '#app/http/errors.ts'
import { can } from '#app/http/permissions.ts'
import { createProject, listProjects } from '#app/modules/projects/projects.server.ts'
import { actingOf } from '../acting.ts'
import type { Route } from './+types/list'

export const meta: Route.MetaFunction = () => [{ title: 'Projects · Rowfall' }]

export async function loader({ context }: Route.LoaderArgs) {
  const viewer = context.get(viewerContext)
  const projects = await listProjects(viewer.personId)
  return {
    mayCreate: can(viewer.role, 'project.manage'),
    projects: projects.map(({ changedAt, ...project }) => ({
      ...project,
      changedAt: changedAt?.toISOString() ?? null,
    })),
  }
}

export async function action({ request, context }: Route.ActionArgs) {
  const form = await readForm(request)
  const name = String(form.get('name') ?? '')
  const description = String(form.get('description') ?? '')
  try {
    const made = await createProject(name, description, actingOf(context))
    return redirect(`/projects/${made.id}`)
  } catch (error) {
    const failure = failureOf(error)
    if (!failure) throw error
    return data({ name, description, fault: failure.message }, 400)
  }
}

export default function Projects({ loaderData, actionData }: Route.ComponentProps) {
  const { projects, mayCreate } = loaderData
  const studies = projects.reduce((sum, project) => sum + project.studies, 0)
  return (
    <PlainPage>
      <PageHead
        title={
          projects.length === 0
            ? 'You belong to no project yet'
            : `${projects.length} ${plural(projects.length, 'project')}, ${studies} ${plural(studies, 'study', 'studies')}`
        }
        reason={
          projects.length === 0
            ? mayCreate
              ? 'Make one below; you become its first member.'
              : 'A lead adds you to a project by your e-mail address; it then stands here.'
            : null
        }
      />
      {projects.length > 0 ? (
        <ul className="grid gap-4 md:grid-cols-2 xl:grid-cols-3">
          {projects.map((project) => (
            <li
              key={project.id}
              className="sheet relative grid content-start gap-1.5 p-5 hover:border-verdigris"
            >
              <h2 className="flex flex-wrap items-baseline gap-x-2 text-lead font-bold">
                <Link to={project.id} className="after:absolute after:inset-0">
                  {project.name}
                </Link>
                {project.invented ? <Tag>invented data</Tag> : null}
              </h2>
              {project.description ? <p className="text-soft">{project.description}</p> : null}
              <p className="mt-1 text-note text-soft">
                {project.studies} {plural(project.studies, 'study', 'studies')} · {project.members}{' '}
                {plural(project.members, 'member')}
                {project.changedAt ? (
                  <>
                    {' '}
                    · changed <When at={project.changedAt} />
                  </>
                ) : null}
              </p>
            </li>
          ))}
        </ul>
      ) : mayCreate ? null : (
        <EmptyState title="Meanwhile, the library is open">
          <Link to="/library" className="link">
            Fluids, methods and their sources
          </Link>
        </EmptyState>
      )}
      {mayCreate ? (
        <NewProject refused={actionData} open={projects.length === 0 || actionData !== undefined} />
      ) : null}
    </PlainPage>
  )
}

type Refused = { name: string; description: string; fault: string }

function NewProject({ refused, open }: { refused: Refused | undefined; open: boolean }) {
  const busy = useNavigation().formMethod === 'POST'
  const form = useFaultFocus(refused)
  return (
    <details open={open} className="max-w-2xl">
      <summary className="mb-3 list-inside font-semibold text-verdigris-ink">New project</summary>
      <Sheet>
        <Form method="post" ref={form} className="grid gap-4">
          <TextField
            label="Name"
            name="name"
            required
            maxLength={120}
            defaultValue={refused?.name}
            fault={refused?.fault}
            hint="A condenser line, a plant, a test stand."
          />
          <TextAreaField
            label="What it is about"
            name="description"
            defaultValue={refused?.description}
            rows={2}
          />
          <StatusButton look="main" busy={busy} working="Making it…" className="justify-self-start">
            Make the project
          </StatusButton>
        </Form>
      </Sheet>
    </details>
  )
}
