/**
 * Materials of the roof, made once a theme and kept from answer to answer: three compiles a shader anew once the last material
 * that uses it is disposed of, which costs 40 ms and more an answer on a software WebGL.
 */
import { DoubleSide, LineBasicMaterial, MeshBasicMaterial } from 'three'
import type { Theme } from '../../paper/drawing/theme.ts'

export interface RoofMaterials {
  readonly faces: MeshBasicMaterial
  readonly curtain: MeshBasicMaterial
  readonly ribbons: MeshBasicMaterial
  readonly hatch: LineBasicMaterial
  readonly water: LineBasicMaterial
  readonly before: LineBasicMaterial
  dispose(): void
}

export function roofMaterials(theme: Theme): RoofMaterials {
  const materials = {
    // Faces are pushed back a little so that hatching that lies in them stays on top.
    faces: new MeshBasicMaterial({ vertexColors: true, side: DoubleSide, polygonOffset: true, polygonOffsetFactor: 1, polygonOffsetUnits: 1 }),
    curtain: new MeshBasicMaterial({ color: theme.light, side: DoubleSide, polygonOffset: true, polygonOffsetFactor: 2, polygonOffsetUnits: 2 }),
    ribbons: new MeshBasicMaterial({ vertexColors: true, side: DoubleSide }),
    hatch: new LineBasicMaterial({ color: theme.ink2, transparent: true, opacity: 0.55 }),
    water: new LineBasicMaterial({ color: theme.fault }),
    // Over the roof even where it lies inside: it is a note, not a thing.
    before: new LineBasicMaterial({ color: theme.ink2, depthTest: false }),
  }
  return { ...materials, dispose: () => Object.values(materials).forEach((material) => material.dispose()) }
}
