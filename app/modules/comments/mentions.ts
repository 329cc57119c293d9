// Who is meant by "@Name" or "@name@company.example" in a comment.

export type Mentionable = { id: string; name: string; email: string }

export type Piece = { text: string; person?: string }

/** The text cut into plain pieces and mentions of people, the longest name first where one begins another. */
export function mentionsIn(text: string, people: readonly Mentionable[]): Piece[] {
  const called = people
    .flatMap(({ id, name, email }) => [
      { id, word: name },
      { id, word: email },
    ])
    .filter(({ word }) => word !== '')
    .sort((a, b) => b.word.length - a.word.length)
  const pieces: Piece[] = []
  let plain = 0
  for (let at = text.indexOf('@'); at >= 0; at = text.indexOf('@', at + 1)) {
    if (at > 0 && /[\p{L}\p{N}]/u.test(text[at - 1])) continue
    const rest = text.slice(at + 1)
    const found = called.find(
      ({ word }) =>
        rest.slice(0, word.length).toLowerCase() === word.toLowerCase() &&
        !/^[\p{L}\p{N}]/u.test(rest.slice(word.length)),
    )
    if (!found) continue
    if (at > plain) pieces.push({ text: text.slice(plain, at) })
    plain = at + 1 + found.word.length
    pieces.push({ text: text.slice(at, plain), person: found.id })
    at = plain - 1
  }
  if (plain < text.length) pieces.push({ text: text.slice(plain) })
  return pieces
}
