/**
 * Records as JSON for people and programs: two blanks a level, lists of plain numbers and words on one line, keys in the
 * order in which they were made. What is not a finite number is null; there is no minus zero.
 */
export function jsonText(value: unknown, indent = ''): string {
  if (value === null || value === undefined) return 'null'
  if (typeof value === 'number') return Number.isFinite(value) ? JSON.stringify(value) : 'null'
  if (typeof value !== 'object') return JSON.stringify(value)
  const inner = `${indent}  `
  if (Array.isArray(value) || ArrayBuffer.isView(value)) {
    const items = Array.from(value as Iterable<unknown>)
    if (items.length === 0) return '[]'
    if (items.every(isPlain)) return `[${items.map((item) => jsonText(item)).join(', ')}]`
    return `[\n${items.map((item) => inner + jsonText(item, inner)).join(',\n')}\n${indent}]`
  }
  const entries = Object.entries(value).filter(([, entry]) => entry !== undefined)
  if (entries.length === 0) return '{}'
  return `{\n${entries.map(([key, entry]) => `${inner}${JSON.stringify(key)}: ${jsonText(entry, inner)}`).join(',\n')}\n${indent}}`
}

const isPlain = (value: unknown): boolean => value === null || typeof value !== 'object'
