/**
 * The shapes of a DXF put in place: blocks unfolded, layers judged, curves made chords, all of it into a Sketch.
 *
 * Every unfolding is counted against fixed limits, so that a small file of blocks in blocks cannot fill the memory.
 */
import { fail, ok, type Problem, type Result } from '../base/result.ts'
import type { Steps } from '../base/steps.ts'
import { interiorPoints, mostChords } from './chords.ts'
import { placedCurve, placedPoints } from './dxf-curves.ts'
import { plainColour, plainLine, type DxfFile } from './dxf-file.ts'
import { tilted } from './dxf-head.ts'
import { after, inPlace, placedPoint, shift, type Placing } from './dxf-placing.ts'
import type { Common, Insert, Mesh, Path, Shape, Text } from './dxf-shapes.ts'
import { DxfSheet } from './dxf-sheet.ts'
import { farthest } from './text-number.ts'

/** Entities that a drawing may come to once its blocks are unfolded. */
export const mostEntities = 1_000_000
/** Blocks within blocks. */
export const deepest = 32

/** Entities, and points made of their curves, between two yields; each about 10 ms. */
const shapesPerStep = 2_000
const pointsPerStep = 50_000

/** Share by which the scales along x and y of a placed circle may differ. */
const sameScale = 1e-6

/** Where shapes are being put: how, in which block, on which layer. */
interface Surroundings {
  readonly placing: Placing
  /** Layer that "0" means here; null in the model itself. */
  readonly layer: string | null
  /** Names (lower case) of the blocks that are open. */
  readonly open: readonly string[]
  /** What "by block" means here. */
  readonly look: Drawn
}

/** Colour and line type, settled. */
interface Drawn {
  readonly colour: string
  readonly lineType: string
}

const plain: Drawn = { colour: plainColour, lineType: plainLine }

/** Puts the whole model into the sheet. */
export function* placeModel(file: DxfFile, sheet: DxfSheet): Steps<Result<null>> {
  // By the reference the entities of the model stand in ENTITIES; a few programs write them as its block instead.
  const model = file.blocks.get('*model_space')?.shapes ?? []
  const shapes = file.shapes.length > 0 ? file.shapes : model
  const problem = yield* new Placer(file, sheet).shapes(shapes, { placing: inPlace, layer: null, open: [], look: plain })
  if (problem !== null) return { ok: false, problem }
  if (shapes !== model) for (const { kind, layer } of model) sheet.sketch.leaveOut(`${kind}, in the block *Model_Space`, layer)
  for (const block of file.blocks.values()) {
    if (!/^[*$]paper_space/i.test(block.name)) continue
    for (const { kind, layer } of block.shapes) sheet.sketch.leaveOut(`${kind}, paper space`, layer)
  }
  return ok(null)
}

class Placer {
  private count = 0
  private pointsAtYield = 0

  constructor(private readonly file: DxfFile, private readonly sheet: DxfSheet) {}

  *shapes(shapes: readonly Shape[], around: Surroundings): Steps<Problem | null> {
    for (const shape of shapes) {
      this.count += 1
      if (this.count % shapesPerStep === 0 || this.sheet.sketch.pointCount - this.pointsAtYield > pointsPerStep) {
        this.pointsAtYield = this.sheet.sketch.pointCount
        yield { stage: 'Unfolding blocks', done: Math.min(1, this.count / mostEntities) }
      }
      const layer = shape.layer === '0' && around.layer !== null ? around.layer : shape.layer
      if (this.count > mostEntities) return tooMany(shape)
      const problem = shape.shape === 'insert' ? yield* this.insert(shape, layer, around) : this.entity(shape, layer, around)
      if (problem !== null) return problem
    }
    return null
  }

  private entity(shape: Exclude<Shape, Insert>, layer: string, { placing, look }: Surroundings): Problem | null {
    const { sheet } = this
    const reason = shape.onPaper ? 'paper space' : shape.invisible ? 'invisible' : sheet.hides(layer)
    if (reason !== null || shape.shape === 'other') {
      sheet.sketch.leaveOut(reason === null ? shape.kind : `${shape.kind}, ${reason}`, layer)
      return null
    }
    if (shape.shape === 'text') {
      // Words bound no panels: they are counted as left out, and kept for the names and levels among them.
      sheet.sketch.leaveOut(shape.kind, layer)
      this.text(shape, layer, placing)
      return null
    }
    const drawn = this.drawn(shape, layer, look)
    sheet.look = sheet.sketch.look(shape.kind, drawn.colour, drawn.lineType)
    switch (shape.shape) {
      case 'path': return this.path(shape, layer, placing)
      case 'mesh': return this.mesh(shape, layer, placing)
      case 'mark': return sheet.mark(placedPoint(placing, ...shape.point), layer, shape)
    }
  }

  /** Colour and line type of an entity, by its own word, its layer's or its block's. */
  private drawn({ colour, lineType }: Common, layer: string, block: Drawn): Drawn {
    const known = this.file.layers.get(layer.toLowerCase())
    return {
      colour: colour === null ? (known?.colour ?? plainColour) : colour === '0' ? block.colour : colour,
      lineType: lineType === null ? (known?.lineType ?? plainLine) : lineType === 'BYBLOCK' ? block.lineType : lineType,
    }
  }

  private text({ text, at, middle, height, tag, block, kind }: Text, layer: string, placing: Placing): void {
    const inPlan = (p: readonly [number, number, number]): [number, number] => {
      const [x, y] = placedPoint(placing, ...p)
      return [x, y]
    }
    const size = Math.sqrt(Math.abs(placing[0] * placing[5] - placing[1] * placing[4]))
    this.sheet.sketch.text({
      text, at: inPlan(at), middle: inPlan(middle), height: height * size, layer, kind, tag, block: block === null ? null : placedPoint(placing, ...block),
    })
  }

  private path(path: Path, layer: string, placing: Placing): Problem | null {
    const points = placing === inPlace ? path.points : placedPoints(placing, path.points)
    const heights = path.heights || tilted([0, 0, placing[8], 0, 0, 0, placing[9]])
    if (path.curves === null) return this.sheet.path(points, path.closed, heights, layer, path)
    const along: number[] = []
    let chords = 0
    for (let i = 0; 3 * i < points.length; i += 1) {
      along.push(points[3 * i], points[3 * i + 1], points[3 * i + 2])
      const curve = path.curves[i] ?? null
      if (curve === null) continue
      const inner = interiorPoints(placing === inPlace ? curve : placedCurve(placing, curve), this.sheet.sagitta)
      if (inner === null || along.length + inner.length > 3 * mostChords) return tooManyChords(path)
      for (const value of inner) along.push(value)
      chords += inner.length / 3 + 1
    }
    this.sheet.chorded(along, chords)
    if (path.round !== undefined) this.circle(path.round, placing)
    return this.sheet.path(along, path.closed, heights, layer, path)
  }

  /** A circle that is still one in plan: its block is not drawn out one way, nor tilted. */
  private circle({ centre, radius }: NonNullable<Path['round']>, m: Placing): void {
    const [a, b] = [Math.hypot(m[0], m[4]), Math.hypot(m[1], m[5])]
    if (Math.abs(a - b) > sameScale * a || tilted(m)) return
    const [x, y] = placedPoint(m, ...centre)
    this.sheet.sketch.circle({ point: this.sheet.sketch.pointCount, at: [x, y], radius: radius * a })
  }

  private mesh(mesh: Mesh, layer: string, placing: Placing): Problem | null {
    return this.sheet.mesh(placing === inPlace ? mesh.points : placedPoints(placing, mesh.points), mesh, layer)
  }

  private *insert(insert: Insert, layer: string, around: Surroundings): Steps<Problem | null> {
    const { sheet, file } = this
    const key = insert.block.toLowerCase()
    const block = file.blocks.get(key)
    const frozen = sheet.hides(layer) === 'layer frozen' ? 'layer frozen' : null
    const reason = insert.onPaper ? 'paper space' : insert.invisible ? 'invisible' : frozen
    const absent = block === undefined ? 'its block is not in the file' : block.external ? 'its block is in another file' : null
    if (block === undefined || absent !== null || reason !== null) {
      sheet.sketch.leaveOut(`INSERT, ${reason ?? absent}`, layer)
      return null
    }
    const cure = 'explode the block or leave it out'
    if (around.open.includes(key)) return trouble(insert, 'block-in-itself', 'its block contains itself', cure)
    if (around.open.length >= deepest) return trouble(insert, 'too-deep', `its block is nested more than ${deepest} deep`, cure)
    const { columns, rows, columnStep, rowStep } = insert
    if (columns * rows > mostEntities) return tooMany(insert)
    // The block's own point is where its base point comes to.
    const [px, py, pz] = placedPoint(around.placing, ...placedPoint(insert.placing, 0, 0, 0))
    if (around.open.length === 0 && pz !== 0 && Math.abs(px) <= farthest && Math.abs(py) <= farthest) sheet.sketch.block({ name: block.name, at: [px, py, pz], layer })
    const open = [...around.open, key]
    const look = this.drawn(insert, layer, around.look)
    const [x, y, z] = block.base
    for (let row = 0; row < rows; row += 1) {
      for (let column = 0; column < columns; column += 1) {
        this.count += 1
        const offset = [0, 1, 2].map((k) => column * columnStep[k] + row * rowStep[k])
        const placing = after(around.placing, after(shift(offset[0], offset[1], offset[2]), after(insert.placing, shift(-x, -y, -z))))
        const problem = yield* this.shapes(block.shapes, { placing, layer, open, look })
        if (problem !== null) return problem
        if (this.count > mostEntities) return tooMany(insert)
      }
      yield { stage: 'Unfolding blocks', done: Math.min(1, this.count / mostEntities) }
    }
    return null
  }
}

function trouble({ line, entity }: Shape, code: string, message: string, cure: string): Problem {
  return fail(code, message, { line, entity }, cure).problem
}

function tooMany(shape: Shape): Problem {
  return trouble(shape, 'too-many', `with its blocks unfolded the drawing has more than ${mostEntities} entities`, 'export only the panels')
}

function tooManyChords(shape: Shape): Problem {
  return trouble(shape, 'too-many', `it would take more than ${mostChords} chords`, 'allow a larger sagitta (--sagitta) or check the unit')
}
