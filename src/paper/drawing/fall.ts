/**
 * Where panels fall to. The slope chart is Maxwell's reciprocal figure plotted as minus the gradient, so that a point lies
 * where the panel's water goes and a dome lies the same way round as its plan. This file is the only one that knows that sign.
 */

/** The point of panel p on the slope chart (x east, y north, radius = tangent of the slope), from gradients gx gy gx gy ... */
export function fallPoint(gradient: Float64Array, panel: number): readonly [x: number, y: number] {
  return [-gradient[2 * panel], -gradient[2 * panel + 1]]
}

/** The gradient whose chart point this is: the inverse of `fallPoint`. */
export function gradientAt(x: number, y: number): readonly [gx: number, gy: number] {
  return [-x, -y]
}

/** Slope of panel p in degrees: atan |a|. */
export function slopeOf(gradient: Float64Array, panel: number): number {
  return (Math.atan(Math.hypot(gradient[2 * panel], gradient[2 * panel + 1])) * 180) / Math.PI
}

/** Bearing of panel p's fall, degrees clockwise from north in [0, 360); NaN for a level panel. */
export function fallBearing(gradient: Float64Array, panel: number): number {
  const [x, y] = fallPoint(gradient, panel)
  if (x === 0 && y === 0) return Number.NaN
  return ((Math.atan2(x, y) * 180) / Math.PI + 360) % 360
}
