/** What several panes need of an answer, worked out once for each. */
import { useMemo } from 'react'
import { joints, type Joints } from '../../paper/drawing/joint-kinds.ts'
import { readingOf } from '../../paper/drawing/readings.ts'
import type { Reading, ReadingName } from '../../paper/drawing/reading.ts'
import { defaultFlat_mm } from '../../plan/project/wishes.ts'
import type { Answer } from '../../roof/answer/answer.ts'
import { useDeskState } from './context.ts'
import type { Doc } from '../store/state.ts'

const jointsKept = new WeakMap<Answer, Joints>()
const readingsKept = new WeakMap<Answer, Map<string, Reading>>()

export function jointsOf(answer: Answer): Joints {
  const known = jointsKept.get(answer)
  if (known !== undefined) return known
  const made = joints(answer)
  jointsKept.set(answer, made)
  return made
}

export function readingFor(answer: Answer, name: ReadingName, leastSlope: number | null, flat_mm: number): Reading {
  const kept = readingsKept.get(answer) ?? new Map<string, Reading>()
  readingsKept.set(answer, kept)
  const key = `${name} ${leastSlope} ${flat_mm}`
  const known = kept.get(key)
  if (known !== undefined) return known
  const made = readingOf(name, answer, () => jointsOf(answer), { leastSlope, flat_mm })
  kept.set(key, made)
  return made
}

/** Least slope asked and flatness tolerance of a document. */
export const limitsOf = ({ leastSlope, brief }: Doc): { leastSlope: number | null; flat_mm: number } => ({ leastSlope, flat_mm: brief.flat_mm ?? defaultFlat_mm })

export function useLimits(): { leastSlope: number | null; flat_mm: number } {
  const leastSlope = useDeskState((state) => state.doc?.leastSlope ?? null)
  const flat_mm = useDeskState((state) => state.doc?.brief.flat_mm ?? defaultFlat_mm)
  return useMemo(() => ({ leastSlope, flat_mm }), [leastSlope, flat_mm])
}

/** Worked out when first asked for: by a picture in its turn rather than by all panes as they hear of the answer. */
export function useReading(answer: Answer | null): { readonly joints: Joints; readonly reading: Reading } | null {
  const name = useDeskState((state) => state.reading)
  const { leastSlope, flat_mm } = useLimits()
  return useMemo(
    () => (answer === null ? null : {
      get joints() { return jointsOf(answer) },
      get reading() { return readingFor(answer, name, leastSlope, flat_mm) },
    }),
    [answer, name, leastSlope, flat_mm],
  )
}
