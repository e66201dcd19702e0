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

/** The answer to a reader's question, options as typed on a command line ("--layer A --layer B"); null: one is not known here. */
export function answered(options: OpeningOptions, option: string): Partial<OpeningOptions> | null {
  const typed = [...option.matchAll(/--([a-z-]+)[ =]("[^"]*"|\S+)/g)].map(([, name, value]) => ({ name, value: value.replace(/^"(.*)"$/, '$1') }))
  if (typed.length === 0) return null
  let all: Partial<OpeningOptions> = {}
  for (const { name, value } of typed) {
    const change = changed({ ...options, ...all }, all, name, value)
    if (change === null) return null
    all = { ...all, ...change }
  }
  return all
}

function changed(options: OpeningOptions, before: Partial<OpeningOptions>, name: string, value: string): Partial<OpeningOptions> | null {
  const numbers = value.split(',').map(Number)
  const isNumbers = (count: number): boolean => numbers.length === count && numbers.every(Number.isFinite)
  switch (name) {
    case 'unit': return isUnit(value) ? { unit: value } : null
    case 'scale': return { scale: Number(value.replace(/^1:/, '')) }
    case 'accept': return taking(options, value, true)
    case 'leave': return taking(options, value, false)
    case 'snap': return { snap_mm: Number.parseFloat(value) }
    // Several of one kind add up.
    case 'colour': return { colours: [...(before.colours ?? []), ...value.split(',')] }
    case 'line-type': return { lineTypes: [...(before.lineTypes ?? []), value] }
    case 'layer': return { layers: [...(before.layers ?? []), value] }
    case 'window': return isNumbers(4) ? { window: [[numbers[0], numbers[1]], [numbers[2], numbers[3]]] } : null
    case 'between': return isNumbers(2) ? { between: [numbers[0], numbers[1]] } : null
    case 'inside': return { inside: isNumbers(2) ? [numbers[0], numbers[1]] : value }
    default: return null
  }
}

/** What a hand on the drawing chooses: nothing but faces, a window, or the closed line round a point. */
export type Choosing = 'faces' | 'window' | 'outline'

/** The window between two points that were dragged apart; null: a click is none. */
export function draggedWindow(from: readonly [number, number], to: readonly [number, number], least: number): Partial<OpeningOptions> | null {
  return Math.abs(from[0] - to[0]) < least || Math.abs(from[1] - to[1]) < least ? null : { window: [from, to], inside: null }
}

/** One of those that are drawn switched off or on; all of them is no choice. */
export function switched(all: readonly string[], chosen: readonly string[] | null, one: string): readonly string[] | null {
  const next = all.filter((other) => (chosen === null || chosen.includes(other)) !== (other === one))
  return next.length === all.length ? null : next
}
