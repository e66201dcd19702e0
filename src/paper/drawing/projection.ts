/**
 * Where a point of the raised roof comes on the sheet. Parallel views keep the plan's scale, and seen from the south its x
 * as well, so that a line can drop from the roof into the plan. The eye view is in perspective, as a person outside sees it.
 */
export type Side = 'south' | 'east' | 'north' | 'west' | 'above' | 'eye'
export const sides: readonly Side[] = ['south', 'east', 'north', 'west', 'above', 'eye']

export interface ParallelView {
  readonly kind: 'parallel'
  /** Where the viewer stands: degrees clockwise from north. */
  readonly bearing: number
  /** Angle of sight above the horizon, degrees, in (0, 90]. */
  readonly elevation: number
}

export interface EyeView {
  readonly kind: 'eye'
  readonly bearing: number
  /** From the plan's middle, in spans; and the eye's height over the datum in the plan's unit. */
  readonly distance: number
  readonly height: number
}

export type RoofView = ParallelView | EyeView

const bearings: Readonly<Record<Side, number>> = { south: 180, east: 90, north: 0, west: 270, above: 180, eye: 205 }

/** The stock view from a side: 35 degrees above, straight down, or the eye of a person 1.65 m tall standing outside. */
export function stockView(side: Side, eyeHeight: number): RoofView {
  if (side === 'eye') return { kind: 'eye', bearing: bearings.eye, distance: 1.15, height: eyeHeight }
  return { kind: 'parallel', bearing: bearings[side], elevation: side === 'above' ? 90 : 35 }
}

/**
 * Projects x y z (about the plan's middle and datum, in the plan's unit) into (right, up, depth), all in the plan's unit;
 * depth grows away from the viewer.
 */
export function projector(view: RoofView, span: number): (x: number, y: number, z: number) => readonly [right: number, up: number, depth: number] {
  const turn = (view.bearing * Math.PI) / 180
  // Unit vector from the plan's middle towards the viewer, and the viewer's right hand.
  const bx = Math.sin(turn)
  const by = Math.cos(turn)
  const rx = -by
  const ry = bx
  if (view.kind === 'parallel') {
    const rise = (view.elevation * Math.PI) / 180
    const s = Math.sin(rise)
    const c = Math.cos(rise)
    return (x, y, z) => [rx * x + ry * y, c * z - s * (bx * x + by * y), -(c * (bx * x + by * y) + s * z)]
  }
  const away = view.distance * span
  return (x, y, z) => {
    // A point behind the eye is kept just before it: parts of a roof that the viewer stands under fall off the sheet.
    const depth = Math.max(away - (bx * x + by * y), span * 0.02)
    const shrink = away / depth
    return [(rx * x + ry * y) * shrink, (z - view.height) * shrink, depth]
  }
}

/** Words for a view: "from the south, 35° above". */
export function viewWords(side: Side): string {
  if (side === 'above') return 'from above'
  if (side === 'eye') return 'by eye, from outside'
  return `from the ${side}, 35° above`
}
