/** Our documents as JSON for people and for version control: what fits a line stands on one, longer lists an entry a line. */

/** As wide as the lines of this code base: a condition of a brief usually fits. */
const width = 140

/** Keys in the order in which they were made, numbers in the shortest digits that read back exactly; NaN is null. */
export function documentText(value: object): string {
  return `${block(value, 0)}\n`
}

function block(value: unknown, indent: number): string {
  const line = inline(value)
  if (indent > 0 && line.length + indent <= width) return line
  const inner = ' '.repeat(indent + 2)
  const outer = ' '.repeat(indent)
  if (Array.isArray(value)) {
    // A list of plain numbers stays on its line, however long.
    if (value.every((item) => typeof item !== 'object' || item === null)) return line
    return `[\n${value.map((item) => inner + block(item, indent + 2)).join(',\n')}\n${outer}]`
  }
  if (typeof value !== 'object' || value === null) return line
  return `{\n${entries(value).map(([key, entry]) => `${inner}${JSON.stringify(key)}: ${block(entry, indent + 2)}`).join(',\n')}\n${outer}}`
}

function inline(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map(inline).join(', ')}]`
  if (typeof value !== 'object' || value === null) return JSON.stringify(value)
  const list = entries(value)
  return list.length === 0 ? '{}' : `{ ${list.map(([key, entry]) => `${JSON.stringify(key)}: ${inline(entry)}`).join(', ')} }`
}

const entries = (value: object): [string, unknown][] => Object.entries(value).filter(([, entry]) => entry !== undefined)
