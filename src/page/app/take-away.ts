/** Files to the user's downloads: drawings as SVG and PNG from the same lists that the panes show. */
import { metres } from '../../base/length.ts'
import { planDrawing } from '../../paper/drawing/plan-drawing.ts'
import type { DisplayList } from '../../paper/drawing/display-list.ts'
import { stockView } from '../../paper/drawing/projection.ts'
import { roofDrawing } from '../../paper/drawing/roof-drawing.ts'
import { slopeChart } from '../../paper/drawing/slope-chart.ts'
import { toSvg } from '../../paper/drawing/svg.ts'
import { themes } from '../../paper/drawing/theme.ts'
import { defaultFlat_mm } from '../../plan/project/wishes.ts'
import { paintList } from '../view/list-painter.ts'
import type { Desk } from '../store/desk.ts'
import { jointsOf, readingFor } from './useReading.ts'

export type DrawingName = 'plan' | 'chart' | 'roof'

export function saveBytes(name: string, bytes: Uint8Array, type: string): void {
  const url = URL.createObjectURL(new Blob([bytes as Uint8Array<ArrayBuffer>], { type }))
  const link = document.createElement('a')
  link.href = url
  link.download = name
  link.click()
  setTimeout(() => URL.revokeObjectURL(url), 10_000)
}

/** The drawing of the roof in hand as a list; null when there is none. */
export function drawingOf(desk: Desk, name: DrawingName, width: number, height: number): DisplayList | null {
  const { answer, doc, reading: readingName, side, exaggeration, slopeUnit } = desk.state
  if (answer === null || answer.roof === null || doc === null) return null
  const joints = jointsOf(answer)
  const reading = readingFor(answer, readingName, doc.leastSlope, doc.brief.flat_mm ?? defaultFlat_mm)
  switch (name) {
    case 'plan': return planDrawing(answer, { width, height, reading, joints, window: null, selection: null, furniture: true })
    case 'chart': return slopeChart(answer, { width, height, joints, leastSlope: doc.leastSlope, unit: slopeUnit, window: null, selection: null, before: null, tones: null })
    case 'roof': return roofDrawing(answer, { width, height, reading, joints, view: stockView(side, -1.35 / metres[answer.plan.unit]), exaggeration, scale: null, selection: null })
  }
}

/** Writes a drawing by day, as for paper; the name of the file, or null when there is no roof. */
export async function takeDrawing(desk: Desk, name: DrawingName, format: 'svg' | 'png'): Promise<string | null> {
  const list = drawingOf(desk, name, name === 'chart' ? 900 : 1200, 900)
  if (list === null) return null
  const file = `${name}.${format}`
  if (format === 'svg') {
    saveBytes(file, new TextEncoder().encode(toSvg(list, themes.day)), 'image/svg+xml')
    return file
  }
  const canvas = document.createElement('canvas')
  canvas.width = list.width * 2
  canvas.height = list.height * 2
  const context = canvas.getContext('2d')
  if (context === null) return null
  paintList(context, list, themes.day, 2)
  const blob = await new Promise<Blob | null>((resolve) => canvas.toBlob(resolve, 'image/png'))
  if (blob === null) return null
  saveBytes(file, new Uint8Array(await blob.arrayBuffer()), 'image/png')
  return file
}
