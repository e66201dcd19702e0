/** The reading of a name, from an answer. */
import { never } from '../../base/assert.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import { foldReading, forceReading } from './joint-readings.ts'
import type { Joints } from './joint-kinds.ts'
import { flatnessReading, freedomReading, groupReading, slopeReading } from './panel-readings.ts'
import type { Reading, ReadingName } from './reading.ts'

export interface ReadingLimits {
  /** Degrees; null where no least slope is asked. */
  readonly leastSlope: number | null
  readonly flat_mm: number
}

/** `joints`: or what makes them, since panels are read without. */
export function readingOf(name: ReadingName, answer: Answer, joints: Joints | (() => Joints), limits: ReadingLimits): Reading {
  const made = (): Joints => (typeof joints === 'function' ? joints() : joints)
  switch (name) {
    case 'slope': return slopeReading(answer, limits.leastSlope)
    case 'flatness': return flatnessReading(answer, limits.flat_mm)
    case 'fold': return foldReading(answer, made())
    case 'force': return forceReading(answer, made())
    case 'group': return groupReading(answer)
    case 'freedom': return freedomReading(answer)
    default: return never(name)
  }
}
