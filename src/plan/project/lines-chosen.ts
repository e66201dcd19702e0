/** Which lines are read, by brief and options: an option takes the place of what the brief says of its kind. */
import type { ReadOptions } from '../read-plan.ts'
import type { Brief } from './brief.ts'
import type { Point } from './condition.ts'
import type { Options } from './options.ts'

/** What reading is told of it; `factor` takes the brief's lengths to the plan's unit. */
export function linesOf({ lines = null }: Brief, options: Options, factor: number): Pick<ReadOptions, 'layers' | 'colours' | 'lineTypes' | 'window' | 'between' | 'inside'> {
  const scaled = ([x, y]: Point): Point => [x * factor, y * factor]
  const layers = options.layers ?? lines?.layers ?? null
  const inside = lines?.inside ?? null
  return {
    ...(layers === null ? {} : { layers }),
    colours: options.colours ?? lines?.colours ?? null,
    lineTypes: options.lineTypes ?? lines?.lineTypes ?? null,
    window: options.window ?? (lines?.window === undefined || lines.window === null ? null : [scaled(lines.window[0]), scaled(lines.window[1])]),
    between: options.between ?? (lines?.between === undefined || lines.between === null ? null : [lines.between[0] * factor, lines.between[1] * factor]),
    inside: options.inside ?? (inside === null || typeof inside === 'string' ? inside : scaled(inside)),
  }
}
