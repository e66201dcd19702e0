/** Entities in, the drawing that the reader makes of them out. */
import type { FormatOptions } from '../../src/formats/format.ts'
import type { Drawing } from '../../src/plan/drawing.ts'
import { dxfText, type Content, type Written } from './dxf-writer.ts'
import { drawingOf } from './text-read.ts'

export const drawn = (entities: readonly Written[], content: Partial<Content> = {}, options: Partial<FormatOptions> = {}): Drawing =>
  drawingOf(dxfText({ ...content, entities }), 'plan.dxf', options)
