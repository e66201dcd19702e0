/**
 * The records that a job returns. `Summary` is what `check --json` prints and `summary.json` holds, key for key;
 * `Answer` adds the arrays behind it, for lists, pictures and the page.
 */
import type { LeftOut, Question, Repair } from '../../base/repair.ts'
import type { Unit } from '../../base/length.ts'
import type { Plan } from '../../plan/plan.ts'
import type { AnswerWord, AsDrawn, Blocking, Cure } from './cure.ts'
import type { Verdict } from './verdict.ts'

export type { Verdict }

export interface PlanFacts {
  readonly panels: number
  readonly joints: number
  readonly rimEdges: number
  readonly nodes: number
  readonly interiorNodes: number
  readonly voids: number
  readonly parts: number
  readonly unit: Unit
}

export interface StressFacts {
  /** Dimension of the equilibrium stresses with a free rim, tilts not counted. */
  readonly freedom: number
  /** joints - 2 interior nodes - 3 voids, collinear two-joint nodes merged; may be negative. */
  readonly count: number
  /** Dimension of the set of roofs under all hard conditions, tilts included; null when they clash. */
  readonly freedomLeft: number | null
  /** Square root of the smallest eigenvalue of the flatness form above tau, span 1; null when there is none. */
  readonly gap: number | null
  /** RMS |N^T z| / RMS z of the raised roof; null without a roof. */
  readonly residual: number | null
  readonly decided: boolean
  /** Freedom counted at tau = 1e-13 and 1e-11; only when they differ. */
  readonly countAt?: readonly [number, number]
  readonly frozenJoints: number
  readonly flatGroups: number
  /** With --full. */
  readonly frozenJointNames?: readonly string[]
  readonly flatGroupPanels?: readonly (readonly string[])[]
}

export interface Clash {
  readonly conditions: readonly string[]
  readonly misfit_mm: number
}

/** A hard condition that holds the roof at a bound, and what it costs. */
export interface Binding {
  readonly condition: string
  /** Where: the node of the row that is at its bound. */
  readonly at: string
  /** How much more the roof would rise without it; 0 or less: the rise is had all the same. */
  readonly rise_mm: number
  /** The largest move of a node without it. */
  readonly move_mm: number
}

/** A hard condition that no roof near the asked one was found to keep. */
export interface Unmet {
  readonly condition: string
  /** The panel or node that misses it most. */
  readonly at: string
}

export interface HeldFacts {
  readonly freedomLeft: number | null
  readonly frozenJoints: number
  readonly flatGroups: number
  readonly clashes: readonly Clash[]
  /** Conditions that bound one side and hold the roof, the dearest first; absent: none does. */
  readonly binding?: readonly Binding[]
  /** Absent: all are kept, or they clash. */
  readonly unmet?: readonly Unmet[]
  /** Conditions that stand in the way together, none of them to be spared; only where cures were looked for and some do. */
  readonly blocking?: Blocking
}

export interface RoofFacts {
  readonly rise: number
  readonly riseAsked: number | null
  readonly rimVariation: number
  readonly cornerMax_mm: number
  readonly flatnessMax_mm: number
  readonly flatnessRms_mm: number
  readonly exactFlatnessMax_mm: number
  readonly worstPanels: readonly { readonly name: string; readonly corner_mm: number; readonly flatness_mm: number }[]
  readonly closingError: number
  /** RMS distance from the wish (shape or target) where the wish has heights of its own, in the plan's unit. */
  readonly heightError?: number
}

/** Whether chosen joints can all be ridges at once; the same holds for valleys. */
export interface OneWayFacts {
  /** Least form force of the chosen joints beside the largest of any joint, in the roof where it is largest; 0: they cannot. */
  readonly margin: number
  readonly on: 'force'
  /** How many joints were asked about. */
  readonly joints: number
  /** Whether the hard conditions were kept; else the rim was free. */
  readonly held: boolean
  /** Joints whose weighted form forces cancel in every roof; [] where the margin is more than 0. */
  readonly certificate: readonly { readonly joint: string; readonly weight: number }[]
  /** False: margin 0 that no certificate proves. */
  readonly decided: boolean
  /** Where it is not decided because the linear program was given up: after so many steps. */
  readonly steps?: number
}

export interface Summary {
  readonly version: string
  readonly input: { readonly name: string; readonly sha256: string }
  readonly options: Readonly<Record<string, unknown>>
  readonly plan: PlanFacts
  readonly repairs: readonly Repair[]
  readonly questions: readonly Question[]
  readonly leftOut: readonly LeftOut[]
  readonly notices: readonly string[]
  readonly stress: StressFacts
  readonly held: HeldFacts
  readonly verdict: Verdict
  /** With the verdict `lifts within plan tolerance`: how far nodes have to move. */
  readonly planShift?: { readonly largest_mm: number; readonly rms_mm: number }
  readonly reason: string | null
  readonly reasonKind: 'propagation' | 'clash' | 'rank' | null
  readonly roof: RoofFacts | null
  /** True when the roof is the near one of a plan that does not lift. */
  readonly near?: boolean
  /** With --one-way. */
  readonly oneWay?: OneWayFacts
  /** Of `check` and `raise`: the form of the answer, and what it takes where it is not a plain yes. */
  readonly answer?: AnswerWord
  readonly cures?: readonly Cure[]
  /** The nearest roof, where there is no exact one that folds. */
  readonly asDrawn?: AsDrawn
  /** The cures that --cure applied before, in this order: the rest of the summary is about the plan with them. */
  readonly cured?: readonly Cure[]
  readonly caution: string
}

/** A raised roof as arrays; heights and lengths in the plan's unit unless named otherwise. */
export interface Roof {
  /** Height of each node as solved (length nodeCount). */
  readonly heights: Float64Array
  /** The same, rounded as written. */
  readonly written: Float64Array
  /** Coordinates as written: equal to plan.x, plan.y unless --decimals was given. */
  readonly writtenX: Float64Array
  readonly writtenY: Float64Array
  /** Gradient of each panel's plane, gx gy gx gy .. (length 2 * panelCount). */
  readonly gradient: Float64Array
  /** Force density of each joint, 1 / plan unit; > 0 valley, < 0 ridge. Form only: it carries no load. */
  readonly stress: Float64Array
  /** Per panel, of the written coordinates, mm. */
  readonly corner_mm: Float64Array
  readonly flatness_mm: Float64Array
  /** Whether this is the near roof (no exact one exists under the conditions). */
  readonly isNear: boolean
}

export interface Answer {
  readonly summary: Summary
  readonly plan: Plan
  /** 1 where the joint is frozen with a free rim, and under the conditions (length jointCount each). */
  readonly frozenFree: Uint8Array
  readonly frozenHeld: Uint8Array
  /** Flat group of each panel under the conditions, 0-based (length panelCount). */
  readonly flatGroup: Int32Array
  /** What holds, with names, for lists and pictures. */
  readonly conditions: readonly { readonly name: string; readonly kind: string; readonly soft: boolean; readonly nodes: Int32Array }[]
  readonly roof: Roof | null
  /** Width of the bar that each edge was drawn with, in the plan's unit (length edgeCount, NaN: none); absent: no bars were drawn. */
  readonly barWidth?: Float64Array
  /** Heights in the plan's unit of the roof that folds the chosen joints all one way; absent: none was asked for, null: there is none. */
  readonly oneWayHeights?: Float64Array | null
}
