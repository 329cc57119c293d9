import { useMatches } from 'react-router'

/** Where a page stands: a route's `handle.crumbs` gives them from its loader's data, outermost first. */
export type Crumb = { label: string; to: string }

export type CrumbHandle<Data> = { crumbs: (data: Data) => Crumb[] }

export function useCrumbs(): Crumb[] {
  return useMatches().flatMap(({ handle, loaderData }) => {
    const crumbs = (handle as CrumbHandle<unknown> | undefined)?.crumbs
    return crumbs && loaderData !== undefined ? crumbs(loaderData) : []
  })
}
