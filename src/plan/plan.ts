/**
 * The plan: a straight-line subdivision of a region of the plane, as half-edges in typed arrays.
 *
 * Index conventions, once:
 * - An edge e has two half-edges, 2e and 2e + 1; the twin of h is h ^ 1, its edge is h >> 1. Half-edge 2e runs from the
 *   edge's lower node to its higher one.
 * - Edges 0 .. jointCount - 1 are the joints (a panel on each side), sorted by (lower node, higher node); the rim edges
 *   follow, sorted likewise. So joint j is edge j.
 * - Panels, nodes and joints are named by their index plus one: P1, N1, J1 (see `names.ts`).
 * - -1 means none.
 */
import type { Unit } from '../base/length.ts'

export interface Plan {
  readonly unit: Unit
  readonly nodeCount: number
  readonly panelCount: number
  readonly edgeCount: number
  readonly jointCount: number

  /** Coordinates as read, in the plan's unit and place (length nodeCount each). Written back unchanged. */
  readonly x: Float64Array
  readonly y: Float64Array
  /** Working coordinates x0 y0 x1 y1 ..: centred and scaled so that the longer side of the bounding box is 1. */
  readonly work: Float64Array
  /** work = (coordinate - centre) / span. `span` is in the plan's unit. */
  readonly frame: { readonly centreX: number; readonly centreY: number; readonly span: number }

  /** Node at which half-edge h starts (length 2 * edgeCount). It ends at origin[h ^ 1]. */
  readonly origin: Int32Array
  /** Next half-edge round the same panel (counter-clockwise) or, where there is no panel, along the same rim loop. */
  readonly next: Int32Array
  /** Panel on the left of half-edge h, -1 where the outside or a void is. */
  readonly panelOf: Int32Array

  /** Corners of panel p, counter-clockwise: corner[panelStart[p] .. panelStart[p + 1]). 180 degree corners included. */
  readonly panelStart: Int32Array
  readonly corner: Int32Array
  /** Half-edge that leaves each corner along its panel (same length as `corner`). */
  readonly cornerHalf: Int32Array

  /**
   * Rim loops: half-edges without a panel, rimHalf[rimStart[l] .. rimStart[l + 1]), in order. A loop stays in one fan
   * of panels where it passes a pinch node. The outside or void lies on its left, so outer loops run clockwise.
   */
  readonly rimStart: Int32Array
  readonly rimHalf: Int32Array
  /** 1 where the loop bounds a void, 0 where it is an outer rim. */
  readonly rimIsVoid: Uint8Array

  /** Part (component of panels connected across joints) of each panel, and how many parts there are. */
  readonly partOf: Int32Array
  readonly partCount: number

  /** How often a rim passes each node: 0 interior, 1 ordinary rim node, more: a pinch node. */
  readonly rimPasses: Int32Array
}

/** Nodes that no rim passes. */
export function interiorNodeCount(plan: Plan): number {
  let count = 0
  for (const passes of plan.rimPasses) if (passes === 0) count += 1
  return count
}

/** Rim loops that bound voids, as traced along the panels. */
export function voidCount(plan: Plan): number {
  let count = 0
  for (const isVoid of plan.rimIsVoid) count += isVoid
  return count
}
