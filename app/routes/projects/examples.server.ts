// The study files shipped with Rowfall, offered as a start.

type Shipped = { name: string; description?: string }

const files = import.meta.glob<Shipped>(['/studies/*.json', '!/studies/*.schema.json'], {
  eager: true,
  import: 'default',
})

const idOf = (path: string) => path.slice(path.lastIndexOf('/') + 1, -'.json'.length)

export const examples = Object.entries(files).map(([path, file]) => ({
  id: idOf(path),
  name: file.name,
  description: file.description ?? '',
}))

export function exampleDefinition(id: string): Record<string, unknown> | undefined {
  const found = Object.entries(files).find(([path]) => idOf(path) === id)
  return found && structuredClone(found[1])
}
