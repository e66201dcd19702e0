/** The short table under the sentences: a label and a value a line. */
import type { PlanFacts, Summary } from '../../roof/answer/answer.ts'
import { flatnessWords, isFlat, lengthWords, sizeWords } from './figures.ts'

export type Fact = readonly [label: string, value: string]

export function planFacts(plan: PlanFacts): Fact[] {
  return [
    ['panels', String(plan.panels)],
    ['joints', String(plan.joints)],
    ['nodes', `${plan.nodes}, ${plan.interiorNodes} of them inside`],
    ['rim edges', String(plan.rimEdges)],
    ['voids', String(plan.voids)],
    ['parts', String(plan.parts)],
    ['unit', plan.unit],
  ]
}

export function answerFacts({ plan, stress, held, roof }: Summary): Fact[] {
  const joints = plan.joints
  return [
    ...planFacts(plan),
    ['freedom, rim free', stress.decided ? String(stress.freedom) : `${stress.freedom}, not decided`],
    ['count', String(stress.count)],
    ['freedom left, conditions held', stress.freedomLeft === null ? 'none: they clash' : String(stress.freedomLeft)],
    ['joints that never fold', `${stress.frozenJoints} of ${joints} with the rim free, ${held.frozenJoints} as held`],
    ['planes', `${stress.flatGroups} with the rim free, ${held.flatGroups} as held`],
    ...(stress.gap === null ? [] : [['gap to the next near lift', sizeWords(stress.gap)] as const]),
    ...(stress.residual === null ? [] : [['residual of the roof', sizeWords(stress.residual)] as const]),
    ...(roof === null
      ? []
      : ([
          ['rise', lengthWords(roof.rise, plan.unit)],
          ['rim varies by', lengthWords(roof.rimVariation, plan.unit)],
          ['corner out of plane', asWritten(roof.cornerMax_mm)],
          ['flatness', asWritten(roof.flatnessMax_mm)],
          ['closing error', `${sizeWords(roof.closingError)} ${plan.unit}`],
        ] as const)),
  ]
}

const asWritten = (mm: number): string => (isFlat(mm) ? `${flatnessWords(mm)} as written` : `at most ${flatnessWords(mm)} as written`)
