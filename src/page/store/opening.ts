/** What a hand changes in a drawing that is read and not accepted yet, as changes to how it is to be read. */
import { isUnit } from '../../base/length.ts'
import { panelAt } from './picking.ts'
import type { Opening, OpeningOptions } from './state.ts'

/** A face clicked turns from panel to void or back; null: nothing lies there. */
export function turnedVoid({ read, options: { voids } }: Opening, x: number, y: number): Partial<OpeningOptions> | null {
  if (read === null) return null
  if (panelAt(read.plan, x, y) >= 0) return { voids: [...voids, [x, y]] }
  // A point within the void that was clicked: the one that lies in the same face is taken away.
  const nearest = voids.map(([vx, vy], i) => ({ i, d: Math.hypot(vx - x, vy - y) })).sort((a, b) => a.d - b.d)[0]
  if (nearest === undefined || nearest.d >= read.plan.frame.span) return null
  return { voids: voids.filter((_, i) => i !== nearest.i) }
}

export function switchedLayer({ options, layers }: Opening, layer: string): Partial<OpeningOptions> {
  const on = options.layers ?? layers
  const next = on.includes(layer) ? on.filter((name) => name !== layer) : [...on, layer]
  return { layers: next.length === layers.length ? null : next }
}

/** A proposal taken, left (so that it is not asked about again), or neither: null. */
export function taking({ accept, leave }: OpeningOptions, code: string, take: boolean | null): Pick<OpeningOptions, 'accept' | 'leave'> {
  const without = (codes: readonly string[]): string[] => codes.filter((other) => other !== code)
  return { accept: take === true ? [...without(accept), code] : without(accept), leave: take === false ? [...without(leave), code] : without(leave) }
}

/** The answer to a reader's question, one of the options that it names, as typed on a command line; null: not known here. */
export function answered(options: OpeningOptions, option: string): Partial<OpeningOptions> | null {
  const match = /^--([a-z-]+)[ =](.+)$/.exec(option)
  if (match === null) return null
  const [, name, value] = match
  if (name === 'unit' && isUnit(value)) return { unit: value }
  if (name === 'scale') return { scale: Number(value.replace(/^1:/, '')) }
  if (name === 'accept') return taking(options, value, true)
  if (name === 'leave') return taking(options, value, false)
  if (name === 'colour') return { colours: value.split(',') }
  if (name === 'line-type') return { lineTypes: value.split(',') }
  if (name === 'snap') return { snap_mm: Number.parseFloat(value) }
  if (name === 'layers' || name === 'layer') return { layers: value.split(',') }
  return null
}
