/** Which layers the user wants; names are compared without case. */
import { fail, type Problem } from '../base/result.ts'
import { quoted } from './text-quote.ts'

export class LayerChoice {
  private readonly wanted: ReadonlyMap<string, string> | null

  /** Null or an empty list wants all layers. */
  constructor(names: readonly string[] | null) {
    this.wanted = names === null || names.length === 0 ? null : new Map(names.map((name) => [name.toLowerCase(), name]))
  }

  /** Whether the user named layers at all. */
  get stated(): boolean {
    return this.wanted !== null
  }

  takes(layer: string): boolean {
    return this.wanted === null || this.wanted.has(layer.toLowerCase())
  }

  /** The problem of a layer that the user wants and the file does not have, or null. */
  missing(layers: Iterable<string>): Problem | null {
    if (this.wanted === null) return null
    const there = new Map<string, string>()
    for (const layer of layers) if (!there.has(layer.toLowerCase())) there.set(layer.toLowerCase(), layer)
    for (const [key, name] of this.wanted) {
      if (there.has(key)) continue
      const names = [...there.values()].filter((layer) => layer !== '').sort()
      const shown = names.slice(0, 12).map((layer) => quoted(layer, 40)).join(', ')
      const more = names.length > 12 ? ` and ${names.length - 12} more` : ''
      const cure = names.length === 0 ? 'the file has no named layers' : `the file has ${shown}${more}`
      return fail('no-such-layer', `there is no layer ${quoted(name, 40)}`, null, cure).problem
    }
    return null
  }
}
