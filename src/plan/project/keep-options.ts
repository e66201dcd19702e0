/** What a plan keeps while its nodes are moved, as options say it. */
/** A length in the plan's unit, or as typed, with or without a unit of its own: "1.2m", "-40 mm", "3". */
export type TypedLength = number | string

export interface KeepOptions {
  /** Nodes that stay, by name. */
  readonly stay: readonly string[]
  /** slide: along rim lines that run straight through them, corners stay; fixed; free. */
  readonly rimNodes: 'slide' | 'fixed' | 'free'
  /** Straight joint runs may bend. */
  readonly bend: boolean
  readonly largestShift: TypedLength | null
  readonly leastEdge: TypedLength | null
  readonly leastCorner_deg: number | null
  /** What else the plan keeps where it has it: equal bays, symmetry, nodes on building axes (they slide along them). */
  readonly keep: readonly KeptPattern[]
  /** Panels that keep their shape in the plan, by name. */
  readonly keepShape: readonly string[]
}

export const keptPatterns = ['bays', 'symmetry', 'axes'] as const
export type KeptPattern = (typeof keptPatterns)[number]

export const noKeeps: KeepOptions = { stay: [], rimNodes: 'slide', bend: false, largestShift: null, leastEdge: null, leastCorner_deg: null, keep: [], keepShape: [] }
