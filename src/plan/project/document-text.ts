/** Our documents as JSON for people and for version control: what fits a line stands on one, longer lists an entry a line. */

/** As wide as the lines of this code base: a condition of a brief usually fits. */
const width = 140

/** Keys in the order in which they were made, numbers in the shortest digits that read back exactly. */
export function documentText(value: object): string {
  return `${block(value, 0)}\n`
}

function block(value: unknown, indent: number): string {
  if (typeof value !== 'object' || value === null) return JSON.stringify(value)
  const line = indent === 0 ? null : inline(value, width - indent)
  if (line !== null) return line
  const inner = ' '.repeat(indent + 2)
  const outer = ' '.repeat(indent)
  if (Array.isArray(value)) {
    // A list of plain numbers or words stays on its line, however long.
    if (value.every((item) => typeof item !== 'object' || item === null)) return `[${value.map((item) => JSON.stringify(item)).join(', ')}]`
    return `[\n${value.map((item) => inner + block(item, indent + 2)).join(',\n')}\n${outer}]`
  }
  return `{\n${entries(value).map(([key, entry]) => `${inner}${JSON.stringify(key)}: ${block(entry, indent + 2)}`).join(',\n')}\n${outer}}`
}

/** The value on one line, null where it needs more than so many letters: told early, since documents are long. */
function inline(value: unknown, room: number): string | null {
  if (typeof value !== 'object' || value === null) {
    const text = JSON.stringify(value)
    return text.length > room ? null : text
  }
  const isList = Array.isArray(value)
  const list: readonly [string, unknown][] = isList ? value.map((item) => ['', item]) : entries(value)
  if (3 * list.length > room) return null
  const parts: string[] = []
  let left = room
  for (const [key, entry] of list) {
    const head = isList ? '' : `${JSON.stringify(key)}: `
    const text = inline(entry, left - head.length)
    if (text === null) return null
    parts.push(head + text)
    left -= head.length + text.length + 2
  }
  const text = isList ? `[${parts.join(', ')}]` : parts.length === 0 ? '{}' : `{ ${parts.join(', ')} }`
  return text.length > room ? null : text
}

const entries = (value: object): [string, unknown][] => Object.entries(value).filter(([, entry]) => entry !== undefined)
