/** Which lines of a drawing are read, as a brief says it. Options of the same kind take its place, each by itself. */
import { fail, ok, type Result } from '../../base/result.ts'
import { namedColour } from './colour-name.ts'
import type { Point } from './condition.ts'

/** null: not said. Points are in the brief's unit. */
export interface LinesWish {
  readonly layers: readonly string[] | null
  /** As the looks of a drawing have them. */
  readonly colours: readonly string[] | null
  readonly lineTypes: readonly string[] | null
  readonly window: readonly [Point, Point] | null
  /** Two heights. */
  readonly between?: readonly [number, number] | null
  readonly inside: string | Point | null
}

export interface WrittenLines {
  readonly layers?: readonly string[]
  readonly colours?: readonly string[]
  readonly line_types?: readonly string[]
  readonly window?: readonly [Point, Point]
  readonly between?: readonly [number, number]
  readonly inside?: string | Point
}

export function linesIn(written: WrittenLines | undefined): Result<LinesWish | null> {
  if (written === undefined) return ok(null)
  const colours: string[] = []
  for (const [i, word] of (written.colours ?? []).entries()) {
    const colour = namedColour(word)
    if (colour === null) return fail('not-a-colour', `"${word}" is not a colour`, { field: `lines.colours[${i}]` }, 'write a name like red, a number from 1 to 255, or #ff8000')
    colours.push(colour)
  }
  const { layers = null, line_types: lineTypes = null, window = null, between = null, inside = null } = written
  return ok({ layers, colours: written.colours === undefined ? null : colours, lineTypes, window, inside, ...(between === null ? {} : { between }) })
}

export function writtenLines({ layers, colours, lineTypes, window, between = null, inside }: LinesWish): object {
  return {
    ...(layers === null ? {} : { layers }), ...(colours === null ? {} : { colours }), ...(lineTypes === null ? {} : { line_types: lineTypes }),
    ...(window === null ? {} : { window }), ...(between === null ? {} : { between }), ...(inside === null ? {} : { inside }),
  }
}
