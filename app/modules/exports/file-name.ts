/** A name that every file system and header takes: letters, digits, dots and dashes. */
export function fileName(name: string, ending: string): string {
  const plain = name
    .normalize('NFKD')
    .replace(/[^A-Za-z0-9]+/g, '-')
    .replace(/^-+|-+$/g, '')
    .slice(0, 80)
  return `${plain || 'study'}.${ending}`
}

export const attachment = (name: string, ending: string): string =>
  `attachment; filename="${fileName(name, ending)}"`
