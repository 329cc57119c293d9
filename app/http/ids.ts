const UUID = /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/i

/** Whether text from a URL or form can be a row's id at all: PostgreSQL would fail on anything else. */
export function isId(text: unknown): text is string {
  return typeof text === 'string' && UUID.test(text)
}
