/** Documents with a change in them, for tests of what is accepted and what is refused. */

/** A copy of the value with one thing in it changed at random: what people and damage make of a document. */
export function mutated(value: unknown, next: () => number): unknown {
  const junk = [null, true, -1, 0, 95, 'N7', 'all', 'level', 'outer', [], {}, [[0, 0], [1, 1]], { rim: 'outer' }, { run: [[0, 0], [1, 1]] }, 'void:1,2']
  const pick = <T>(list: readonly T[]): T => list[Math.floor(next() * list.length)]!
  if (next() < 0.12 || typeof value !== 'object' || value === null) return structuredClone(pick(junk))
  if (Array.isArray(value)) {
    const list: unknown[] = [...(value as unknown[])]
    const i = Math.floor(next() * list.length)
    if (next() < 0.2) list.splice(i, 1)
    else if (next() < 0.2) list.push(list[i])
    else list[i] = mutated(list[i], next)
    return list
  }
  const entries = Object.entries(value)
  if (entries.length === 0) return { kind: 'equal' }
  const i = Math.floor(next() * entries.length)
  if (next() < 0.15) entries.splice(i, 1)
  else if (next() < 0.2) entries.push([pick(['level', 'at', 'name', 'soft', 'section', 'rim', 'nodes', 'x']), pick(junk)])
  else entries[i] = [entries[i]![0], mutated(entries[i]![1], next)]
  return Object.fromEntries(entries)
}
