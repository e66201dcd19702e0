/** Cameras for the views of the roof. Parallel ones keep the plan's scale, so that roof and plan stand over one another. */
import { OrthographicCamera, PerspectiveCamera, Vector3 } from 'three'
import type { RoofView } from '../../paper/drawing/projection.ts'

export interface Placing {
  /** Longer side of the plan's box, and height of the roof as drawn, in the plan's unit. */
  readonly span: number
  readonly top: number
  /** px to the plan unit for parallel views. */
  readonly scale: number
  readonly width: number
  readonly height: number
}

/** The camera of a view and the point that it turns about. */
export function cameraFor(view: RoofView, placing: Placing): { camera: OrthographicCamera | PerspectiveCamera; target: Vector3 } {
  const { span, top, scale, width, height } = placing
  const turn = (view.bearing * Math.PI) / 180
  const target = new Vector3(0, 0, top / 2)
  if (view.kind === 'parallel') {
    const rise = (Math.min(view.elevation, 89.99) * Math.PI) / 180
    const camera = new OrthographicCamera(-width / 2, width / 2, height / 2, -height / 2, 0.01 * span, 12 * span)
    camera.up.set(0, 0, 1)
    camera.position.set(Math.sin(turn) * Math.cos(rise), Math.cos(turn) * Math.cos(rise), Math.sin(rise)).multiplyScalar(5 * span).add(target)
    camera.zoom = scale
    camera.lookAt(target)
    camera.updateProjectionMatrix()
    return { camera, target }
  }
  const camera = new PerspectiveCamera(42, width / Math.max(height, 1), 0.01 * span, 12 * span)
  camera.up.set(0, 0, 1)
  camera.position.set(Math.sin(turn) * view.distance * span, Math.cos(turn) * view.distance * span, view.height)
  camera.lookAt(target)
  camera.updateProjectionMatrix()
  return { camera, target }
}
